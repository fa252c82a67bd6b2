import { answerPage, packPage } from "@/app/_server/reader/answer-page";
import { answerReader } from "@/app/_server/reader/plain-answers";
import { listPublishedTests } from "@/app/_server/reader/published-tests";
import { toReaderPage } from "@/components/reader/frame";
import { toPublishedBody } from "@/components/reader/published-list";
import { getEnvironment } from "@/lib/config/environment";
import { choosePublished, listChoices, readPublishedFilter } from "@/lib/reader/published-list";

const PAGE_SIZE = 24;

export const GET = (request: Request): Promise<Response> =>
  answerReader(request, async () => {
    const filter = readPublishedFilter(new URL(request.url).searchParams);
    const all = await listPublishedTests();
    const found = choosePublished(all, filter);
    const pages = Math.max(1, Math.ceil(found.length / PAGE_SIZE));
    const page = Math.min(filter.page, pages);
    const body = toPublishedBody({
      tests: found.slice((page - 1) * PAGE_SIZE, page * PAGE_SIZE),
      found: found.length,
      total: all.length,
      pages,
      choices: listChoices(all),
      chosen: filter.chosen.flatMap((key) => all.find((test) => test.key === key) ?? []),
      filter: { ...filter, page },
    });
    const text = toReaderPage({
      title: "Published tests",
      description: "How loud each loudspeaker reached, and where it gives out first.",
      canonical: `${getEnvironment().publicUrl}/published`,
      current: "published",
      body,
      footer: "Walls from 60 to 106\u00a0dB, rules at 80 and 100\u00a0dB.",
    });
    return answerPage(request, packPage(200, text));
  });
