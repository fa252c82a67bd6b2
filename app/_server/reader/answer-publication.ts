import { parseRevision } from "../../../lib/publication/addresses";
import { readUnits } from "../../../lib/reader/units";
import { answerPage } from "./answer-page";
import { answerNotFound, answerReader } from "./plain-answers";
import { findPublicationPage } from "./publication-page";

/** @param params of /t/[lab]/[series]/[revision]; without the last, the newest */
export function answerPublication(
  request: Request,
  params: Record<string, string | string[] | undefined>,
): Promise<Response> {
  return answerReader(request, async () => {
    const { lab, series, revision } = params;
    const wanted = typeof revision === "string" ? parseRevision(revision) : null;
    const known = typeof lab === "string" && typeof series === "string";
    const page =
      known && (revision === undefined || wanted !== null)
        ? await findPublicationPage(
            { lab, slug: series, revision: wanted },
            readUnits(new URL(request.url).searchParams.get("units")),
          )
        : null;
    return page === null
      ? answerNotFound(request, "No test is published here; perhaps it is not out yet.")
      : answerPage(request, page);
  });
}
