/** A run that an analyst asks for: which place of the plan it opens. */
import { AppError } from "../errors/app-error";
import { toLevelText, type PlannedRun } from "../series/planned-runs";

export interface WantedRun {
  level_dB: number;
  kind: "short-term" | "long-term";
  variant: string | null;
}

/**
 * @param planned places of the plan, asked-for ones included.
 * @param recorded slots that hold a recording.
 * @returns the slot.
 * @throws AppError "request.invalid" where the run cannot be played or analysed; "conflict.exists"
 *   where it is planned already
 */
export function toRequestSlot(
  wanted: WantedRun,
  planned: readonly PlannedRun[],
  recorded: ReadonlySet<string>,
): string {
  const { level_dB: levelDb, kind, variant } = wanted;
  const loudestDb = Math.max(
    ...planned.filter((run) => run.asked === undefined).map((run) => run.levelDb ?? -Infinity),
  );
  if (levelDb > loudestDb) {
    throw invalid(
      "level_dB",
      `The gain was set so that ${toLevelText(loudestDb)} dB peaks just below full scale: nothing louder can be played in this series. Plan another series for it.`,
    );
  }
  if (variant !== null && kind === "long-term") {
    throw invalid("kind", "A variant run is short-term.");
  }
  const level = toLevelText(levelDb);
  const same = planned.filter(
    (run) =>
      run.levelDb === levelDb &&
      run.variant === variant &&
      run.role === (variant === null ? kind : "variant"),
  );
  const waiting = same.find((run) => !recorded.has(run.slot));
  if (waiting !== undefined) {
    throw new AppError(
      "conflict.exists",
      `${waiting.label} is planned already and not recorded yet.`,
      { details: { slot: waiting.slot } },
    );
  }
  if (kind === "long-term" && same.length > 0) {
    throw new AppError(
      "conflict.exists",
      `The series has a ${level} dB long-term run. Ask the tester for another take of it in a comment.`,
      { details: { slot: same[0]?.slot } },
    );
  }
  const used = new Set(planned.map((run) => run.slot));
  const stem = variant === null ? (kind === "long-term" ? "long" : "short") : "variant-asked";
  for (let nth = 1; ; nth += 1) {
    const slot = nth === 1 ? `${stem}-${level}` : `${stem}-${level}-${nth}`;
    if (!used.has(slot)) return slot;
  }
}

const invalid = (field: string, message: string): AppError =>
  new AppError("request.invalid", message, { details: { fields: [{ path: field, message }] } });
