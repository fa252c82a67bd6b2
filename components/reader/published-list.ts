/** The page of published tests: filters that work without script, and a card for each. */
import { formatFrequency, formatLevel, formatLimitDown, NBSP } from "@/lib/charts/format";
import { CAUSE_WORDS, causeShapes } from "@/lib/charts/marks";
import { toSmallWall } from "@/lib/charts/small-wall";
import { toSvg } from "@/lib/charts/svg-text";
import { COLOURS } from "@/lib/charts/tokens";
import { letterOf } from "@/lib/compare/compare-words";
import { MOST_COMPARED } from "@/lib/compare/comparison-schema";
import { toMethodLine } from "@/lib/exposure/notices";
import { asHtml, html, type Html } from "@/lib/html/html";
import {
  PUBLISHED_SIZES_DB,
  PUBLISHED_SORTS,
  toComparePath,
  toListNotice,
  toPublishedHref,
  type PublishedChoices,
  type PublishedFilter,
  type PublishedTest,
} from "@/lib/reader/published-list";
import { toLongDay } from "@/lib/time/time-words";
import { toNotice } from "./frame";

interface PublishedListProps {
  /** Of this page of the list. */
  tests: readonly PublishedTest[];
  found: number;
  total: number;
  pages: number;
  choices: PublishedChoices;
  /** Picked for comparing, wherever in the list they stand. */
  chosen: readonly Pick<PublishedTest, "key" | "model">[];
  filter: PublishedFilter;
}

const SORT_WORDS = { newest: "newest first", loudest: "loudest first", name: "by name" } as const;

export function toPublishedBody(props: PublishedListProps): Html {
  const { tests, found, total, filter } = props;
  const notice = toListNotice(tests);
  return html`<div class="hero list">
      <h1>Published tests</h1>
      <p class="method">
        How loud each loudspeaker reached at 1${NBSP}m (3.3${NBSP}ft) in every band of its range,
        and where it gives out first. ${toMethodLine("each test names its limit")}
      </p>
      ${notice !== null && toNotice(notice, "slim")} ${toFilters(props)}
    </div>
    <p class="count">${found === total ? `${total} tests` : `${found} of ${total} tests`}</p>
    ${
      tests.length === 0
        ? html`<p class="empty">
            ${total === 0 ? "Nothing is published yet." : "No published test matches. Try fewer words."}
          </p>`
        : html`<ul class="cards">
            ${tests.map((test) => toCard(test, filter))}
          </ul>`
    }
    ${props.pages > 1 && toPager(filter, props.pages)} ${props.chosen.length > 0 && toTray(props)}`;
}

function toFilters({ choices, filter }: PublishedListProps): Html {
  const option = (value: string, words: string, on: boolean): Html =>
    html`<option value="${value}" ${on && asHtml(" selected")}>${words}</option>`;
  const select = (
    name: string,
    label: string,
    value: string,
    options: readonly (readonly [value: string, words: string])[],
  ): Html =>
    html`<label
      ><span>${label}</span
      ><select name="${name}">
        ${options.map(([one, words]) => option(one, words, one === value))}
      </select></label
    >`;
  const asIs = (words: readonly string[]) => words.map((word) => [word, word] as const);
  return html`<form class="filters" action="/published" method="get" role="search">
    <label
      ><span>loudspeaker or maker</span
      ><input type="search" name="q" value="${filter.search}" maxlength="80"
    /></label>
    ${select("kind", "kind", filter.kind, [["", "any kind"], ...asIs(choices.kinds)])}
    ${select("maker", "maker", filter.maker, [["", "any maker"], ...asIs(choices.makers)])}
    ${select("lab", "lab", filter.lab, [["", "any lab"], ...asIs(choices.labs)])}
    ${select("limit", "limit", filter.criterion, [
      ["", "any limit"],
      ...choices.criteria.map(({ key, words }) => [key, words] as const),
    ])}
    ${select("from", "reached at least", filter.fromDb === null ? "" : String(filter.fromDb), [
      ["", "any level"],
      ...PUBLISHED_SIZES_DB.map((db) => [String(db), `${db}${NBSP}dB`] as const),
    ])}
    ${select(
      "sort",
      "order",
      filter.sort,
      PUBLISHED_SORTS.map((sort) => [sort, SORT_WORDS[sort]] as const),
    )}
    ${
      filter.chosen.length > 0 &&
      html`<input type="hidden" name="t" value="${filter.chosen.join(",")}" />`
    }
    <button type="submit">Show</button>
  </form>`;
}

