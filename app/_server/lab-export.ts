/**
 * Everything that a lab owns as one ZIP, made while it is sent: tables as lines of JSON, results,
 * publications, recordings by digest, and at the end a manifest and the digest of every file.
 */
import { createHash } from "node:crypto";
import { inLab, type LabScope } from "../../db/in-lab";
import type { Db } from "../../db/client";
import { recordEvent } from "../../db/queries/audit";
import { getLab } from "../../db/queries/labs";
import {
  EXPORTED_TABLES,
  listAllRecordings,
  listFinished,
  listRevisions,
  readExportPage,
  type ExportedName,
} from "../../db/queries/lab-export";
import { listMembers } from "../../db/queries/members";
import { getSnapshotText } from "../../db/queries/publications";
import { getResult } from "../../db/queries/results";
import { toSeriesNumber } from "../../db/queries/series";
import { ENGINE_VERSION } from "../../lib/analysis/engine-version";
import { SUMS_FILE } from "../../lib/evidence/evidence-schema";
import { toResultText } from "../../lib/result/result-text";
import type { RecordingStore } from "../../lib/storage/recording-store";

interface ExportTools {
  db: Db;
  store: RecordingStore;
  scope: LabScope;
}

interface Entry {
  name: string;
  input: ReadableStream<Uint8Array> | Uint8Array<ArrayBuffer>;
}

/** @returns the entries in their order; each is made when its turn comes. The trail tells of it. */
export async function* exportLab(tools: ExportTools, folder: string): AsyncGenerator<Entry> {
  const { db, store, scope } = tools;
  const { labId } = scope;
  const from = new Date();
  const sums: string[] = [];
  const within = <T>(act: Parameters<typeof inLab<T>>[2]): Promise<T> => inLab(db, scope, act);
  const toText = (name: string, text: string): Entry => {
    sums.push(`${createHash("sha256").update(text).digest("hex")}  ${name}\n`);
    return { name: `${folder}/${name}`, input: new TextEncoder().encode(text) };
  };
  const toStream = (name: string, pieces: AsyncIterable<Uint8Array>): Entry => ({
    name: `${folder}/${name}`,
    input: digesting(pieces, (digest) => sums.push(`${digest}  ${name}\n`)),
  });

  const { lab, members, finished, revisions, recordings } = await within(async (trx) => {
    await recordEvent(trx, scope, { act: "lab.exported", subjectType: "lab", subjectId: labId });
    return {
      lab: await getLab(trx, labId),
      members: await listMembers(trx, labId),
      finished: await listFinished(trx, labId),
      revisions: await listRevisions(trx, labId),
      recordings: await listAllRecordings(trx, labId),
    };
  });
  yield toText("lab.json", toJson(lab));
  yield toText("members.json", toJson(members));
  for (const table of Object.keys(EXPORTED_TABLES) as ExportedName[]) {
    yield toStream(`tables/${table}.ndjson`, readTable(tools, table));
  }
  for (const { id, number, version } of finished) {
    const result = await within((trx) => getResult(trx, labId, id));
    yield toText(`results/${toSeriesNumber(number)}_v${version}.json`, toResultText(result));
  }
  for (const { id, slug, revision } of revisions) {
    const snapshot = await within((trx) => getSnapshotText(trx, labId, id));
    yield toText(`publications/${slug}/${revision}.json`, snapshot);
  }
  const missing: string[] = [];
  const removed: string[] = [];
  for (const { digest, media, removed_at } of recordings) {
    if (removed_at !== null) removed.push(digest);
    else if (await store.has(digest)) {
      yield toStream(
        `recordings/${digest}.${toEnding(media)}`,
        toPieces(await store.stream(digest)),
      );
    } else missing.push(digest);
  }
  const manifest = {
    format: "tidemark-lab-1",
    lab: lab.slug,
    engine_version: ENGINE_VERSION,
    /** Rows that were written in between may be in it or not. */
    from: from.toISOString(),
    until: new Date().toISOString(),
    files: sums.length + 1,
    recordings: recordings.length - removed.length - missing.length,
    removed_recordings: removed,
    missing_recordings: missing,
  };
  yield toText("manifest.json", toJson(manifest));
  const input = new TextEncoder().encode(sums.join(""));
  yield { name: `${folder}/${SUMS_FILE}`, input };
}

const toJson = (value: unknown): string => `${JSON.stringify(value, null, 2)}\n`;

/** One row a line. */
async function* readTable(
  { db, scope }: ExportTools,
  table: ExportedName,
): AsyncGenerator<Uint8Array> {
  let after: Record<string, unknown> | null = null;
  do {
    const page: Awaited<ReturnType<typeof readExportPage>> = await inLab(db, scope, (trx) =>
      readExportPage(trx, scope.labId, table, after),
    );
    const lines = page.rows.map((row) => `${JSON.stringify(row)}\n`);
    yield new TextEncoder().encode(lines.join(""));
    after = page.last;
  } while (after !== null);
}

async function* toPieces(stream: ReadableStream<Uint8Array>): AsyncGenerator<Uint8Array> {
  const reader = stream.getReader();
  try {
    for (;;) {
      const { done, value } = await reader.read();
      if (done) return;
      yield value;
    }
  } finally {
    await reader.cancel();
  }
}

/** The same pieces; their digest is told at the end. */
function digesting(
  pieces: AsyncIterable<Uint8Array>,
  tell: (digest: string) => void,
): ReadableStream<Uint8Array> {
  const hash = createHash("sha256");
  const iterator = pieces[Symbol.asyncIterator]();
  return new ReadableStream({
    async pull(controller) {
      const next = await iterator.next();
      if (next.done === true) {
        tell(hash.digest("hex"));
        controller.close();
        return;
      }
      hash.update(next.value);
      controller.enqueue(next.value);
    },
    async cancel() {
      await iterator.return?.();
    },
  });
}

/** "audio/wav" ends with "wav". */
const toEnding = (media: string): string =>
  /\/([a-z0-9]+)$/.exec(media)?.[1]?.replace("plain", "txt") ?? "bin";
