/** Published tests side by side, for readers: without script, the address holds the choice. */
import { toCompareFigure } from "@/lib/charts/compare";
import { toMapKey } from "@/lib/charts/compare-map";
import { letterShapes } from "@/lib/charts/compare-paints";
import { formatFrequency, formatPlain, NBSP } from "@/lib/charts/format";
import { CAUSE_WORDS, causeShapes } from "@/lib/charts/marks";
import { toSvg } from "@/lib/charts/svg-text";
import { COLOURS } from "@/lib/charts/tokens";
import {
  letterOf,
  sayComparison,
  toComparisonNotice,
  toDifferenceWords,
  toFirstLines,
  toLimitText,
  toMethodNotes,
  toPartLines,
  toReachedLines,
  type TwoLines,
} from "@/lib/compare/compare-words";
import {
  MOST_COMPARED,
  type Comparison,
  type ComparisonTest,
} from "@/lib/compare/comparison-schema";
import { asHtml, html, type Html } from "@/lib/html/html";
import { toLimitWords } from "@/lib/reader/page-words";
import { toRange } from "@/lib/reader/parts-of-sound";
import { toComparePath } from "@/lib/reader/published-list";
import { toNotice } from "./frame";

interface ComparePageProps {
  /** null while nothing is chosen. */
  comparison: Comparison | null;
  /** Keys in the order of the address. */
  keys: readonly string[];
}

const PITCH = 38;

/** Everything between header and footer. */
export function toCompareBody({ comparison, keys }: ComparePageProps): Html {
  if (comparison === null) {
    return html`<div class="hero">
      <h1>Compare output limits</h1>
      <p class="method">
        Pick up to four tests in the list of <a href="/published">published tests</a>; the first is
        the reference. Their limits then stand here side by side, with the difference in every band.
      </p>
    </div>`;
  }
  const { tests } = comparison;
  const notice = toComparisonNotice(tests);
  return html`<div class="hero">
      <h1>Compare output limits</h1>
      <p class="method">
        Sine sweep, one tone at a time, unweighted, level at 1${NBSP}m (3.3${NBSP}ft), short-term
        runs; limit: ${toLimitWords(comparison.criterion)}. Music differs.
      </p>
      ${notice !== null && toNotice(notice, "slim")}
    </div>
    ${toPicks(comparison, keys)}
    ${tests.length > 0 && html`${toFigure(comparison)} ${toTable(tests)} ${toFoot(comparison, keys)}`}
    ${comparison.left_out.map(
      (one) =>
        html`<p class="left-out">
          <b>${one.model} was left out.</b> ${one.why}
          <a href="${toComparePath(keys.filter((key) => key !== one.id))}">Remove it</a>
        </p>`,
    )}`;
}

const toLetter = (at: number): Html =>
  toSvg(
    { width: 18, height: 18, patterns: [], shapes: letterShapes(at, 9, 9) },
    { id: "", className: "mark" },
  );

function toPicks({ tests }: Comparison, keys: readonly string[]): Html {
  const without = (key: string): string[] => keys.filter((one) => one !== key);
  return html`<ol class="picks" aria-label="Compared loudspeakers">
    ${tests.map(
      (test, at) =>
        html`<li>
          <p>${toLetter(at)}<a href="${test.path}">${test.model}</a></p>
          <p class="figures">
            ${test.maker} · ${test.environment}, ${formatPlain(test.distance_m)}${NBSP}m ·
            ${test.lab}
          </p>
          <p class="acts">
            ${
              at === 0
                ? html`<span class="dim">reference</span>`
                : html`<a
                    href="${toComparePath([test.id, ...without(test.id)])}"
                    aria-label="Make reference: ${test.model}"
                    >Make reference</a
                  >`
            }
            <a href="${toComparePath(without(test.id))}" aria-label="Remove: ${test.model}"
              >Remove</a
            >
          </p>
        </li>`,
    )}
  </ol>`;
}

function toFigure(comparison: Comparison): Html {
  const figure = toCompareFigure(comparison, { pitch: PITCH });
  const others = comparison.tests.slice(1);
  return html`<figure class="compare">
      <div class="scroll" tabindex="0" role="group" aria-label="Limits by band">
        <div class="staff">${toSvg(figure.staff, { id: "cs" })}</div>
        ${toSvg(figure.plot, { id: "cp", label: sayComparison(comparison) })}
        ${toSvg(figure.key, { id: "ck" })}
      </div>
      ${
        others.length > 0 &&
        html`<ul class="map-key" aria-label="Key of the map">
          ${toMapKey(comparison).map(
            (item, at) =>
              html`<li>
                ${item.before !== undefined && html`<span>${item.before}</span>`}${toSvg(
                  item.figure,
                  { id: `mk${at}` },
                )}<span>${item.words}</span>
              </li>`,
          )}
        </ul>`
      }
    </figure>
    ${toValues(comparison)}`;
}

