/** The public page of one revision: answer, figure, seat, parts, method; drawn from its snapshot alone. */
import { CAUSE_WORDS, causeShapes } from "@/lib/charts/marks";
import { toReaderWall } from "@/lib/charts/reader-wall";
import { toSvg } from "@/lib/charts/svg-text";
import { COLOURS } from "@/lib/charts/tokens";
import { formatFrequency, formatLevel, formatPlain, NBSP } from "@/lib/charts/format";
import { asHtml, html, type Html } from "@/lib/html/html";
import type { Snapshot } from "@/lib/publication/snapshot-schema";
import {
  toAnswer,
  toChangedWords,
  toLimitWords,
  toMeasuredWords,
  toMethodWords,
  toPublishedNotice,
  toSeatSource,
  toSplUncertaintyWords,
} from "@/lib/reader/page-words";
import { toPartsOfSound, toReachedWords, type PartOfSound } from "@/lib/reader/parts-of-sound";
import { USUAL_SEAT } from "@/lib/reader/seat";
import { sayDistance, type Units } from "@/lib/reader/units";
import { toLongDay } from "@/lib/time/time-words";
import { toEvidenceSection } from "./evidence-section";
import { toNotice } from "./frame";
import { toEnoughForm, toEnoughResult, toSeatForm, toSeatResult } from "./seat-section";

interface PublicationParts {
  snapshot: Snapshot;
  /** SHA-256 of the snapshot. */
  digest: string;
  /** IANA name, of the lab. */
  timeZone: string;
  /** How distances are said; by default in metres first. */
  units?: Units;
  /** Over the answer: replaced, preview. */
  banner: Html | false;
  /** Under the method: revisions, comments. */
  after: Html | false;
}

/** Everything between header and footer. */
export function toPublicationBody(parts: PublicationParts): Html {
  const { snapshot, units = "m" } = parts;
  const notice = toPublishedNotice(snapshot);
  const [first, ...rest] = toAnswer(snapshot);
  const { maker, model, kind } = snapshot.loudspeaker;
  return html`${parts.banner}
    <div class="hero">
      <p class="eyebrow"><b>${model}</b> by ${maker}${kind !== "" && ` · ${kind}`}</p>
      <h1>${first}${rest.map((sentence) => html` <span>${sentence}</span>`)}</h1>
      <p class="method">
        ${toMethodWords(snapshot, units)}
        ${snapshot.evidence_public && html`<a href="#check">Check this yourself.</a>`}
      </p>
      ${notice !== null && toNotice(notice, "slim")}
    </div>
    ${toFigure(snapshot)} ${toKey(snapshot)} ${toWords(snapshot)} ${toSeat(snapshot, units)}
    ${toParts(snapshot)} ${toEvidenceSection(snapshot)} ${toMeasured(parts)} ${parts.after}`;
}

function toFigure(snapshot: Snapshot): Html {
  const label = `Output limit by band: ${toAnswer(snapshot).join(" ")}`;
  const wide = toReaderWall(snapshot, { width: 1272, plotHeight: 400, narrow: false });
  const narrow = toReaderWall(snapshot, { width: 354, plotHeight: 260, narrow: true });
  return html`<figure class="wall">
    ${toSvg(wide, { id: "ww", label, className: "wide" })}${toSvg(narrow, { id: "wn", label, className: "narrow" })}
  </figure>`;
}

function toKey({ criterion, measured }: Snapshot): Html {
  const highest = formatLevel(Math.max(...measured.levels_dB));
  return html`<ul class="key">
    <li>
      <b>Each shade ends where that run reached;</b> shades do not add up. Louder runs are darker.
    </li>
    <li><b>A solid line is the limit:</b> above it lies ${toLimitWords(criterion)}.</li>
    <li><b>An open line: not reached</b> up to the ${highest} run. It can play louder there.</li>
    <li><b>Hatching is compression:</b> level that was expected and not measured.</li>
  </ul>`;
}

const toParagraphs = (text: string): Html[] =>
  text
    .split(/\n\s*\n/)
    .map((paragraph) => paragraph.trim())
    .filter((paragraph) => paragraph !== "")
    .map((paragraph) => html`<p>${paragraph}</p>`);

/** The reviewer's words, and the maker's beside the result. */
function toWords({ words, maker_statement, answer_to_maker, lab }: Snapshot): Html {
  return html`${
    words !== "" &&
    html`<section class="section prose" aria-labelledby="words">
      <h2 id="words">What the reviewer says</h2>
      ${toParagraphs(words)}
    </section>`
  }${
    maker_statement !== null &&
    html`<section class="section prose" aria-labelledby="maker">
      <h2 id="maker">What the maker says</h2>
      <blockquote>
        ${toParagraphs(maker_statement.words)}
        <p class="small">${maker_statement.name}</p>
      </blockquote>
      ${
        answer_to_maker !== null &&
        answer_to_maker !== "" &&
        html`<h3>${lab.name} answers</h3>
          ${toParagraphs(answer_to_maker)}`
      }
    </section>`
  }`;
}

