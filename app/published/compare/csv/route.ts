import { answerNotFound, answerReader } from "@/app/_server/reader/plain-answers";
import { comparePublished } from "@/app/_server/reader/published-comparison";
import { toComparisonCsv } from "@/lib/compare/compare-csv";
import { readChosen } from "@/lib/reader/published-list";

/** The comparison as a table for a spreadsheet. */
export const GET = (request: Request): Promise<Response> =>
  answerReader(request, async () => {
    const keys = readChosen(new URL(request.url).searchParams.get("t"));
    const comparison = await comparePublished(keys);
    if (comparison === null) {
      return answerNotFound(request, "None of these tests is published.");
    }
    return new Response(toComparisonCsv(comparison), {
      headers: {
        "content-type": "text/csv; charset=utf-8",
        "content-disposition": 'attachment; filename="compare.csv"',
        "cache-control": "public, max-age=0, s-maxage=60, must-revalidate",
        "x-content-type-options": "nosniff",
      },
    });
  });
