import { toEnvelopeFigure } from "@/lib/charts/envelope";
import { formatFrequency, formatPlain, NBSP } from "@/lib/charts/format";
import type { LevelPaint } from "@/lib/charts/tokens";
import type { ArrivalCheck, ArrivalReport } from "@/lib/runs/arrival-schema";
import { Shapes } from "../parts/shapes";

interface EnvelopeFigureProps {
  report: ArrivalReport;
  /** The check whose place is marked. */
  check: ArrivalCheck | null;
  paint: LevelPaint | undefined;
}

/** The recording along the sweep, with the place that a check speaks of. */
export function EnvelopeFigure({ report, check, paint }: EnvelopeFigureProps) {
  const where = check?.where ?? null;
  const place =
    where === null
      ? null
      : { from_s: where.from_s, to_s: where.to_s, missing: check?.code === "sweep-complete" };
  const figure = toEnvelopeFigure({
    envelope: report.envelope,
    place,
    ...(paint === undefined ? {} : { paint }),
  });
  return (
    <svg
      className="h-auto w-full max-w-[560px]"
      viewBox={`0 0 ${figure.width} ${figure.height}`}
      role="img"
      aria-label={toEnvelopeSentence(report, check)}
    >
      <Shapes shapes={figure.shapes} />
    </svg>
  );
}

/** "Envelope of the recording, 12.85 s; clipped input marked from 57 Hz to 72 Hz" */
export function toEnvelopeSentence(report: ArrivalReport, check: ArrivalCheck | null): string {
  const what = `Envelope of the recording, ${formatPlain(report.length_s)}${NBSP}s`;
  const where = check?.where ?? null;
  if (check === null || where === null) return what;
  const place =
    where.from_Hz !== null && where.to_Hz !== null
      ? `from ${formatFrequency(where.from_Hz)} to ${formatFrequency(where.to_Hz)}`
      : `from ${formatPlain(where.from_s)} to ${formatPlain(where.to_s)}${NBSP}s`;
  return `${what}; ${check.title} marked ${place}`;
}
