import { formatNumber, formatPlain, NBSP } from "@/lib/charts/format";
import { PLAN_LADDER, toLadderFigure, type LadderStep } from "@/lib/charts/ladder";
import type { Plan } from "@/lib/series/plan-schema";
import { Shapes } from "../parts/shapes";
import { TableFrame } from "../parts/table";

const TOP_DBFS = -3;

/** The planned levels as steps, with the peak of each stimulus file. */
export function LadderPicture({
  plan,
}: {
  plan: Pick<Plan, "levels" | "closing" | "conditioning">;
}) {
  const levels = [...plan.levels].sort((a, b) => a.level_dB - b.level_dB);
  const highest = levels.at(-1)?.level_dB ?? 0;
  const steps = levels.flatMap((level): LadderStep[] => {
    const peakDbfs = TOP_DBFS - (highest - level.level_dB);
    const short: LadderStep = {
      levelDb: level.level_dB,
      longTerm: false,
      state: "full",
      mark: null,
      label: [`${formatPlain(level.level_dB)}${NBSP}dB`, toRepeats(level.repeats)].filter(
        (line) => line !== "",
      ),
      note: `${formatNumber(peakDbfs, Number.isInteger(peakDbfs) ? 0 : 1)}${NBSP}dBFS`,
    };
    if (!level.long_term) return [short];
    return [
      short,
      {
        ...short,
        longTerm: true,
        label: [`${formatPlain(level.level_dB)}${NBSP}long`],
        note: `after ${formatPlain(plan.conditioning.minutes)}${NBSP}min`,
      },
    ];
  });
  const lowest = levels[0];
  if (plan.closing && lowest !== undefined) {
    steps.push({
      levelDb: lowest.level_dB,
      longTerm: false,
      state: "full",
      mark: null,
      label: ["closing"],
      note: null,
    });
  }
  const figure = toLadderFigure(steps, PLAN_LADDER);
  const says = `Planned levels from ${formatPlain(lowest?.level_dB ?? 0)} to ${formatPlain(highest)} dB with the peak of each stimulus file`;
  return (
    <TableFrame label="Planned levels" className="pb-1">
      <svg
        width={figure.width}
        height={figure.height}
        viewBox={`0 0 ${figure.width} ${figure.height}`}
        role="img"
        aria-label={says}
      >
        <Shapes shapes={figure.shapes} />
      </svg>
    </TableFrame>
  );
}

const toRepeats = (repeats: number): string => (repeats === 0 ? "" : `${repeats + 1} times`);
