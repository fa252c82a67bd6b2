/** Revisions of a publication: the list, the word on a replaced one, the page of a withdrawn one. */
import { html, type Html } from "@/lib/html/html";
import { toNewestPath, toRevisionPath } from "@/lib/publication/addresses";
import type { PublicationState, Snapshot } from "@/lib/publication/snapshot-schema";
import { toLongDay } from "@/lib/time/time-words";

export interface Revision {
  slug: string;
  revision: number;
  state: PublicationState;
  change_note: string | null;
  published_at: Date;
  withdrawn_at: Date | null;
  withdraw_reason: string | null;
}

interface RevisionsProps {
  snapshot: Snapshot;
  row: Revision;
  /** Newest first. */
  revisions: readonly Revision[];
  timeZone: string;
}

/** On an older revision: what replaced it, and why. */
export function toReplacedBanner(props: RevisionsProps): Html | false {
  const { snapshot, row, revisions, timeZone } = props;
  const newest = revisions[0];
  if (row.state !== "replaced" || newest === undefined || newest.revision === row.revision) {
    return false;
  }
  const day = toLongDay(newest.published_at, timeZone);
  const path = toNewestPath(snapshot.lab.slug, row.slug);
  return html`<div class="banner" role="note">
    <p>
      <b>Revision ${row.revision} was replaced by revision ${newest.revision} on ${day}.</b> ${
        newest.change_note !== null && `What changed: ${newest.change_note}`
      } <a href="${path}">See the newest revision</a>
    </p>
    ${
      newest.state === "withdrawn" &&
      html`<p><b>That revision was withdrawn.</b> ${newest.withdraw_reason}</p>`
    }
  </div>`;
}

/** Every revision with its note; nothing where there is only one. */
export function toRevisionsSection(props: RevisionsProps): Html | false {
  if (props.revisions.length < 2) return false;
  return html`<section class="section" aria-labelledby="revisions">
    <h2 id="revisions">Revisions</h2>
    ${toRevisionList(props)}
  </section>`;
}

function toRevisionList({ snapshot, row, revisions, timeZone }: RevisionsProps): Html {
  return html`<ol class="revisions">
    ${revisions.map((one) => {
      const path = toRevisionPath(snapshot.lab.slug, one.slug, one.revision);
      const name = `Revision ${one.revision}`;
      return html`<li>
        ${
          one.revision === row.revision ? html`<b>${name}</b>` : html`<a href="${path}">${name}</a>`
        },
        ${toLongDay(one.published_at, timeZone)}${
          one.change_note !== null && html`: ${one.change_note}`
        }${one.state === "withdrawn" && html` (withdrawn: ${one.withdraw_reason})`}
      </li>`;
    })}
  </ol>`;
}

/** What stays of a withdrawn publication: who, when and why, and no figure. */
export function toWithdrawnBody(props: RevisionsProps): Html {
  const { snapshot, row, revisions, timeZone } = props;
  const { maker, model } = snapshot.loudspeaker;
  return html`<div class="hero">
    <p class="eyebrow"><b>${model}</b> by ${maker}</p>
    <h1>This test was withdrawn.</h1>
    <div class="banner" role="note">
      <p>
        <b
          >${snapshot.lab.name} withdrew
          it${row.withdrawn_at !== null && ` on ${toLongDay(row.withdrawn_at, timeZone)}`}.</b
        >
        ${row.withdraw_reason}
      </p>
    </div>
    <p class="method">
      Do not quote its figures. ${snapshot.series.number}, revision ${snapshot.revision}.
    </p>
    ${revisions.length > 1 && toRevisionList(props)}
  </div>`;
}
