/** Mean of cells whose middle lies in the band; NaN where none does. */
export function meanInBand(
  cells: Float64Array,
  edgeHz: Float64Array,
  [lowHz, highHz]: readonly [number, number],
): number {
  let sum = 0;
  let count = 0;
  for (let c = 0; c < cells.length; c += 1) {
    const middle = Math.sqrt(edgeHz[c]! * edgeHz[c + 1]!);
    if (middle < lowHz || middle > highHz || Number.isNaN(cells[c]!)) continue;
    sum += cells[c]!;
    count += 1;
  }
  return sum / count;
}
