import type { RunView } from "@/lib/api/runs";
import type { SeriesView } from "@/lib/api/series";
import { formatDb, formatLevel, formatPlain, formatSignedDb, NBSP } from "@/lib/charts/format";
import { toSeriesLevels } from "@/lib/charts/series-levels";
import { LevelSwatch } from "../parts/level-swatch";
import { VerdictMark, type VerdictKind } from "../parts/verdict";

interface RunStripProps {
  series: SeriesView;
  runs: readonly RunView[];
}

const KINDS: Readonly<Record<string, string>> = {
  "short-term": "short-term",
  "long-term": "long-term",
  closing: "closing",
};

const SAY: Record<RunView["state"], [kind: VerdictKind, words: string]> = {
  passed: ["ok", "matches the plan"],
  warned: ["warned", "passed, with a warning"],
  kept: ["warned", "kept, with a reason"],
  failed: ["bad", "failed its checks"],
  checking: ["wait", "being checked"],
  excluded: ["bad", "excluded"],
  replaced: ["wait", "replaced"],
};

/** The runs of the series side by side, each with its verdict. */
export function RunStrip({ series, runs }: RunStripProps) {
  const planned = series.planned_runs.filter((run) => run.levelDb !== null);
  const levels = toSeriesLevels(series.plan.levels.map((level) => level.level_dB));
  const first = runs.find(
    (run) => run.role === "short-term" && run.level_dB === levels[0]?.levelDb,
  );
  return (
    <ul
      aria-label="Runs"
      className="grid border-y border-rule [grid-template-columns:repeat(auto-fit,minmax(200px,1fr))] max-sm:grid-cols-1"
    >
      {planned.map((run) => {
        const taken = runs.find(
          (one) => one.slot === run.slot && one.state !== "replaced" && one.state !== "excluded",
        );
        const paint = levels.find((level) => level.levelDb === run.levelDb)?.paint;
        const [kind, words] = taken === undefined ? toAwaited(run.asked?.by) : SAY[taken.state];
        return (
          <li
            key={run.slot}
            className="-ml-px border-l border-rule px-3 py-2 first:border-l-0 first:pl-0 max-sm:border-l-0 max-sm:pl-0"
          >
            <span className="flex items-center gap-2">
              {paint !== undefined && (
                <LevelSwatch paint={paint} longTerm={run.role === "long-term"} size={16} />
              )}
              <b className="figures text-[14px]/5 font-semibold">
                {formatLevel(run.levelDb ?? 0)}{" "}
                <span className="font-normal text-ink-2">
                  {run.variant ?? KINDS[run.role] ?? run.role}
                  {run.repeat > 1 ? `, repeat ${run.repeat - 1}` : ""}
                </span>
              </b>
              <span className="ml-auto">
                <VerdictMark kind={kind} size={13} />
              </span>
            </span>
            <span className="figures block pl-6 text-label text-ink-2">
              <span className="sr-only">{words}, </span>
              {toRunNote(run.role, taken, first, series) ?? words}
            </span>
          </li>
        );
      })}
    </ul>
  );
}

const toAwaited = (askedBy: string | undefined): [VerdictKind, string] => [
  "wait",
  askedBy === undefined ? "not in" : `asked for by ${askedBy}`,
];

function toRunNote(
  role: string,
  run: RunView | undefined,
  first: RunView | undefined,
  series: SeriesView,
): string | null {
  const report = run?.report;
  if (report == null) return null;
  if (role === "long-term") {
    return `after ${formatPlain(series.plan.conditioning.minutes)}${NBSP}min conditioning`;
  }
  if (role === "closing") {
    const before = first?.report?.measured_level_dB;
    const now = report.measured_level_dB;
    return before == null || now === null ? null : `${formatSignedDb(now - before)} re the first`;
  }
  return report.snr_dB === null ? null : `signal-to-noise ${formatDb(report.snr_dB, 0)}`;
}
