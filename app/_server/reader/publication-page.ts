/** The page behind /t/<lab>/<series>[/<revision>]: drawn once per state. */
import {
  toReplacedBanner,
  toRevisionsSection,
  toWithdrawnBody,
} from "../../../components/reader/revisions";
import { toReaderPage } from "../../../components/reader/frame";
import { toPublicationBody } from "../../../components/reader/publication-page";
import { toTakeSection } from "../../../components/reader/take-section";
import { toPublicationHead } from "../../../components/reader/publication-head";
import { html } from "../../../lib/html/html";
import { toAltText } from "../../../lib/kit/kit-words";
import { toOembedAddress } from "../../../lib/kit/oembed";
import { inLab } from "../../../db/in-lab";
import { getSnapshotText, type PublicationRow } from "../../../db/queries/publications";
import { getEnvironment } from "../../../lib/config/environment";
import { toRevisionPath } from "../../../lib/publication/addresses";
import { parseSnapshotText } from "../../../lib/publication/canonical";
import type { Snapshot } from "../../../lib/publication/snapshot-schema";
import { toAnswer } from "../../../lib/reader/page-words";
import type { Units } from "../../../lib/reader/units";
import { getDatabase } from "../database";
import { packPage, type PackedPage } from "./answer-page";
import { findRevision, type PublicationAddress, type RevisionRows } from "./find-revision";

const KEPT_PAGES = 300;
const pages = new Map<string, PackedPage>();

/** @returns null where nothing is published at this address. */
export async function findPublicationPage(
  address: PublicationAddress,
  units: Units,
): Promise<PackedPage | null> {
  const standing = await findRevision(address);
  if (standing === null) return null;
  const key = JSON.stringify([standing, getEnvironment().publicUrl, units]);
  const known = pages.get(key);
  if (known !== undefined) return known;
  const page = await drawPage(standing, units);
  pages.set(key, page);
  const [oldest] = pages.keys();
  if (pages.size > KEPT_PAGES && oldest !== undefined) pages.delete(oldest);
  return page;
}

/** The kept text behind a row. */
export const readSnapshotText = (row: PublicationRow): Promise<string> =>
  inLab(getDatabase(), { labId: row.lab_id, accountId: null }, (trx) =>
    getSnapshotText(trx, row.lab_id, row.id),
  );

async function drawPage(
  { row, revisions, timeZone }: RevisionRows,
  units: Units,
): Promise<PackedPage> {
  const text = await readSnapshotText(row);
  const snapshot = parseSnapshotText(text);
  const paths = { lab: snapshot.lab.slug, slug: row.slug };
  const canonical = `${getEnvironment().publicUrl}${toRevisionPath(paths.lab, paths.slug, row.revision)}`;
  const { model } = snapshot.loudspeaker;
  if (row.state === "withdrawn") {
    return packPage(
      410,
      toReaderPage({
        title: `${model}: withdrawn`,
        description: `The test of ${model} by ${snapshot.lab.name} was withdrawn.`,
        canonical,
        hidden: true,
        body: toWithdrawnBody({ snapshot, row, revisions, timeZone }),
        footer: toFooter(snapshot),
      }),
    );
  }
  return packPage(
    200,
    toReaderPage({
      title: `${model}: how loud it plays`,
      description: toAnswer(snapshot).join(" "),
      canonical,
      script: true,
      head: toPublicationHead({
        title: `${model}: how loud it plays`,
        description: toAnswer(snapshot).join(" "),
        page: canonical,
        picture: `${canonical}/og.png`,
        alt: toAltText(snapshot),
        oembed: (format) => toOembedAddress(getEnvironment().publicUrl, canonical, format),
      }),
      body: toPublicationBody({
        snapshot,
        digest: row.digest,
        timeZone,
        units,
        banner: toReplacedBanner({ snapshot, row, revisions, timeZone }),
        after: html`${toTakeSection({
          page: canonical,
          path: toRevisionPath(paths.lab, paths.slug, row.revision),
          title: `${model}: how loud it plays`,
        })}${toRevisionsSection({ snapshot, row, revisions, timeZone })}`,
      }),
      footer: toFooter(snapshot),
    }),
  );
}

export const toFooter = ({ lab, series, revision }: Snapshot) =>
  html`<span>${lab.name}</span
    ><span>Results may be quoted with the method line and a link to this page.</span
    ><span>${series.number} · revision ${revision}</span>`;
