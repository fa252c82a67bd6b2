/**
 * Figures of exposure as text. Levels round up, times round down: the safe side of each.
 * A no-break space stands before every unit.
 */
const SPACE = "\u00a0";

/** Guards against 101.99999999999999 where 102 is meant, and the other way round. */
const TINY = 1e-9;

/** 101.2 becomes "102 dB(A)"; a limit that was not reached rounds down: "101 dB". */
export function toLevelText(
  levelDb: number,
  unit: "dB" | "dB(A)" | "dB(C)",
  rounding: "up" | "down" = "up",
): string {
  const whole = rounding === "up" ? Math.ceil(levelDb - TINY) : Math.floor(levelDb + TINY);
  return `${whole < 0 ? "\u2212" : ""}${Math.abs(whole)}${SPACE}${unit}`;
}

/** 11403 becomes "3 h 10 min", 450 "7 min 30 s" where seconds are asked for, else "7 min". Rounds down. */
export function toTimeText(timeS: number, options: { seconds?: boolean } = {}): string {
  const whole = Math.floor(timeS + TINY);
  const hours = Math.floor(whole / 3600);
  const minutes = Math.floor((whole % 3600) / 60);
  const seconds = whole % 60;
  if (hours >= 24) return `${hours}${SPACE}h`;
  if (hours > 0)
    return minutes === 0 ? `${hours}${SPACE}h` : `${hours}${SPACE}h ${minutes}${SPACE}min`;
  if (minutes === 0) return `${seconds}${SPACE}s`;
  return options.seconds && seconds > 0
    ? `${minutes}${SPACE}min ${seconds}${SPACE}s`
    : `${minutes}${SPACE}min`;
}

/** A share in percent with two decimals, rounded up: "5.32 %"; "under 0.01 %" for less. */
export function toDoseText(dose: number): string {
  const percent = dose * 100;
  if (percent > 0 && percent < 0.01) return `under 0.01${SPACE}%`;
  return `${(Math.ceil(percent * 100 - TINY) / 100).toFixed(2)}${SPACE}%`;
}

/** A share in whole percent, rounded up: "21 %". */
export function toWholeDoseText(dose: number): string {
  return `${Math.ceil(dose * 100 - TINY)}${SPACE}%`;
}
