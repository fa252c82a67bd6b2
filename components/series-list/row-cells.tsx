import type { ListLimits, SeriesRow } from "@/lib/api/series";
import { CAUSE_WORDS } from "@/lib/charts/marks";
import { CauseMark } from "../parts/cause-mark";
import { NoValue } from "../parts/table";
import { toFirstWords, toReachedWords } from "./list-words";

/** "at least 101" over "80 Hz to 16 kHz". */
export function ReachedCell({
  limits,
  unit = false,
}: {
  limits: ListLimits | null;
  unit?: boolean;
}) {
  const reached = toReachedWords(limits);
  if (reached === null) return <NoValue say="no limits yet" />;
  const known = limits?.headline != null;
  return (
    <span className="figures block">
      <span className={known ? "text-level" : "text-figure text-ink-2"}>
        {reached.words}
        {known && unit && " dB"}
      </span>
      {reached.note !== null && (
        <span className="block max-w-52 text-label whitespace-normal text-ink-2">
          {reached.note}
        </span>
      )}
    </span>
  );
}

/** The cause's mark, "50 Hz at 93 dB" and the run level there. */
export function FirstCell({ row, limits }: { row: SeriesRow; limits: ListLimits | null }) {
  const first = toFirstWords(row, limits);
  if (first === null) return <NoValue say="not known yet" />;
  const found = limits?.headline?.first != null;
  const cause = limits?.first_cause ?? null;
  return (
    <span className="figures grid grid-cols-[auto_1fr] gap-x-1.5">
      {found && cause !== null && <CauseMark cause={cause} label={CAUSE_WORDS[cause]} />}
      <span className={found ? "col-start-2 text-figure" : "col-span-2 text-label text-ink-2"}>
        {first.words}
      </span>
      {first.note !== null && (
        <span
          className={
            found ? "col-start-2 text-label text-ink-2" : "col-span-2 text-label text-ink-2"
          }
        >
          {first.note}
        </span>
      )}
    </span>
  );
}
