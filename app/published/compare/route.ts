import { answerPage, packPage } from "@/app/_server/reader/answer-page";
import { answerReader } from "@/app/_server/reader/plain-answers";
import { comparePublished } from "@/app/_server/reader/published-comparison";
import { toCompareBody } from "@/components/reader/compare-page";
import { toReaderPage } from "@/components/reader/frame";
import { readChosen } from "@/lib/reader/published-list";

/** Up to four published tests side by side; `t` names them, the reference first. */
export const GET = (request: Request): Promise<Response> =>
  answerReader(request, async () => {
    const keys = readChosen(new URL(request.url).searchParams.get("t"));
    const comparison = await comparePublished(keys);
    const names = comparison?.tests.map((test) => test.model) ?? [];
    const text = toReaderPage({
      title: names.length === 0 ? "Compare" : `Compare ${names.join(", ")}`,
      description: "Output limits of published tests side by side, band by band.",
      current: "compare",
      body: toCompareBody({ comparison, keys }),
      footer: "Levels at 1\u00a0m (3.3\u00a0ft), unweighted, third-octave bands.",
    });
    return answerPage(request, packPage(200, text));
  });
