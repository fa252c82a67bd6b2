/**
 * Complex FFT of 2^a * {1, 3, 5, 9, 15} points on interleaved doubles: self-sorting (Stockham)
 * passes of radix 4, then 2, 5 and 3 (kernel.as). All tables and scratch belong to the plan.
 */
import { AnalysisError } from "../../errors/app-error";
import { createWorkspace, type Pass, type Workspace } from "../kernel/kernel";

export interface ComplexFft {
  readonly size: number;
  /** [2 size] re, im interleaved: fill it before a transform, which uses it as scratch. */
  readonly data: Float64Array;
  /**
   * Forward transform sum z_n e^(-2 pi i n k / size) of the data, unscaled.
   * @returns [2 size] either data or the plan's other buffer: valid until data is filled again.
   */
  transform(): Float64Array;
}

interface Step {
  pass: Pass;
  twiddles: Float64Array;
  points: number;
  stride: number;
}

/** What a plan of this size takes of its workspace, at most: two buffers and the tables of its passes. */
export const toComplexDoubles = (size: number): number => 6 * size;

/**
 * @param size 2^a * {1, 3, 5, 9, 15}, at least 1.
 * @param workspace where the plan is to lie beside other things.
 * @throws AnalysisError "analysis.argument" for another size, "audio.too-large"
 */
export function planComplexFft(
  size: number,
  workspace: Workspace = createWorkspace(toComplexDoubles(size)),
): ComplexFft {
  const data = workspace.take(2 * size);
  const other = workspace.take(2 * size);
  const steps = planSteps(size, workspace);
  return {
    size,
    data,
    transform() {
      let from = data;
      let to = other;
      for (const { pass, twiddles, points, stride } of steps) {
        pass(from.byteOffset, to.byteOffset, twiddles.byteOffset, points, stride);
        [from, to] = [to, from];
      }
      return from;
    },
  };
}

function planSteps(size: number, { kernel, take }: Workspace): Step[] {
  const passes = [
    [4, kernel.radix4],
    [2, kernel.radix2],
    [5, kernel.radix5],
    [3, kernel.radix3],
  ] as const;
  const steps: Step[] = [];
  let points = size;
  for (let stride = 1; points > 1;) {
    const [radix, pass] = passes.find(([r]) => points % r === 0) ?? refuse(size);
    const twiddles = take((2 * points) / radix);
    fillStepTwiddles(twiddles, points, steps.at(-1));
    steps.push({ pass, twiddles, points, stride });
    points /= radix;
    stride *= radix;
  }
  return points === 1 ? steps : refuse(size);
}

function refuse(size: number): never {
  throw new AnalysisError("analysis.argument", `There is no FFT of ${size} points here.`);
}

/** The table of a pass: every few entries of the one before, where that reaches far enough. */
function fillStepTwiddles(table: Float64Array, points: number, before: Step | undefined): void {
  const every = before === undefined ? 0 : before.points / points;
  if (before === undefined || every * (table.length - 2) >= before.twiddles.length) {
    fillTwiddles(table, points);
    return;
  }
  for (let p = 0; p < table.length; p += 2) {
    table[p] = before.twiddles[p * every]!;
    table[p + 1] = before.twiddles[p * every + 1]!;
  }
}

/** @param table [2 count] receives e^(-2 pi i p / points). */
export function fillTwiddles(table: Float64Array, points: number): void {
  for (let p = 0; p < table.length; p += 2) {
    const angle = (-Math.PI * p) / points;
    table[p] = Math.cos(angle);
    table[p + 1] = Math.sin(angle);
  }
}
