/** "How loud where you sit": the answer as page and script draw it, and the form that changes it. */
import { toDistanceCurve } from "@/lib/charts/distance-curve";
import { formatPlain, NBSP } from "@/lib/charts/format";
import { toSvg } from "@/lib/charts/svg-text";
import { computeAllowedS, DAY_RULES, WEEK_RULES } from "@/lib/exposure/rules";
import type { RoomKind } from "@/lib/exposure/seat-level";
import { toTimeText } from "@/lib/exposure/words";
import { asHtml, html, type Html } from "@/lib/html/html";
import {
  toEnoughRows,
  toSeatAnswer,
  USUAL_SEAT,
  type ReaderSeat,
  type SeatSource,
} from "@/lib/reader/seat";
import { sayDistance, type Units } from "@/lib/reader/units";
import { toNotice } from "./frame";

/** "3.0 m (9.8 ft)". */
export const toDistanceText = ({
  distanceM,
  units,
}: Pick<ReaderSeat, "distanceM" | "units">): string =>
  sayDistance(distanceM, units, (metres) => metres.toFixed(1));

const ROOM_WORDS: Record<RoomKind, string> = {
  small: "a small room",
  live: "a live room",
  large: "a large room",
  outdoors: "outdoors",
};

/** Curve, sentences and notice for one seat. */
export function toSeatResult(source: SeatSource, seat: ReaderSeat): Html {
  const answer = toSeatAnswer(source, seat);
  if (answer === null) {
    return html`<p class="plain">
      No level for music could be estimated from this test. Enter the level that you measured at
      your seat to see how long it may last.
    </p>`;
  }
  const assumed =
    seat.measuredDbA === null
      ? `${toDistanceText(seat)}, ${seat.pair ? "a pair" : "one loudspeaker"}, ${ROOM_WORDS[seat.room]}, turned down by ${formatPlain(seat.turnedDownDb)}${NBSP}dB, ${toTimeText(seat.minutesPerDay * 60)} a day.`
      : `${toTimeText(seat.minutesPerDay * 60)} a day.`;
  return html`${seat.measuredDbA === null && toCurves(source, seat)}
    <div class="answer">
      <p class="say">${answer.level} <b>${answer.time}</b></p>
      <p class="small">For ${assumed} ${answer.caveat}</p>
    </div>
    ${answer.notice !== null && toNotice(answer.notice, "block")}`;
}

function toCurves(source: SeatSource, seat: ReaderSeat): Html | false {
  if (source.musicDbA === null) return false;
  const levelAt1mDbA = source.musicDbA;
  const curve = (width: number, height: number, id: string, className: string): Html =>
    toSvg(
      toDistanceCurve({
        seat: { ...seat, levelAt1mDbA },
        width,
        height,
        units: seat.units,
        toAllowedS: (levelDbA) =>
          computeAllowedS(levelDbA, seat.allowance === "week" ? WEEK_RULES.adult : DAY_RULES.niosh),
        allowance: seat.allowance === "week" ? "week\u2019s allowance" : "day\u2019s allowance",
      }),
      { id, className },
    );
  return html`${curve(780, 420, "dw", "wide")}${curve(354, 320, "dn", "narrow")}`;
}

/** Whether it is enough, part by part. */
export function toEnoughResult(source: SeatSource, seat: ReaderSeat): Html {
  const rows = toEnoughRows(source, seat).map(
    (row) =>
      html`<div class="enough-row ${row.verdict.replaceAll(" ", "-")}">
        <dt>${row.part}</dt>
        <dd>${row.words}</dd>
      </div>`,
  );
  const level = toSeatAnswer(source, { ...seat, measuredDbA: seat.usualDbA });
  return html`<p class="small">
      Listening at ${seat.usualDbA}${NBSP}dB(A) from ${toDistanceText(seat)} with peaks
      ${seat.crestDb}${NBSP}dB over the mean, ${seat.pair ? "a pair" : "one loudspeaker"},
      ${ROOM_WORDS[seat.room]}.
    </p>
    <dl class="enough">${rows}</dl>
    ${
      level !== null && html`<p class="small">${level.time}</p>`
    }${level?.notice != null && toNotice(level.notice, "block")}`;
}

const radios = (
  name: string,
  legend: string,
  options: readonly (readonly [value: string, words: string, on: boolean])[],
): Html =>
  html`<fieldset class="opts">
    <legend>${legend}</legend>
    <div>
      ${options.map(
        ([value, words, on]) =>
          html`<label
            ><input type="radio" name="${name}" value="${value}" ${on && asHtml(" checked")} /><span
              >${words}</span
            ></label
          >`,
      )}
    </div>
  </fieldset>`;

/** Hidden until the script is there to answer. */
export function toSeatForm(units: Units): Html {
  const seat = { ...USUAL_SEAT, units };
  return html`<form
    id="seat-form"
    data-units="${units}"
    hidden
    aria-label="Your seat and your habit"
  >
    <label class="range"
      ><span>distance <output id="distance-out">${toDistanceText(seat)}</output></span
      ><input
        type="range"
        name="distance"
        min="0"
        max="100"
        step="1"
        value="49"
        aria-describedby="distance-out"
    /></label>
    ${radios("pair", "loudspeakers", [
      ["one", "one", !seat.pair],
      ["pair", "a pair", seat.pair],
    ])}
    ${radios(
      "room",
      "room",
      (["small", "live", "large", "outdoors"] as const).map((room) => [
        room,
        room,
        room === seat.room,
      ]),
    )}
    ${radios(
      "down",
      "turned down from the level above",
      [0, 6, 10, 20].map((db) => [String(db), `${db}${NBSP}dB`, db === seat.turnedDownDb]),
    )}
    <label class="range"
      ><span
        >listening a day
        <output id="minutes-out">${toTimeText(seat.minutesPerDay * 60)}</output></span
      ><input
        type="range"
        name="minutes"
        min="15"
        max="480"
        step="15"
        value="${seat.minutesPerDay}"
        aria-describedby="minutes-out"
    /></label>
    ${radios("allowance", "allowance", [
      ["week", "week, H.870", true],
      ["niosh", "working day, NIOSH", false],
    ])}
    <label class="own"
      ><span>Or enter what you measured at your seat, dB(A)</span
      ><input type="number" name="measured" min="30" max="140" step="1" inputmode="numeric"
    /></label>
    <p class="small">
      No meter? If you must raise your voice to be heard at arm’s length, it is about 85${NBSP}dB(A)
      or more.
    </p>
  </form>`;
}

/** Hidden until the script is there to answer. */
export function toEnoughForm(): Html {
  return html`<form id="enough-form" hidden aria-label="Your usual level" class="pairs">
    <label class="own"
      ><span>usual level at your seat, dB(A)</span
      ><input
        type="number"
        name="usual"
        min="40"
        max="120"
        step="1"
        value="${USUAL_SEAT.usualDbA}"
        inputmode="numeric"
    /></label>
    <label class="own"
      ><span>peaks over the mean level, dB</span
      ><input
        type="number"
        name="crest"
        min="3"
        max="30"
        step="1"
        value="${USUAL_SEAT.crestDb}"
        inputmode="numeric"
    /></label>
  </form>`;
}
