/** The page of published tests: filters that work without script, and a card for each. */
import { formatFrequency, formatLevel, formatLimitDown, NBSP } from "@/lib/charts/format";
import { CAUSE_WORDS, causeShapes } from "@/lib/charts/marks";
import { toSmallWall } from "@/lib/charts/small-wall";
import { toSvg } from "@/lib/charts/svg-text";
import { COLOURS } from "@/lib/charts/tokens";
import { toMethodLine } from "@/lib/exposure/notices";
import { asHtml, html, type Html } from "@/lib/html/html";
import {
  toListNotice,
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
  kinds: readonly string[];
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
            ${tests.map(toCard)}
          </ul>`
    }
    ${props.pages > 1 && toPager(filter, props.pages)}`;
}

function toFilters({ kinds, filter }: PublishedListProps): Html {
  const option = (value: string, words: string, on: boolean): Html =>
    html`<option value="${value}" ${on && asHtml(" selected")}>${words}</option>`;
  return html`<form class="filters" action="/published" method="get" role="search">
    <label
      ><span>loudspeaker or maker</span
      ><input type="search" name="q" value="${filter.search}" maxlength="80"
    /></label>
    <label
      ><span>kind</span
      ><select name="kind">
        ${option("", "any kind", filter.kind === "")}${kinds.map((kind) =>
          option(kind, kind, kind === filter.kind),
        )}
      </select></label
    >
    <label
      ><span>order</span
      ><select name="sort">
        ${(["newest", "loudest", "name"] as const).map((sort) =>
          option(sort, SORT_WORDS[sort], sort === filter.sort),
        )}
      </select></label
    >
    <button type="submit">Show</button>
  </form>`;
}

function toCard(test: PublishedTest): Html {
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
  const to = (page: number): string => {
    const query = new URLSearchParams({ q: filter.search, kind: filter.kind, sort: filter.sort });
    query.set("page", String(page));
    return `/published?${query.toString()}`;
  };
  return html`<nav class="pager" aria-label="Pages">
    ${filter.page > 1 && html`<a href="${to(filter.page - 1)}" rel="prev">Earlier page</a>`}<span
      >page ${filter.page} of ${pages}</span
    >${filter.page < pages && html`<a href="${to(filter.page + 1)}" rel="next">Next page</a>`}
  </nav>`;
}
