/** The people side of the API called as route handlers, in a process whose settings point to a database of its own. */
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { encode } from "next-auth/jwt";
import { afterAll, beforeAll } from "vitest";
import type { RouteHandler } from "../../../app/_server/handle";
import { inLab } from "../../../db/in-lab";
import { createSession } from "../../../db/queries/sessions";
import { createToken } from "../../../db/queries/tokens";
import { createToken as createSecretToken, digestSecret } from "../../../lib/account/secrets";
import { problemSchema } from "../../../lib/api/common";
import type { Role } from "../../../lib/roles/roles";
import { type Bench, openDatabase } from "../../db/support";

export const PUBLIC_URL = "http://lab.test";

export function openServer(): Bench {
  const bench = openDatabase();
  let folder = "";
  beforeAll(() => {
    folder = mkdtempSync(join(tmpdir(), "tidemark-people-"));
    writeFileSync(join(folder, "secrets.json"), JSON.stringify(bench.database.secrets));
    Object.assign(process.env, {
      TIDEMARK_DATA_DIR: folder,
      TIDEMARK_DB_PORT: String(bench.database.databasePort),
      TIDEMARK_DB_NAME: bench.database.databaseName,
      TIDEMARK_PUBLIC_URL: PUBLIC_URL,
      TIDEMARK_LOG_LEVEL: "fatal",
    });
  });
  afterAll(async () => {
    const { getDatabase } = await import("../../../app/_server/database");
    await getDatabase().destroy();
    rmSync(folder, { recursive: true, force: true });
  });
  return bench;
}

/** Headers of a caller. */
export type Credentials = Record<string, string>;

/** A session of the member, as a browser on our own page carries it. */
export async function openSession(
  bench: Bench,
  member: { labId: string; accountId: string },
): Promise<Credentials & { sessionId: string }> {
  const sessionId = await inLab(bench.app, member, (trx) =>
    createSession(trx, { ...member, userAgent: "test", ip: "192.0.2.1" }),
  );
  return { ...(await toCookie(bench, sessionId)), sessionId };
}

export async function toCookie(bench: Bench, sessionId: string): Promise<Credentials> {
  const token = await encode({ token: { sessionId }, secret: bench.database.secrets.session });
  return { cookie: `tidemark-session=${token}`, origin: PUBLIC_URL };
}

export async function openToken(
  bench: Bench,
  member: { labId: string; accountId: string },
  roles: Role[],
  expiresAt: Date | null = null,
): Promise<Credentials & { tokenId: string }> {
  const { token, prefix } = createSecretToken();
  const tokenId = await inLab(bench.app, member, (trx) =>
    createToken(trx, {
      ...member,
      name: "script",
      tokenHash: digestSecret(token),
      prefix,
      roles,
      expiresAt,
    }),
  );
  return { authorization: `Bearer ${token}`, tokenId };
}

export interface Answer {
  status: number;
  /** JSON, null where the body is empty. */
  body: unknown;
  headers: Headers;
}

/** Calls a handler as Next.js does. Only cookie, origin and authorization of `who` are sent. */
export async function call(
  handler: RouteHandler,
  method: string,
  who: Credentials,
  input: { params?: Record<string, string>; query?: string; body?: unknown } = {},
): Promise<Answer> {
  const headers = new Headers();
  for (const name of ["cookie", "origin", "authorization"]) {
    if (who[name] !== undefined) headers.set(name, who[name]);
  }
  if (input.body !== undefined) headers.set("content-type", "application/json");
  const response = await handler(
    new Request(`${PUBLIC_URL}/api/v1/x${input.query ?? ""}`, {
      method,
      headers,
      body: input.body === undefined ? null : JSON.stringify(input.body),
    }),
    { params: Promise.resolve(input.params ?? {}) },
  );
  const text = await response.text();
  return {
    status: response.status,
    body: text === "" ? null : (JSON.parse(text) as unknown),
    headers: response.headers,
  };
}

/** The code of an answer that is a whole problem document, and nothing less. */
export function problemCode(answer: Answer): string {
  const problem = problemSchema.parse(answer.body);
  const faults = [
    answer.headers.get("content-type") === "application/problem+json" ? "" : "content type",
    answer.headers.get("cache-control") === "no-store" ? "" : "cache",
    problem.status === answer.status ? "" : "status",
    problem.instance === "/api/v1/x" ? "" : "instance",
    problem.requestId === answer.headers.get("x-request-id") ? "" : "request id",
    problem.detail.length > 10 ? "" : "detail",
  ].filter((fault) => fault !== "");
  return faults.length === 0 ? problem.code : `${problem.code} with a wrong ${faults.join(", ")}`;
}
