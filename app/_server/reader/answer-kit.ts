/** Card, pictures, report and values of one revision, drawn once per state. */
import { drawReport, PAPERS } from "../../../components/report/report";
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
import { findRevision, type RevisionRows } from "./find-revision";
import { readSnapshotText } from "./publication-page";

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
  paper: (typeof PAPERS)[number];
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
  /** What of its query changes it; the rest is not looked at. */
  asks: "theme" | "paper" | null;
  draw: (input: KitInput, status: number) => PackedPage | Promise<PackedPage>;
}

const picture =
  (
    ending: string,
    mediaType: string,
    draw: (input: KitInput & { theme: Theme }) => Uint8Array | string,
  ) =>
  (input: KitInput, status: number): PackedPage => {
    const drawn = draw({ ...input, theme: input.theme ?? "light" });
    const bytes = typeof drawn === "string" ? Buffer.from(drawn, "utf8") : drawn;
    return packBytes(status, mediaType, bytes, {
      ...FOR_OTHERS,
      "content-disposition": `inline; filename="${input.stem}.${ending}"`,
    });
  };

const PARTS: Readonly<Record<string, KitPart>> = {
  card: {
    saysWithdrawn: true,
    asks: "theme",
    draw: (input, status) => ({ ...packPage(status, toCardPage(input)), framed: true }),
  },
  "figure.svg": {
    saysWithdrawn: true,
    asks: "theme",
    draw: picture("svg", "image/svg+xml", toCardSvg),
  },
  "figure.png": {
    saysWithdrawn: true,
    asks: "theme",
    draw: picture("png", "image/png", toCardPng),
  },
  "og.png": { saysWithdrawn: true, asks: null, draw: picture("png", "image/png", toLinkPng) },
  "report.pdf": {
    saysWithdrawn: false,
    asks: "paper",
    draw: async (input, status) =>
      packBytes(status, "application/pdf", await drawReport(input), {
        "content-disposition": `inline; filename="${input.stem}.pdf"`,
      }),
  },
  "values.csv": {
    saysWithdrawn: false,
    asks: null,
    draw: (input, status) =>
      packBytes(status, "text/csv; charset=utf-8", Buffer.from(toValuesCsv(input)), {
        ...FOR_OTHERS,
        ...saveAs(`${input.stem}.csv`),
      }),
  },
  "values.json": {
    saysWithdrawn: false,
    asks: null,
    draw: (input, status) =>
      packBytes(status, "application/json", Buffer.from(toValuesJson(input, input.text)), {
        ...FOR_OTHERS,
        ...saveAs(`${input.stem}.json`),
      }),
  },
};

const KEPT = 200;
const kept = new Map<string, Promise<PackedPage>>();

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
    const choice = readChoice(request, part);
    const key = JSON.stringify([file, choice, rows, getEnvironment().publicUrl]);
    return answerPage(request, await keep(key, () => drawPart(part, rows, choice)));
  });
}

type Choice = Pick<KitInput, "theme" | "paper">;

/** @returns the theme or paper that was asked for; what is not known counts as not asked. */
function readChoice(request: Request, { asks }: KitPart): Choice {
  const asked = asks === null ? null : new URL(request.url).searchParams.get(asks);
  return {
    theme: asks === "theme" ? (THEMES.find((theme) => theme === asked) ?? null) : null,
    paper: asks === "paper" ? (PAPERS.find((paper) => paper === asked) ?? "a4") : "a4",
  };
}

/** Drawn once, however many ask at the same time; a drawing that failed is tried again. */
function keep(key: string, draw: () => Promise<PackedPage>): Promise<PackedPage> {
  const page = kept.get(key) ?? draw();
  kept.delete(key);
  kept.set(key, page);
  page.catch(() => kept.delete(key));
  const [oldest] = kept.keys();
  if (kept.size > KEPT && oldest !== undefined) kept.delete(oldest);
  return page;
}

async function drawPart(part: KitPart, rows: RevisionRows, choice: Choice): Promise<PackedPage> {
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
    ...choice,
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
