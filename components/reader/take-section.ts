/** What a reader or an editor may carry away from the page; all of it stays on this revision. */
import { html, type Html } from "@/lib/html/html";
import { WIDE_CARD } from "@/lib/kit/card-layout";
import { toEmbedCode } from "@/lib/kit/oembed";

interface TakeSection {
  /** Of the page, in full and as a path. */
  page: string;
  path: string;
  /** "Osier 8A: how loud it plays". */
  title: string;
}

export function toTakeSection({ page, path, title }: TakeSection): Html {
  return html`<section class="section" aria-labelledby="take">
    <h2 id="take">Take it with you</h2>
    <div class="prose">
      <p>
        Report: <a href="${path}/report.pdf?paper=a4">PDF, A4</a> or
        <a href="${path}/report.pdf?paper=letter">Letter</a>. Picture:
        <a href="${path}/figure.png">PNG</a> or <a href="${path}/figure.svg">SVG</a>. All values:
        <a href="${path}/values.csv">CSV</a> or <a href="${path}/values.json">JSON</a>. Each carries
        the method line and the hearing notice, and stays on this revision.
      </p>
      <p>Card for an article; it follows the light or dark setting of whoever reads it:</p>
      <pre>${toEmbedCode({ card: `${page}/card`, title, size: WIDE_CARD })}</pre>
    </div>
  </section>`;
}
