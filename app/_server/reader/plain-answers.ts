/** What a reader gets where there is nothing to read. */
import { toReaderPage } from "../../../components/reader/frame";
import { html } from "../../../lib/html/html";
import { toRequestId } from "../handle";
import { log } from "../log";
import { answerPage, packPage, type PackedPage } from "./answer-page";

const toPlainPage = (status: number, title: string, words: string): PackedPage =>
  packPage(
    status,
    toReaderPage({
      title,
      description: title,
      hidden: true,
      body: html`<div class="hero">
        <h1>${title}</h1>
        <p class="method">${words}</p>
        <p><a href="/published">Published tests</a></p>
      </div>`,
      footer: "",
    }),
  );

export const answerNotFound = (request: Request, words: string): Response =>
  answerPage(request, toPlainPage(404, "There is nothing at this address.", words), false);

/** Answers by `answer`; whatever goes wrong is logged and said in one sentence. */
export async function answerReader(
  request: Request,
  answer: () => Promise<Response>,
): Promise<Response> {
  try {
    return await answer();
  } catch (error) {
    const requestId = toRequestId(request.headers);
    log().error({ err: error, requestId, instance: new URL(request.url).pathname }, "page failed");
    const words = `Try again in a minute. If it stays, tell the lab this number: ${requestId}`;
    return answerPage(request, toPlainPage(503, "This page cannot be shown now.", words), false);
  }
}
