/** The method in plain words, then everything it was held against. Needs no script and no account. */
import type { CheckReport } from "@/lib/checks/report";
import { DOCUMENTS, EVIDENCE } from "@/lib/checks/sources";
import { html, type Html } from "@/lib/html/html";
import { toCheckTable } from "./check-table";
import { toMeasuringSteps } from "./measuring-steps";

const NOT_CLAIMED = [
  "Not a conformity test to any standard named on this page. Standards were read through public transcriptions; where that is so, the list of sources says it.",
  "One unit is measured. Another may differ. The uncertainty stated (k = 2) is for the unit on the stand.",
  "Rooms are taken into the seat estimate by one working value each: 0.6 m, 1 m and 2 m for a small, a live and a large room. It is common practice and has no published source.",
  "The allowance of WHO–ITU H.870 was written for personal audio devices; we apply it to loudspeakers. An estimate, not medical advice. Local rules at work and qualified professionals decide.",
];

/** Everything between header and footer. */
export const toHowWeMeasureBody = (report: CheckReport): Html =>
  html`<div class="hero how">
    <h1>How we measure, and how we check it</h1>
    <p class="lead">
      A loudspeaker is played a slow rising tone at several levels, each an exact step louder than
      the one before. Where the sound stops keeping step, or the distortion grows too far, it has
      reached its limit in that part of the range.
    </p>
    ${toMeasuringSteps()}
    <h2>Checks against published values</h2>
    <p class="lead">
      ${report.agreeing} of ${report.total} agree. The figures are computed anew with every release
      by the same code that analyses the tests; this is engine ${report.engine}.
    </p>
    ${toCheckTable(report)}
    <h2>How each value is known</h2>
    <p class="lead">The letter in brackets says it.</p>
    <dl class="sources">
      ${[...Object.entries(EVIDENCE), ...Object.entries(DOCUMENTS)].map(
        ([mark, words]) =>
          html`<div>
            <dt>${mark}</dt>
            <dd>${words}</dd>
          </div>`,
      )}
    </dl>
    <h2>What these tests are not</h2>
    <div class="columns">${NOT_CLAIMED.map((text) => html`<p>${text}</p>`)}</div>
  </div>`;
