import type { SeriesRow } from "@/lib/api/series";
import { MOST_COMPARED } from "@/lib/compare/comparison-schema";
import { Checkbox } from "../parts/checkbox";

interface ChooseBoxProps {
  row: Pick<SeriesRow, "id" | "number" | "loudspeaker" | "limits">;
  chosen: readonly string[];
  onChoose: (id: string) => void;
  /** With the word beside it, where no head names the column. */
  worded?: boolean;
}

/** Puts a series into the compare tray; nothing for one that has no limits yet. */
export function ChooseBox({ row, chosen, onChoose, worded = false }: ChooseBoxProps) {
  const checked = chosen.includes(row.id);
  if (row.limits.length === 0 && !checked) return null;
  return (
    <Checkbox
      tone="overprint"
      aria-label={`Compare ${row.loudspeaker.model}, ${row.number}`}
      checked={checked}
      disabled={!checked && chosen.length >= MOST_COMPARED}
      onChange={() => onChoose(row.id)}
    >
      {worded && "compare"}
    </Checkbox>
  );
}