/** The figure's numbers. */
function toValues({ tests, bands_Hz: bandsHz }: Comparison): Html {
  return html`<details class="values">
    <summary>Table of values</summary>
    <div class="scroll" tabindex="0" role="group" aria-label="Output limits by band">
      <table class="figures">
        <thead>
          <tr>
            <th scope="col">band</th>
            ${tests.map((_, at) => html`<th scope="col">${letterOf(at)}, dB SPL at 1${NBSP}m</th>`)}
            ${tests.slice(1).map((_, at) => html`<th scope="col">${letterOf(at + 1)} re A</th>`)}
          </tr>
        </thead>
        <tbody>
          ${bandsHz.map(
            (hz, nth) =>
              html`<tr>
                <th scope="row">${formatFrequency(hz)}</th>
                ${tests.map((test) => {
                  const band = test.bands.find((one) => one.nominal_Hz === hz);
                  return html`<td>${band === undefined ? "not assessed" : toLimitText(band)}</td>`;
                })}
                ${tests.slice(1).map((test) => {
                  const difference = test.differences[nth];
                  return html`<td>
                    ${difference === undefined ? "" : toDifferenceWords(difference, { whole: false })}
                  </td>`;
                })}
              </tr>`,
          )}
        </tbody>
      </table>
    </div>
  </details>`;
}

function toTable(tests: readonly ComparisonTest[]): Html {
  const parts = tests[0]?.parts ?? [];
  return html`<div
    class="scroll section-near"
    tabindex="0"
    role="group"
    aria-label="By part of the sound"
  >
    <table class="compare-table">
      <caption class="sr-only">
        Limits by part of the sound, dB SPL at 1 m
      </caption>
      <thead>
        <tr>
          <th scope="col">Loudspeaker</th>
          <th scope="col">Reached at 1${NBSP}m, dB</th>
          ${parts.map(
            (part) =>
              html`<th scope="col">
                ${part.name}, dB
                <small>${toRange(part.from_Hz, part.to_Hz)}</small>
              </th>`,
          )}
          <th scope="col">Gives out first <small>lowest drive, with the run level</small></th>
        </tr>
      </thead>
      <tbody>
        ${tests.map(
          (test, at) =>
            html`<tr>
              <th scope="row">${toLetter(at)}${test.model}</th>
              <td>${toLines(toReachedLines(test))}</td>
              ${parts.map(({ name }) => {
                const part = test.parts.find((one) => one.name === name);
                return html`<td>
                  ${part === undefined ? html`<small>not assessed</small>` : toLines(toPartLines(part))}
                </td>`;
              })}
              <td>${toFirst(test)}</td>
            </tr>`,
        )}
      </tbody>
    </table>
  </div>`;
}

const toLines = ({ atLeast, words, note }: TwoLines): Html =>
  html`${atLeast && html`<span class="dim">at least </span>`}${
    /^\d/.test(words) ? html`<b>${words}</b>` : words
  }${note !== null && html`<small>${note}</small>`}`;

function toFirst(test: ComparisonTest): Html {
  const { words, note } = toFirstLines(test);
  const { first } = test;
  const mark =
    first !== null &&
    toSvg(
      {
        width: 16,
        height: 16,
        patterns: [],
        shapes: [{ kind: "group", x: 8, y: 8, shapes: causeShapes(first.cause, COLOURS.ink) }],
      },
      { id: "", className: "mark", label: CAUSE_WORDS[first.cause] },
    );
  return html`${mark}${words}${note !== null && html`<small>${note}</small>`}`;
}

function toFoot(comparison: Comparison, keys: readonly string[]): Html {
  const query = keys.map((key) => encodeURIComponent(key)).join(",");
  return html`<div class="compare-foot">
    <p class="small">${toMethodNotes(comparison)}</p>
    <p class="acts">
      <a href="/published/compare/csv?t=${asHtml(query)}" download="compare.csv">CSV</a>${
        keys.length < MOST_COMPARED &&
        html`<a href="/published?t=${asHtml(query)}">Add from the published tests</a>`
      }
    </p>
  </div>`;
}
