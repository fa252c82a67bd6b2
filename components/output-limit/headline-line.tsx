import { formatDb, formatLimitDown, formatLevel } from "@/lib/charts/format";
import { toHeadlineSentences } from "@/lib/result/headline-words";
import { sayCriterion } from "@/lib/result/criteria";
import type { Result } from "@/lib/result/result-schema";
import type { Criterion } from "@/lib/series/series-schema";

interface HeadlineLineProps {
  result: Result;
  criterion: Criterion;
}

const same = (a: Criterion, b: Criterion): boolean =>
  a.thd_percent === b.thd_percent && a.compression_dB === b.compression_dB;

/** The answer first: what was reached, what gives out first, and the programme estimate. */
export function HeadlineLine({ result, criterion }: HeadlineLineProps) {
  const headline = result.headline.find((one) => same(one.criterion, criterion)) ?? null;
  const programme = result.programme.filter((one) => same(one.criterion, criterion));
  return (
    <div className="max-w-[980px]">
      <p className="text-[19px]/7 font-[640]">
        {headline === null
          ? "No headline for this criterion: see what the analysis warns of, below."
          : toHeadlineSentences(headline).join(" ")}
      </p>
      <p className="figures mt-1 text-label text-ink-2">
        {sayCriterion(criterion)}, short-term, at 1&nbsp;m
        {programme.map((estimate) =>
          estimate.spl_dB === null
            ? ""
            : ` · estimated for ${estimate.spectrum === "pink" ? "pink" : "IEC 60268-1"} programme${estimate.at_least ? " at least" : ""} ${formatLimitDown(estimate.spl_dB)}${estimate.spl_dBA === null ? "" : `, ${formatDb(Math.floor(estimate.spl_dBA), 0)}(A)`} at ${formatLevel(estimate.crest_dB)} crest`,
        )}
      </p>
    </div>
  );
}
