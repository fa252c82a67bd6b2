import { answerAlways, packPage } from "@/app/_server/reader/answer-page";
import { toHowWeMeasureBody } from "@/components/how-we-measure/how-we-measure";
import { toReaderPage } from "@/components/reader/frame";
import report from "@/lib/checks/report.json";

/** Drawn once, when the product is built: nothing in it depends on who asks. */
export const dynamic = "force-static";

export const GET = (): Response =>
  answerAlways(
    packPage(
      200,
      toReaderPage({
        title: "How we measure",
        description:
          "How Tidemark measures loudspeakers, and what its figures were checked against.",
        current: "how",
        body: toHowWeMeasureBody(report),
        footer: `Checks of engine ${report.engine}.`,
      }),
    ),
  );