function toSeat(snapshot: Snapshot, units: Units): Html {
  const seat = { ...USUAL_SEAT, units };
  const source = toSeatSource(snapshot);
  const estimate =
    source.musicDbA === null
      ? "This test gives no estimate for music."
      : `For music with peaks ${formatPlain(source.musicCrestDb)}${NBSP}dB over its mean level, one loudspeaker is estimated to reach ${source.atLeast ? "at least " : ""}${Math.floor(source.musicDbA)}${NBSP}dB(A) at ${sayDistance(1, units)} within this limit.`;
  return html`<section class="section" aria-labelledby="seat">
      <h2 id="seat">How loud where you sit, and for how long?</h2>
      <p class="lead">
        ${estimate} The level at your seat follows from room and distance.
        ${
          units === "ft"
            ? html`<a href="?units=m#seat">Distances in metres</a>`
            : html`<a href="?units=ft#seat">Distances in feet</a>`
        }
      </p>
      <div class="calc">
        ${toSeatForm(units)}
        <div id="seat-result" aria-live="polite">${toSeatResult(source, seat)}</div>
      </div>
    </section>
    <section class="section" aria-labelledby="enough">
      <h2 id="enough">Enough for me?</h2>
      <p class="lead">
        The peaks of your music at your usual level, held against what each part of the sound
        reached here (a sine’s peak lies 3${NBSP}dB over its level).
      </p>
      ${toEnoughForm()}
      <div id="enough-result" aria-live="polite">${toEnoughResult(source, seat)}</div>
    </section>
    <script type="application/json" id="seat-source">
      ${asHtml(JSON.stringify(source).replaceAll("<", "\\u003c"))}
    </script>`;
}

function toParts(snapshot: Snapshot): Html {
  return html`<section class="section" aria-labelledby="parts">
    <h2 id="parts">What gives out, from low to high</h2>
    <table class="parts">
      <thead>
        <tr>
          <th scope="col">Part of the sound</th>
          <th scope="col">Bands</th>
          <th scope="col">Reached, at 1${NBSP}m</th>
          <th scope="col">Held back by</th>
          <th scope="col">What the test showed</th>
        </tr>
      </thead>
      <tbody>
        ${toPartsOfSound(snapshot).map(
          (part) =>
            html`<tr>
              <th scope="row">${part.name}</th>
              <td class="figures">${part.range}</td>
              <td class="reached">${toReachedWords(part)}</td>
              <td class="figures">${toHeldBy(part)}</td>
              <td>${part.words}</td>
            </tr>`,
        )}
      </tbody>
    </table>
  </section>`;
}

function toHeldBy(part: PartOfSound): Html {
  if (part.cause === null || part.causeHz === null) {
    return html`<span class="dim"
      >${part.reachedDb === null ? "not known" : "limit not reached"}</span
    >`;
  }
  const mark = toSvg(
    {
      width: 16,
      height: 16,
      patterns: [],
      shapes: [{ kind: "group", x: 8, y: 8, shapes: causeShapes(part.cause, COLOURS.ink) }],
    },
    { id: "", className: "mark" },
  );
  return html`${mark}${CAUSE_WORDS[part.cause]}, ${formatFrequency(part.causeHz)}`;
}

function toMeasured({ snapshot, digest, timeZone, units = "m" }: PublicationParts): Html {
  const { lab, loudspeaker, measured, sign_off, analysis } = snapshot;
  const day = (at: string): string => toLongDay(new Date(at), timeZone);
  const serial = loudspeaker.serial === "" ? "" : `, serial ${loudspeaker.serial}`;
  const temperature =
    measured.temperature_C === null ? "" : `, ${formatPlain(measured.temperature_C)}${NBSP}\u00b0C`;
  const state = Object.values(snapshot.state).filter((one) => one !== "");
  const rows: (readonly [string, string] | false)[] = [
    ["measured", `${day(measured.first_recording_at)}, ${lab.name}${temperature}`],
    ["sample", `one unit${serial}, ${snapshot.supplied_by}`],
    state.length > 0 && ["set to", state.join(", ")],
    ["calibration", measured.calibration],
    ["series", `${snapshot.series.number}, revision ${snapshot.revision}`],
    [
      "analysis",
      `version ${analysis.version}, engine ${analysis.engine_version}; ${toChangedWords(snapshot.bands)}`,
    ],
    [
      "signed off",
      `${day(sign_off.at)}, ${sign_off.by}, for ${toLimitWords(snapshot.criterion)}${sign_off.one_person ? "; the same person recorded it" : ""}`,
    ],
    ["published", `${day(snapshot.published_at)}, ${snapshot.published_by}`],
    snapshot.uncertainty_dB !== null && [
      "uncertainty",
      `compression at most \u00b1${snapshot.uncertainty_dB.toFixed(1)}${NBSP}dB in any band; ${toSplUncertaintyWords(snapshot.bands)}; k = 2, for this one unit.`,
    ],
    [
      "allowance",
      `80${NBSP}dB(A) for 40${NBSP}h a week, 75${NBSP}dB(A) for sensitive listeners, equal energy (WHO\u2013ITU H.870). It was written for personal audio devices; we apply it to loudspeakers.`,
    ],
    [
      "not covered",
      "Not a conformity test to any standard named. Local rules at work and qualified professionals decide.",
    ],
    ["digest", digest],
  ];
  return html`<section class="section" aria-labelledby="measured">
    <h2 id="measured">How this was measured</h2>
    <div class="measured">
      <div class="prose">
        <p>${toMeasuredWords(snapshot, units)}</p>
        <p>
          In each third-octave band the limit is the highest level under
          ${toLimitWords(snapshot.criterion)}, at that level and every lower one tested. An analyst
          decided on every band and signed the series off.
        </p>
        <p>
          Ears that ring or feel dull after listening have had too much: stop, rest them, and play
          less loud next time. If it stays, see a doctor or an audiologist.
        </p>
      </div>
      <dl class="facts">
        ${rows.map(
          (row) =>
            row !== false &&
            html`<div>
              <dt>${row[0]}</dt>
              <dd>${row[1]}</dd>
            </div>`,
        )}
      </dl>
    </div>
  </section>`;
}
