/** Labels that sit on the thing, moved apart where they would cover each other. */

/**
 * @param wanted [n] wished centres, px, any order.
 * @param gap least distance of two centres, px.
 * @param from, to the range that the centres keep to; where it is too short the gap shrinks to fit.
 * @returns [n] centres in the order of `wanted`: in sorted order at least `gap` apart, and as near
 *   to the wishes as that allows (blocks of touching labels move by their mean).
 */
export function spreadLabels(
  wanted: readonly number[],
  gap: number,
  from = -Infinity,
  to = Infinity,
): number[] {
  const room = wanted.length > 1 ? (to - from) / (wanted.length - 1) : Infinity;
  const step = Math.min(gap, room);
  const order = wanted.map((at, index) => ({ at, index })).sort((a, b) => a.at - b.at);
  // Each block keeps the sum of its members' wishes for its own start: pool adjacent violators.
  const blocks: { start: number; sum: number; members: number[] }[] = [];
  for (const { at, index } of order) {
    blocks.push({ start: at, sum: at, members: [index] });
    for (;;) {
      const last = blocks.at(-1);
      const before = blocks.at(-2);
      if (last === undefined || before === undefined) break;
      if (before.start + before.members.length * step <= last.start) break;
      const sum = before.sum + last.sum - last.members.length * before.members.length * step;
      const members = [...before.members, ...last.members];
      blocks.splice(-2, 2, { start: sum / members.length, sum, members });
    }
  }
  const centres = wanted.map(() => 0);
  let floor = from;
  const placed = blocks.flatMap((block) =>
    block.members.map((index, nth) => ({ index, at: block.start + nth * step })),
  );
  for (const label of placed) {
    label.at = Math.max(label.at, floor);
    floor = label.at + step;
  }
  let ceiling = to;
  for (const label of placed.reverse()) {
    label.at = Math.min(label.at, ceiling);
    ceiling = label.at - step;
  }
  for (const { index, at } of placed) centres[index] = at;
  return centres;
}
