/** The tus server over the staging folder: one per process, since its locks lie in memory. */
import { randomBytes } from "node:crypto";
import { Server } from "@tus/server";
import { UPLOADS_PATH } from "../../../lib/api/runs";
import { getStagingFolder } from "../storage";
import { StagingStore } from "./staging-store";

/** What a request brings along: who asks, and what our own hooks do. */
export interface UploadHooks {
  onCreate: (upload: {
    id: string;
    bytes: number;
    metadata: Record<string, string | null> | undefined;
  }) => Promise<void>;
  /** @returns headers of the answer to the last byte. */
  onFinish: (id: string) => Promise<Record<string, string>>;
  /** What was thrown, before the tus server turns it into a status. */
  thrown: unknown;
}

interface Held {
  server: Server;
  hooks: WeakMap<object, UploadHooks>;
}

const holder = globalThis as typeof globalThis & { tidemarkUploads?: Held };

/** Runs one tus request with its own hooks. */
export function handleTus(request: Request, hooks: UploadHooks): Promise<Response> {
  const held = (holder.tidemarkUploads ??= createServer());
  held.hooks.set(request, hooks);
  return held.server.handleWeb(request);
}

function createServer(): Held {
  const hooks = new WeakMap<object, UploadHooks>();
  const hooksOf = (request: object): UploadHooks => {
    const found = hooks.get(request);
    if (found === undefined) throw new Error("an upload request came without its hooks");
    return found;
  };
  const server = new Server({
    path: UPLOADS_PATH,
    datastore: new StagingStore(getStagingFolder()),
    relativeLocation: true,
    // Same origin only: no CORS header leaves us.
    allowedOrigins: [],
    namingFunction: () => randomBytes(16).toString("hex"),
    onUploadCreate: async (request, upload) => {
      await hooksOf(request).onCreate({
        id: upload.id,
        bytes: upload.size ?? 0,
        metadata: upload.metadata,
      });
      return {};
    },
    onUploadFinish: async (request, upload) => ({
      headers: await hooksOf(request).onFinish(upload.id),
    }),
    onResponseError: (request, error) => {
      hooksOf(request).thrown = error;
      return undefined;
    },
  });
  return { server, hooks };
}
