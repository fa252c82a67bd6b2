import { formatDb, formatNumber, NBSP } from "@/lib/charts/format";
import type { Band } from "@/lib/result/result-schema";

/** How well the band's absolute level is known, with the parts that make it up. */
export function SplUncertainty({ band }: { band: Band }) {
  const budget = band.spl_uncertainty;
  if (budget == null) return null;
  return (
    <details className="border-b border-rule py-3">
      <summary className="cursor-pointer">
        <b>Absolute SPL ± {formatDb(budget.expanded_dB)}</b>
        <span className="text-small text-ink-2"> (k = 2, for this one unit)</span>
      </summary>
      <dl className="mt-2 grid grid-cols-[minmax(0,1fr)_auto] gap-x-4 gap-y-1 text-small">
        {budget.parts.map((part) => (
          <div key={part.name} className="contents">
            <dt className="text-ink-2">
              {part.name}
              <span className="block text-label">
                {part.basis}
                {part.common ? "; the same for all bands" : ""}
              </span>
            </dt>
            <dd className="figures text-right text-figure">
              {formatNumber(part.standard_dB, 2)}
              {NBSP}dB
            </dd>
          </div>
        ))}
      </dl>
      <p className="mt-1.5 text-label text-ink-2">
        Standard uncertainties, combined as root of squares and doubled. Compression does not depend
        on them: it is the difference of two runs.
      </p>
    </details>
  );
}
