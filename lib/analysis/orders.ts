/** Harmonic orders that the engine looks at. */
export const HIGHEST_ORDER = 9;
export const HARMONIC_ORDERS = [2, 3, 4, 5, 6, 7, 8, 9] as const;

/** "2-5" of [2, 3, 4, 5]; "2-3, 5" with a gap; "" of none. */
export function toOrdersText(orders: readonly number[]): string {
  let text = "";
  for (let i = 0; i < orders.length; i += 1) {
    const from = orders[i]!;
    while (orders[i + 1] === orders[i]! + 1) i += 1;
    const to = orders[i]!;
    text += `${text === "" ? "" : ", "}${from === to ? from : `${from}-${to}`}`;
  }
  return text;
}
