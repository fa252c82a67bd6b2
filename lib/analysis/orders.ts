/** Harmonic orders that the engine looks at. */
export const HIGHEST_ORDER = 9;
export const HARMONIC_ORDERS = [2, 3, 4, 5, 6, 7, 8, 9] as const;

/** "2-5" of [2, 3, 4, 5]; "2-3, 5" with a gap; "" of none. */
export function toOrdersText(orders: readonly number[]): string {
  const spans: [number, number][] = [];
  for (const order of orders) {
    const last = spans.at(-1);
    if (last !== undefined && order === last[1] + 1) last[1] = order;
    else spans.push([order, order]);
  }
  return spans.map(([from, to]) => (from === to ? `${from}` : `${from}-${to}`)).join(", ");
}
