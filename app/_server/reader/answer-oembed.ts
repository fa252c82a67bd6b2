/** The oEmbed endpoint: a link to a published test becomes its card, pinned to the revision of now. */
import { getEnvironment } from "../../../lib/config/environment";
import { parsePublicationUrl, toOembed, toOembedXml, type Oembed } from "../../../lib/kit/oembed";
import { parseRevision, toRevisionPath } from "../../../lib/publication/addresses";
import { parseSnapshotText } from "../../../lib/publication/canonical";
import { answerPage, packBytes } from "./answer-page";
import { answerReader } from "./plain-answers";
import { findRevision } from "./find-revision";
import { readSnapshotText } from "./publication-page";

const OPEN = { "access-control-allow-origin": "*" };

const refuse = (request: Request, status: number, words: string): Response =>
  answerPage(
    request,
    packBytes(status, "text/plain; charset=utf-8", Buffer.from(`${words}\n`), OPEN),
    false,
  );

/** A whole number of px; no limit where it is left out. NaN for anything else. */
function readMost(text: string | null): number {
  if (text === null) return Infinity;
  return /^[1-9]\d{0,5}$/.test(text) ? Number(text) : Number.NaN;
}

export function answerOembed(request: Request): Promise<Response> {
  return answerReader(request, async () => {
    const asked = new URL(request.url).searchParams;
    const format = asked.get("format") ?? "json";
    const url = asked.get("url");
    const room = {
      maxWidth: readMost(asked.get("maxwidth")),
      maxHeight: readMost(asked.get("maxheight")),
    };
    if (format !== "json" && format !== "xml") {
      return refuse(request, 501, `There is no format "${format}". Ask for json or xml.`);
    }
    if (url === null) return refuse(request, 400, "Give the address of a published test as url.");
    if (Number.isNaN(room.maxWidth) || Number.isNaN(room.maxHeight)) {
      return refuse(request, 400, "maxwidth and maxheight are whole pixels, 1 to 999999.");
    }
    const answer = await findOembed(url, room);
    if (answer === null) return refuse(request, 404, "No test is published at this address.");
    const xml = format === "xml";
    return answerPage(
      request,
      packBytes(
        200,
        xml ? "text/xml; charset=utf-8" : "application/json; charset=utf-8",
        Buffer.from(xml ? toOembedXml(answer) : JSON.stringify(answer)),
        OPEN,
      ),
    );
  });
}

async function findOembed(
  url: string,
  room: { maxWidth: number; maxHeight: number },
): Promise<Oembed | null> {
  const origin = getEnvironment().publicUrl;
  const address = parsePublicationUrl(url, origin);
  if (address === null) return null;
  const revision = address.revision === null ? null : parseRevision(address.revision);
  if (address.revision !== null && revision === null) return null;
  const rows = await findRevision({ ...address, revision });
  if (rows === null) return null;
  const { row } = rows;
  const snapshot = parseSnapshotText(await readSnapshotText(row));
  const page = `${origin}${toRevisionPath(snapshot.lab.slug, row.slug, row.revision)}`;
  const withdrawn = row.state === "withdrawn";
  const { model } = snapshot.loudspeaker;
  return toOembed({
    title: withdrawn ? `${model}: withdrawn` : `${model}: how loud it plays`,
    lab: snapshot.lab.name,
    origin,
    card: `${page}/card`,
    picture: withdrawn ? null : `${page}/og.png`,
    ...room,
  });
}
