/** Figures in the sentences of the engine. */

/** "1.2 dB", with a true minus. */
export function sayDb(valueDb: number, digits = 1): string {
  return `${sayNumber(valueDb, digits)} dB`;
}

/** Fixed digits; never a negative zero. */
export function sayNumber(value: number, digits: number): string {
  const text = value.toFixed(digits);
  return Number(text) === 0 ? text.replace("-", "") : text.replace("-", "\u2212");
}

/** "96 dB": a run by its level. */
export function sayRun(levelDb: number): string {
  return `${Number(levelDb.toFixed(1))} dB`;
}

/** "63 Hz", "1.25 kHz". */
export function sayHz(nominalHz: number): string {
  return nominalHz < 1000 ? `${nominalHz} Hz` : `${Number((nominalHz / 1000).toPrecision(4))} kHz`;
}

/** "40 Hz, 50 Hz, 63 Hz and 9 more". */
export function sayBands(nominalHz: readonly number[], most = 6): string {
  const named = nominalHz.slice(0, most).map(sayHz).join(", ");
  return nominalHz.length > most ? `${named} and ${nominalHz.length - most} more` : named;
}
