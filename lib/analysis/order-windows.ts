/**
 * The stretch of lag that belongs to each order. Order n sits R ln n before the linear response; the
 * space between two orders is shared so that windows never overlap: what rings needs more room after
 * its arrival than before it (docs/domain.md section 1).
 */
import { HIGHEST_ORDER } from "./orders";

export interface OrderWindow {
  order: number;
  /** Samples by which this order precedes the linear arrival; with fraction. */
  lead: number;
  /** Samples before the arrival of this order. */
  before: number;
  /** [before + after] weights, 1 around the arrival, raised-cosine flanks. */
  weights: Float64Array;
  /** Sum of squared weights over the rate: T_w of the noise gain, s. */
  energyS: number;
}

/** Share of the space to the next higher order that lies before the arrival; the rest is that order's tail. */
const SHARE_BEFORE = 0.3;
const LONGEST_BEFORE_S = 0.35;
const LONGEST_AFTER_S = 0.8;
const FLANK_BEFORE = 0.6;
const FLANK_AFTER = 0.35;

/** Windows of orders 1 to 9. */
export function toOrderWindows(rateConstantS: number, rateHz: number): OrderWindow[] {
  return Array.from({ length: HIGHEST_ORDER }, (_, i) => {
    const order = i + 1;
    const spaceBeforeS = rateConstantS * Math.log((order + 1) / order);
    const spaceAfterS = order === 1 ? Infinity : rateConstantS * Math.log(order / (order - 1));
    const beforeS = Math.min(LONGEST_BEFORE_S, SHARE_BEFORE * spaceBeforeS);
    const afterS = Math.min(LONGEST_AFTER_S, (1 - SHARE_BEFORE) * spaceAfterS);
    return toWindow(order, rateConstantS * Math.log(order) * rateHz, beforeS, afterS, rateHz);
  });
}

/** The gate of an environment with reflections: what arrives until gateS after the direct sound. */
export function toGateWindow(gateS: number, rateHz: number): OrderWindow {
  return toWindow(1, 0, Math.min(LONGEST_BEFORE_S, gateS / 4), gateS, rateHz);
}

function toWindow(
  order: number,
  lead: number,
  beforeS: number,
  afterS: number,
  rateHz: number,
): OrderWindow {
  const before = Math.max(1, Math.floor(beforeS * rateHz));
  const after = Math.max(1, Math.floor(afterS * rateHz));
  const weights = new Float64Array(before + after).fill(1);
  const rise = Math.max(1, Math.floor(before * FLANK_BEFORE));
  for (let n = 0; n < rise; n += 1) weights[n] = 0.5 - 0.5 * Math.cos((Math.PI * (n + 0.5)) / rise);
  const fall = Math.max(1, Math.floor(after * FLANK_AFTER));
  for (let n = 0; n < fall; n += 1)
    weights[weights.length - 1 - n] = 0.5 - 0.5 * Math.cos((Math.PI * (n + 0.5)) / fall);
  let energy = 0;
  for (let n = 0; n < weights.length; n += 1) energy += weights[n]! * weights[n]!;
  return { order, lead, before, weights, energyS: energy / rateHz };
}
