/** Card, pictures, report and values of one revision, drawn once per state. */
import { toCardPage } from "../../../components/reader/card";
import { toCardPng, toCardSvg, toLinkPng, THEMES, type Theme } from "../../../lib/kit/pictures";
import { toStandingSentence, type Standing } from "../../../lib/kit/standing";
import { toValuesCsv, toValuesJson } from "../../../lib/kit/values";
import { getEnvironment } from "../../../lib/config/environment";
import { parseRevision, toRevisionPath } from "../../../lib/publication/addresses";
import { parseSnapshotText } from "../../../lib/publication/canonical";
import type { Snapshot } from "../../../lib/publication/snapshot-schema";
import { answerPage, packBytes, packPage, type PackedPage } from "./answer-page";
import { answerNotFound, answerReader } from "./plain-answers";
import { findRevision, readSnapshotText, type RevisionRows } from "./publication-page";

/** What a part is drawn from. */
interface KitInput {
  snapshot: Snapshot;
  /** The snapshot's kept text. */
  text: string;
  digest: string;
  standing: Standing;
  /** Absolute address of the revision's page. */
  page: string;
  /** Part of file names: "osier-8a-1". */
  stem: string;
  theme: Theme | null;
}

/** Pictures stand in pages of others, and data is read by their scripts. */
const FOR_OTHERS = {
  "access-control-allow-origin": "*",
  "cross-origin-resource-policy": "cross-origin",
};

const saveAs = (name: string): Record<string, string> => ({
  "content-disposition": `attachment; filename="${name}"`,
});

interface KitPart {
  /** A withdrawn revision has this part, too: it says that it was withdrawn. */
  saysWithdrawn: boolean;
  /** Whether `?theme=` changes it. */
  themed: boolean;
  draw: (input: KitInput, status: number) => PackedPage;
}

const picture =
  (mediaType: string, draw: (input: KitInput & { theme: Theme }) => Uint8Array | string) =>
  (input: KitInput, status: number): PackedPage => {
    const drawn = draw({ ...input, theme: input.theme ?? "light" });
    const bytes = typeof drawn === "string" ? Buffer.from(drawn, "utf8") : drawn;
    return packBytes(status, mediaType, bytes, FOR_OTHERS);
  };

const PARTS: Readonly<Record<string, KitPart>> = {
  card: {
    saysWithdrawn: true,
    themed: true,
    draw: (input, status) => ({ ...packPage(status, toCardPage(input)), framed: true }),
  },
  "figure.svg": { saysWithdrawn: true, themed: true, draw: picture("image/svg+xml", toCardSvg) },
  "figure.png": { saysWithdrawn: true, themed: true, draw: picture("image/png", toCardPng) },
  "og.png": { saysWithdrawn: true, themed: false, draw: picture("image/png", toLinkPng) },
  "values.csv": {
    saysWithdrawn: false,
    themed: false,
    draw: (input, status) =>
      packBytes(status, "text/csv; charset=utf-8", Buffer.from(toValuesCsv(input)), {
        ...FOR_OTHERS,
        ...saveAs(`${input.stem}.csv`),
      }),
  },
  "values.json": {
    saysWithdrawn: false,
    themed: false,
    draw: (input, status) =>
      packBytes(status, "application/json", Buffer.from(toValuesJson(input, input.text)), {
        ...FOR_OTHERS,
        ...saveAs(`${input.stem}.json`),
      }),
  },
};

const KEPT = 200;
const kept = new Map<string, PackedPage>();

/** @param params of /t/[lab]/[series]/[revision]/[file] */
export function answerKit(
  request: Request,
  params: Record<string, string | string[] | undefined>,
): Promise<Response> {
  return answerReader(request, async () => {
    const { lab, series, revision, file } = params;
    const part = typeof file === "string" && Object.hasOwn(PARTS, file) ? PARTS[file] : undefined;
    const wanted = typeof revision === "string" ? parseRevision(revision) : null;
    const rows =
      part === undefined || wanted === null || typeof lab !== "string" || typeof series !== "string"
        ? null
        : await findRevision({ lab, slug: series, revision: wanted });
    if (part === undefined || rows === null) {
      return answerNotFound(request, "No part of a published test is here.");
    }
    const theme = part.themed ? readTheme(request) : null;
    const key = JSON.stringify([file, theme, rows, getEnvironment().publicUrl]);
    const page = kept.get(key) ?? (await drawPart(part, rows, theme));
    keep(key, page);
    return answerPage(request, page);
  });
}

function readTheme(request: Request): Theme | null {
  const asked = new URL(request.url).searchParams.get("theme");
  return THEMES.find((theme) => theme === asked) ?? null;
}

function keep(key: string, page: PackedPage): void {
  kept.delete(key);
  kept.set(key, page);
  const [oldest] = kept.keys();
  if (kept.size > KEPT && oldest !== undefined) kept.delete(oldest);
}

async function drawPart(
  part: KitPart,
  rows: RevisionRows,
  theme: Theme | null,
): Promise<PackedPage> {
  const { row } = rows;
  const standing = toStanding(rows);
  if (row.state === "withdrawn" && !part.saysWithdrawn) {
    const sentence = toStandingSentence(row.revision, standing) ?? "";
    return packBytes(410, "text/plain; charset=utf-8", Buffer.from(`${sentence}\n`));
  }
  const text = await readSnapshotText(row);
  const snapshot = parseSnapshotText(text);
  const path = toRevisionPath(snapshot.lab.slug, row.slug, row.revision);
  const input: KitInput = {
    snapshot,
    text,
    digest: row.digest,
    standing,
    page: `${getEnvironment().publicUrl}${path}`,
    stem: `${row.slug}-${row.revision}`,
    theme,
  };
  return part.draw(input, row.state === "withdrawn" ? 410 : 200);
}

/** @returns where the revision stands among all that a reader may know of. */
export function toStanding({ row, revisions, timeZone }: RevisionRows): Standing {
  const newest = revisions[0];
  return {
    state: row.state,
    replacedBy:
      newest === undefined || newest.revision === row.revision
        ? null
        : { revision: newest.revision, at: newest.published_at },
    withdrawn:
      row.withdrawn_at === null
        ? null
        : { at: row.withdrawn_at, reason: row.withdraw_reason ?? "no reason given" },
    timeZone,
  };
}
