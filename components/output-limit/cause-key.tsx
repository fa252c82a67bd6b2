import { CAUSE_WORDS } from "@/lib/charts/marks";
import { DECIDABLE_CAUSES } from "@/lib/series/vocabulary";
import { CauseMark } from "../parts/cause-mark";

/** The causes as a line, where there is no room for the key column. */
export function CauseKey() {
  return (
    <ul
      className="figures flex flex-wrap gap-x-5 gap-y-1.5 px-5 pt-1.5 pb-1 text-cell text-ink-2"
      aria-label="Marks of the causes"
    >
      {DECIDABLE_CAUSES.map((cause) => (
        <li key={cause} className="inline-flex items-center gap-1.5">
          <CauseMark cause={cause} size={14} />
          {CAUSE_WORDS[cause]}
        </li>
      ))}
      <li className="inline-flex items-center gap-1.5">
        <svg width="16" height="9" viewBox="0 0 16 9" aria-hidden="true">
          <path className="stroke-ink" d="M1 0v8h14v-8" fill="none" strokeWidth="1.8" />
        </svg>
        not reached
      </li>
    </ul>
  );
}
