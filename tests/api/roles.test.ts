import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { encode } from "next-auth/jwt";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { z } from "zod";
import { inLab } from "../../db/in-lab";
import { createSession } from "../../db/queries/sessions";
import type { Operation } from "../../lib/api/operation";
import { OPERATIONS } from "../../lib/api/operations";
import { toApiPath } from "../../lib/api/client";
import { UPLOADS_PATH } from "../../lib/api/runs";
import { ROLES } from "../../lib/roles/roles";
import { cloneDir } from "../../scripts/setup/bootstrap.mjs";
import { makeTestLab, makeTestMember, type TestMember } from "../support/lab-bench";
import { toMetadata } from "../support/tus";
import { makeThings, type Things } from "./role-things";
import { ROLE_TABLE, type RoleRow, type Verdict } from "./role-table";
import { openApiBench, validateResponse, type ApiBench } from "./support";

const CALLERS = [...ROLES, "otherLab", "nobody"] as const;
type Caller = (typeof CALLERS)[number];

let bench: ApiBench;
let looked: Things;
const cookies = new Map<Caller, string>();
beforeAll(async () => {
  bench = await openApiBench();
  for (const role of ROLES) {
    cookies.set(role, await signIn(await makeTestMember(bench, bench.labId, role, [role])));
  }
  looked = await makeThings(bench);
  cookies.set("otherLab", await signIn((await makeTestLab(bench, "other")).all));
});
afterAll(() => bench.stop());

/** A browser's session: some operations are for a person, not for a token. */
async function signIn({ scope }: TestMember): Promise<string> {
  const sessionId = await inLab(bench.app, scope, (trx) =>
    createSession(trx, { ...scope, userAgent: "test", ip: "192.0.2.1" }),
  );
  const token = await encode({ token: { sessionId }, secret: bench.database.secrets.session });
  return `tidemark-session-${new URL(bench.product.url).port}=${token}`;
}

