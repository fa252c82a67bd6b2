import { useId } from "react";
import { formatFrequency, formatPercentPlain } from "@/lib/charts/format";
import { toSeriesLevels } from "@/lib/charts/series-levels";
import { slateStep, toCss } from "@/lib/charts/tokens";
import { plainShortTermLevels } from "@/lib/result/finding";
import type { Band, BandLevel, Quality } from "@/lib/result/result-schema";
import { LevelSwatch } from "../parts/level-swatch";

const ORDERS = [2, 3, 4, 5, 6, 7, 8, 9];

/** Harmonics of a band by level, in slate; hatched in the noise, a mark where near it. */
export function HarmonicsTable({ band }: { band: Band }) {
  const levels = plainShortTermLevels(band);
  const noiseId = useId().replaceAll(/[^\w-]/g, "");
  const paints = toSeriesLevels(levels.map((level) => level.level_dB));
  return (
    <div className="overflow-x-auto">
      <svg className="absolute size-0" aria-hidden="true">
        <defs>
          <pattern
            id={noiseId}
            width="6"
            height="6"
            patternUnits="userSpaceOnUse"
            patternTransform="rotate(45)"
          >
            <path className="stroke-noise" d="M0 0v6" strokeWidth="1.4" />
          </pattern>
        </defs>
      </svg>
      <table className="figures w-full border-separate border-spacing-px text-cell">
        <caption className="pb-1 text-left text-label font-medium">
          <span className="flex justify-between gap-4">
            <span>harmonics, % of fundamental</span>
            <span>{formatFrequency(band.nominal_Hz)}</span>
          </span>
        </caption>
        <thead>
          <tr className="text-ink-2">
            <th scope="col" className="pr-2 text-left font-normal">
              run
            </th>
            {ORDERS.map((order) => (
              <th key={order} scope="col" className="font-normal">
                H{order}
              </th>
            ))}
            <th scope="col" className="font-semibold text-ink">
              THD
            </th>
          </tr>
        </thead>
        <tbody>
          {levels.map((level, at) => (
            <tr key={level.level_dB}>
              <th scope="row" className="pr-2 text-left font-normal whitespace-nowrap">
                <span className="inline-flex items-center gap-1.5">
                  {paints[at] !== undefined && <LevelSwatch paint={paints[at].paint} size={11} />}
                  {level.level_dB}
                </span>
              </th>
              {ORDERS.map((order) => (
                <Cell key={order} {...cellOf(level, order)} noiseId={noiseId} />
              ))}
              <Cell
                percent={level.thd_percent}
                quality={level.thd_quality}
                noiseId={noiseId}
                strong
              />
            </tr>
          ))}
        </tbody>
      </table>
      {levels.some((level) => level.thd_quality === "uncertain") && (
        <p className="figures mt-1 text-cell text-ink-2">(…) near the noise: uncertain</p>
      )}
    </div>
  );
}

interface CellProps {
  percent: number | null;
  quality: Quality | null;
  /** The hatch of what lies in the noise. */
  noiseId: string;
  strong?: boolean;
}

function cellOf(level: BandLevel, order: number): Pick<CellProps, "percent" | "quality"> {
  const found = level.harmonics.find((harmonic) => harmonic.order === order);
  return { percent: found?.percent ?? null, quality: found?.quality ?? null };
}

/** An SVG ground keeps the page free of inline styles. */
function Cell({ percent, quality, noiseId, strong = false }: CellProps) {
  if (percent === null) {
    return (
      <td className="relative h-[22px] min-w-[30px] p-0">
        <svg className="absolute inset-0 size-full" aria-hidden="true">
          {quality === "noise" && (
            <rect width="100%" height="100%" fill={`url(#${noiseId})`} opacity="0.6" />
          )}
        </svg>
        <span className="sr-only">{quality === "noise" ? "in the noise" : "above the range"}</span>
      </td>
    );
  }
  const step = slateStep(percent);
  const words = formatPercentPlain(percent);
  return (
    <td className="relative h-[22px] min-w-[30px] p-0 text-center">
      <svg className="absolute inset-0 size-full" aria-hidden="true">
        <rect width="100%" height="100%" fill={toCss(step.fill)} />
        <text
          x="50%"
          y="15"
          textAnchor="middle"
          fontSize="11"
          fontWeight={strong ? 600 : 400}
          fill={toCss(step.text)}
        >
          {quality === "uncertain" ? `(${words})` : words}
        </text>
      </svg>
      <span className="sr-only">
        {words} %{quality === "uncertain" ? ", near the noise" : ""}
      </span>
    </td>
  );
}
