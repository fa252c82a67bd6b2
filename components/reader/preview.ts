/** What the maker sees besides the page itself: whose link it is, and the place for a comment. */
import { html, type Html } from "@/lib/html/html";
import { toLongDay } from "@/lib/time/time-words";

export interface PreviewComment {
  name: string;
  words: string;
  at: Date;
  answer: string | null;
}

interface PreviewProps {
  forWhom: string;
  lab: string;
  expiresAt: Date;
  timeZone: string;
}

export function toPreviewBanner({ forWhom, lab, expiresAt, timeZone }: PreviewProps): Html {
  return html`<div class="banner" role="note">
    <p>
      <b>A preview for ${forWhom}: not published.</b> ${lab} asks for your comment before it is.
      This link is good until ${toLongDay(expiresAt, timeZone)}; do not pass it on.
      <a href="#comment">Leave a comment</a>
    </p>
  </div>`;
}

interface CommentSectionProps {
  comments: readonly PreviewComment[];
  timeZone: string;
  lab: string;
  /** What was sent and not taken, and why. */
  refused: { name: string; email: string; words: string; why: string } | null;
  /** A comment was just left. */
  thanks: boolean;
}

export function toCommentSection(props: CommentSectionProps): Html {
  const { comments, timeZone, lab, refused, thanks } = props;
  return html`<section class="section prose" id="comment" aria-labelledby="comment-head">
    <h2 id="comment-head">Your comment</h2>
    ${thanks && html`<p class="banner" role="status"><b>Thank you.</b> ${lab} has your comment and answers here.</p>`}
    ${comments.map(
      (comment) =>
        html`<article class="comment">
          <p class="small"><b>${comment.name}</b>, ${toLongDay(comment.at, timeZone)}</p>
          <p>${comment.words}</p>
          ${
            comment.answer !== null &&
            html`<blockquote>
              <p class="small"><b>${lab} answers</b></p>
              <p>${comment.answer}</p>
            </blockquote>`
          }
        </article>`,
    )}
    ${refused !== null && html`<p class="fault" role="alert">${refused.why}</p>`}
    <form class="comment-form" method="post">
      <label
        ><span>your name</span
        ><input name="name" required maxlength="120" autocomplete="name" value="${refused?.name}"
      /></label>
      <label
        ><span>your e-mail address (seen by the lab only)</span
        ><input
          name="email"
          type="email"
          required
          maxlength="200"
          autocomplete="email"
          value="${refused?.email}"
      /></label>
      <label
        ><span>your comment</span
        ><textarea name="words" required maxlength="5000" rows="7">${refused?.words}</textarea>
      </label>
      <button type="submit">Send the comment</button>
    </form>
  </section>`;
}