/** What each operation needs besides the ids of its path. */
const INPUTS: Readonly<Record<string, (things: Things) => { body?: unknown; query?: object }>> = {
  createLoudspeaker: () => ({ body: { maker: "A", model: "B", kind: "other" } }),
  updateLoudspeaker: () => ({ body: { serial: "7" } }),
  createSeries: ({ loudspeakerId }) => ({ body: { loudspeaker_id: loudspeakerId } }),
  createSeriesFromFolder: () => ({
    body: {
      series_json: JSON.stringify({
        loudspeaker: "A B",
        environment: "anechoic",
        distance_m: 1,
        stimulus: { start_Hz: 20, stop_Hz: 20_000, length_s: 2, rate_Hz: 48_000 },
        calibration: { full_scale_dB: 124 },
        runs: [
          { file: "76.wav", level_dB: 76 },
          { file: "86.wav", level_dB: 86 },
        ],
      }),
      loudspeaker: { maker: "A", model: "B", kind: "other" },
    },
  }),
  updatePlan: ({ plan }) => ({ body: { plan, plan_version: 1 } }),
  updateCriteria: ({ plan }) => ({ body: { criteria: plan.criteria, plan_version: 1 } }),
  actOnRun: () => ({ body: { act: "exclude", reason: "a reason" } }),
  excuseSlot: () => ({ body: { reason: "a reason" } }),
  decideBands: () => ({
    body: { decisions: [{ nominal_Hz: 125, cause: "none", seen_version: 0 }] },
  }),
  keepDecisions: ({ analysisId }) => ({ body: { from: analysisId } }),
  compareAnalyses: ({ analysisId }) => ({ query: { against: analysisId } }),
  compareSeries: ({ seriesId }) => ({ query: { series: seriesId } }),
  writeComment: () => ({ body: { nominal_Hz: null, words: "steep" } }),
  requestRun: () => ({ body: { level_dB: 80, reason: "a reason" } }),
  signOff: () => ({
    body: { criterion: { compression_dB: 3 }, decisions_digest: "0".repeat(64) },
  }),
  removeRecordings: () => ({ body: { reason: "a reason" } }),
  reopenSeries: () => ({ body: { reason: "a reason" } }),
  setMemberRoles: () => ({ body: { roles: ["tester"] } }),
  createInvitation: () => ({
    body: { email: `new.${crypto.randomUUID()}@lab.test`, roles: ["tester"] },
  }),
  updateLab: () => ({ body: { time_zone: "Europe/London" } }),
  createToken: () => ({ body: { name: "mine", roles: [...ROLES] } }),
  switchLab: ({ labId }) => ({ body: { lab_id: labId } }),
  updateAccount: () => ({ body: { theme: "dark" } }),
  changePassword: () => ({ body: { current: "wrong", next: "a long enough password" } }),
  chooseNotice: () => ({ body: { kind: "published", wanted: false } }),
  requestAddressChange: () => ({
    body: { email: `new.${crypto.randomUUID()}@lab.test`, password: "wrong" },
  }),
  requestPasswordReset: () => ({ body: { email: `no.${crypto.randomUUID()}@lab.test` } }),
  resetPassword: () => ({
    body: { secret: "a secret that nobody was given", password: "a long enough password" },
  }),
  lookAtAccountLink: () => ({ body: { secret: "a secret that nobody was given" } }),
  confirmAddress: () => ({ body: { secret: "a secret that nobody was given" } }),
  lookAtInvitation: () => ({ body: { secret: "a secret that nobody was given" } }),
  acceptInvitation: () => ({
    body: { secret: "a secret that nobody was given", name: "N", password: "a long enough one" },
  }),
  sendMicrophoneFile: () => ({
    body: "20 0.0\n1000 0.0\n20000 0.1\n",
    query: { file_name: "m.txt" },
  }),
  publish: () => ({ body: { supplied_by: "bought by the lab" } }),
  draftPublication: () => ({ body: {} }),
  withdrawPublication: () => ({ body: { reason: "a reason" } }),
  createPreview: () => ({ body: { supplied_by: "bought by the lab", for_whom: "the maker" } }),
  answerMakerComment: () => ({ body: { answer: "an answer" } }),
  putLoudspeakerPhoto: () => ({ body: "\x89PNG" }),
};

async function ask(operation: Operation, things: Things, caller: Caller): Promise<Response> {
  const { body, query } = INPUTS[operation.id]?.(things) ?? {};
  const params = { ...things, slot: "short-76" };
  const raw = typeof body === "string";
  const response = await send(caller, toApiPath(operation, params, query), {
    method: operation.method,
    headers: { "content-type": raw ? "text/plain" : "application/json" },
    ...(body === undefined ? {} : { body: raw ? body : JSON.stringify(body) }),
  });
  await validateResponse(operation, response);
  return response;
}

function send(caller: Caller, path: string, init: RequestInit): Promise<Response> {
  const headers = new Headers(init.headers);
  headers.set("origin", bench.product.url);
  const cookie = cookies.get(caller);
  if (cookie !== undefined) headers.set("cookie", cookie);
  return fetch(`${bench.product.url}${path}`, { ...init, headers });
}

const TUS = { "tus-resumable": "1.0.0" };
/** The tus requests, which are no operations of the document's making. */
const TUS_REQUESTS: Readonly<
  Record<string, (things: Things, caller: Caller) => Promise<Response>>
> = {
  createUpload: ({ seriesId }, caller) =>
    send(caller, UPLOADS_PATH, {
      method: "POST",
      headers: {
        ...TUS,
        "upload-length": "100",
        "upload-metadata": toMetadata({ seriesId, fileName: "x.wav" }),
      },
    }),
  getUploadOffset: ({ uploadId }, caller) =>
    send(caller, `${UPLOADS_PATH}/${uploadId}`, { method: "HEAD", headers: TUS }),
  sendUploadBytes: ({ uploadId }, caller) =>
    send(caller, `${UPLOADS_PATH}/${uploadId}`, {
      method: "PATCH",
      headers: {
        ...TUS,
        "upload-offset": "0",
        "content-type": "application/offset+octet-stream",
      },
      body: "0123456789",
    }),
  stopUpload: ({ uploadId }, caller) =>
    send(caller, `${UPLOADS_PATH}/${uploadId}`, { method: "DELETE", headers: TUS }),
};