/** What was picked for comparing; it works without script, the address holds it. */
function toTray({ chosen, filter }: PublishedListProps): Html {
  const keys = chosen.map((test) => test.key);
  return html`<section class="tray" aria-label="Compare tray" id="tray">
    <h2>Compare</h2>
    <ol>
      ${chosen.map(
        (test, at) =>
          html`<li>
            <span class="figures">${letterOf(at)}</span> <b>${test.model}</b
            ><a
              href="${toPublishedHref(filter, { chosen: keys.filter((key) => key !== test.key) })}"
              aria-label="Take ${test.model} out"
              >✕</a
            >
          </li>`,
      )}
    </ol>
    <p class="small">
      ${chosen.length === 1 ? "Pick one more." : "Four at most."} The first is the reference.
    </p>
    <p class="acts">
      <a href="${toPublishedHref(filter, { chosen: [] })}">Clear</a>${
        chosen.length > 1 &&
        html`<a class="go" href="${toComparePath(keys)}">Compare ${chosen.length}</a>`
      }
    </p>
  </section>`;
}

/** In where it was not, while there is room; out where it was. */
function toChoose(test: PublishedTest, filter: PublishedFilter): Html | false {
  const { chosen } = filter;
  if (chosen.includes(test.key)) {
    const rest = chosen.filter((key) => key !== test.key);
    return html`<a
      class="pick picked"
      href="${toPublishedHref(filter, { chosen: rest })}"
      aria-label="Take out of the comparison: ${test.model}"
      >Take out of the comparison</a
    >`;
  }
  return (
    chosen.length < MOST_COMPARED &&
    html`<a
      class="pick"
      href="${toPublishedHref(filter, { chosen: [...chosen, test.key] })}#tray"
      aria-label="Add to compare: ${test.model}"
      >Add to compare</a
    >`
  );
}

function toCard(test: PublishedTest, filter: PublishedFilter): Html {
  const { headline } = test;
  const reached =
    headline === null
      ? html`<span class="dim">no single figure</span>`
      : html`${headline.at_least && html`<small>at least</small> `}${formatLimitDown(headline.spl_dB)}`;
  const range =
    headline === null
      ? ""
      : ` · ${formatFrequency(headline.from_Hz)} to ${formatFrequency(headline.to_Hz)}`;
  return html`<li>
    <div class="card-head">
      <h2><a href="${test.path}">${test.model}</a></h2>
      <p class="reached">${reached}</p>
    </div>
    <p class="small">
      ${test.maker}${test.kind !== "" && ` · ${test.kind}`}${range} · limit: ${test.limitWords}
    </p>
    ${toSvg(toSmallWall(test.bands, { width: 600, height: 110 }), { id: "", className: "small-wall" })}
    <p class="card-foot">
      <span>${toFirstWords(test)}</span
      ><span class="figures"
        >${toLongDay(test.publishedAt, "UTC")}, rev. ${test.revision}, ${test.lab}</span
      >
    </p>
    ${toChoose(test, filter)}
  </li>`;
}

function toFirstWords({ headline, firstCause, highestRunDb }: PublishedTest): Html {
  const first = headline?.first ?? null;
  if (first === null) return html`Limit not reached up to the ${formatLevel(highestRunDb)} run`;
  const mark =
    firstCause !== null &&
    html`${toSvg(
      {
        width: 16,
        height: 16,
        patterns: [],
        shapes: [{ kind: "group", x: 8, y: 8, shapes: causeShapes(firstCause, COLOURS.ink) }],
      },
      { id: "", className: "mark", label: CAUSE_WORDS[firstCause] },
    )}`;
  const band = formatFrequency(first.nominal_Hz);
  const words =
    first.status === "below lowest"
      ? `${band}: past its limit from the start`
      : `${band} gives out first${first.spl_dB === null ? "" : `, at ${formatLimitDown(first.spl_dB)}`}`;
  return html`${mark}${words}`;
}

function toPager(filter: PublishedFilter, pages: number): Html {
  const to = (page: number): string => toPublishedHref(filter, { page });
  return html`<nav class="pager" aria-label="Pages">
    ${filter.page > 1 && html`<a href="${to(filter.page - 1)}" rel="prev">Earlier page</a>`}<span
      >page ${filter.page} of ${pages}</span
    >${filter.page < pages && html`<a href="${to(filter.page + 1)}" rel="next">Next page</a>`}
  </nav>`;
}
