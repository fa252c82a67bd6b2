/**
 * Means of a spectrum that are uniform in lg f. Means uniform in f differ by 0.14 dB in a third
 * octave on a slope of 24 dB per octave (docs/domain.md section 3).
 */

/** Natural logarithms of whole numbers, grown as needed: bin k of any spectrum needs ln k. */
export class LogTable {
  #ln = new Float64Array([Number.NEGATIVE_INFINITY, 0]);

  upTo(last: number): Float64Array {
    const known = this.#ln.length;
    if (last >= known) {
      const grown = new Float64Array(Math.max(last + 1, 2 * known));
      grown.set(this.#ln);
      for (let k = known; k < grown.length; k += 1) grown[k] = Math.log(k);
      this.#ln = grown;
    }
    return this.#ln;
  }
}

/**
 * Mean over ln f of a spectrum, linear between bins, in cells that follow each other.
 *
 * @param spectrum [bins], bin k at k * binHz. Not modified.
 * @param edgeHz [cells + 1] ascending edges.
 * @param scale factor on every edge: the order, for cells at excitation frequencies.
 * @param into [cells] receives the means; NaN from the first cell on that passes the last bin or begins under bin 1.
 */
export function meanUniformInLog(
  spectrum: Float64Array,
  binHz: number,
  edgeHz: Float64Array,
  scale: number,
  logs: LogTable,
  into: Float64Array,
): void {
  const ln = logs.upTo(spectrum.length);
  for (let c = 0; c < into.length; c += 1) {
    const a = (edgeHz[c]! * scale) / binHz;
    const b = (edgeHz[c + 1]! * scale) / binHz;
    into[c] = a < 1 || b > spectrum.length - 1 ? Number.NaN : meanOverLog(spectrum, a, b, ln);
  }
}

function meanOverLog(spectrum: Float64Array, a: number, b: number, ln: Float64Array): number {
  const first = Math.ceil(a);
  const last = Math.floor(b);
  const atA = interpolate(spectrum, a);
  const atB = interpolate(spectrum, b);
  if (first > last) return (atA + atB) / 2;
  const lnA = Math.log(a);
  const lnB = Math.log(b);
  let doubled =
    (atA + spectrum[first]!) * (ln[first]! - lnA) + (spectrum[last]! + atB) * (lnB - ln[last]!);
  for (let k = first; k < last; k += 1)
    doubled += (spectrum[k]! + spectrum[k + 1]!) * (ln[k + 1]! - ln[k]!);
  return doubled / (2 * (lnB - lnA));
}

function interpolate(spectrum: Float64Array, position: number): number {
  const k = Math.floor(position);
  const share = position - k;
  return share === 0 ? spectrum[k]! : spectrum[k]! * (1 - share) + spectrum[k + 1]! * share;
}