const problemCode = z.object({ code: z.string() });

async function judge(response: Response, method: string): Promise<Verdict> {
  if (response.status < 400) {
    await response.body?.cancel();
    return "yes";
  }
  if (method === "HEAD") {
    const byStatus: Record<number, Verdict> = { 401: "sign in", 403: "no", 404: "not there" };
    return byStatus[response.status] ?? "yes";
  }
  const { code } = problemCode.parse(await response.json());
  const byCode: Record<string, Verdict> = {
    "auth.required": "sign in",
    "auth.forbidden": "no",
    "not-found": "not there",
    "upload.not-found": "not there",
  };
  // Allowed: our things have rows, but bytes of no recording.
  if (code === "storage.missing") return "yes";
  if (response.status >= 500) throw new Error(`${response.url}: ${response.status} ${code}`);
  return byCode[code] ?? "yes";
}

/** Uploads belong to who began them: a colleague may not go on with them either. */
const OWN_UPLOAD = new Set(["getUploadOffset", "sendUploadBytes", "stopUpload"]);
/** There is no photo yet. */
const EMPTY = new Set(["getLoudspeakerPhoto"]);

describe("the role table", () => {
  it("has a line for every operation, and none for what is not there", () => {
    const named = ROLE_TABLE.map((row) => row.operation);
    expect(new Set(named).size).toBe(named.length);
    const known = [...OPERATIONS.map((one) => one.id), ...Object.keys(TUS_REQUESTS)];
    expect(named.toSorted()).toEqual(known.toSorted());
  });

  it("reaches every route file: each exports exactly the methods of its operations", () => {
    const byPath = new Map<string, string[]>();
    for (const { path, method } of OPERATIONS) {
      byPath.set(path, [...(byPath.get(path) ?? []), method]);
    }
    const free = ["/api/openapi.json", "/api/auth/{...nextauth}", "/api/v1/uploads/{[...path]}"];
    const found = listRoutes().filter(({ path }) => !free.includes(path));
    expect(found.map(({ path }) => path).toSorted()).toEqual([...byPath.keys()].toSorted());
    for (const { path, methods } of found) {
      expect([path, methods.toSorted()]).toEqual([path, byPath.get(path)?.toSorted()]);
    }
  });

  it.each(ROLE_TABLE)("$operation", async (row: RoleRow) => {
    for (const caller of CALLERS) {
      const tus = TUS_REQUESTS[row.operation];
      const operation = OPERATIONS.find((one) => one.id === row.operation);
      // What only reads may look at the same things; what takes away gets its own.
      const things = operation?.method === "GET" ? looked : await makeThings(bench);
      if (tus === undefined && operation === undefined) throw new Error("no such operation");
      const response = await (tus === undefined
        ? ask(operation as Operation, things, caller)
        : tus(things, caller));
      const verdict = await judge(response, row.operation === "getUploadOffset" ? "HEAD" : "GET");
      const hidden = OWN_UPLOAD.has(row.operation) || EMPTY.has(row.operation);
      const wanted = hidden && row[caller] === "yes" ? "not there" : row[caller];
      expect([caller, verdict]).toEqual([caller, wanted]);
    }
  });
});

function listRoutes(): { path: string; methods: string[] }[] {
  const folder = join(cloneDir, "app", "api");
  return readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && entry.name === "route.ts")
    .map((entry) => {
      const source = readFileSync(join(entry.parentPath, entry.name), "utf8");
      const methods = [
        ...source.matchAll(/^export (?:const|function|async function) ([A-Z]+)\b/gm),
      ];
      const place = entry.parentPath.slice(folder.length);
      return {
        path: `/api${place.replaceAll(/\[(\[?.*?\]?)\](?=\/|$)/g, "{$1}")}`,
        methods: methods.flatMap((found) => (found[1] === undefined ? [] : [found[1]])),
      };
    });
}
