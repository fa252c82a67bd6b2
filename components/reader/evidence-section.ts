/** Where a reader gets what the result rests on, and how to compute it again. */
import { html, type Html } from "@/lib/html/html";
import { toRevisionPath } from "@/lib/publication/addresses";
import type { Snapshot } from "@/lib/publication/snapshot-schema";

/** Nothing where the lab keeps the evidence to itself. */
export function toEvidenceSection(snapshot: Snapshot): Html | false {
  if (!snapshot.evidence_public) return false;
  const { lab, series, revision, analysis } = snapshot;
  const path = `${toRevisionPath(lab.slug, series.slug, revision)}/evidence.zip`;
  return html`<section class="section prose" aria-labelledby="check">
    <h2 id="check">Check this yourself</h2>
    <p>
      <a href="${path}" download>All recordings of this test, with its result (ZIP)</a>. The
      analyst’s decisions, the engine’s version and source, and a digest of every file are in it.
    </p>
    <p>
      Engine ${analysis.engine_version} computes the published result again, byte for byte; in its
      checkout, with the unpacked folder beside it:
    </p>
    <pre
      class="figures"
    ><code>npm run --silent analyse -- ../${series.slug}-${revision} --out ../again.json
cmp ../again.json ../${series.slug}-${revision}/result.json</code></pre>
    <p class="small">A newer engine says so, and its figures may differ.</p>
  </section>`;
}
