/** The compiled loops, and memory for one plan: numbers of a plan lie where its kernel can reach them. */
import { AnalysisError } from "../../errors/app-error";
import { KERNEL_BASE64 } from "./kernel-bytes";

/** Addresses are the byteOffset of arrays that Workspace.take gave; see kernel.as. */
export type Pass = (x: number, y: number, w: number, points: number, stride: number) => void;

export interface Kernel {
  radix2: Pass;
  radix3: Pass;
  radix4: Pass;
  radix5: Pass;
  power: (z: number, w: number, into: number, half: number) => void;
  filter: (
    z: number,
    w: number,
    transfer: number,
    into: number,
    half: number,
    share: number,
  ) => void;
  startSums: (sums: number, squares: number, count: number, first: number, second: number) => void;
  addLosses: (
    losses: number,
    sums: number,
    squares: number,
    count: number,
    weight: number,
    twiceGain: number,
  ) => void;
  closeSums: (
    sums: number,
    squares: number,
    places: number,
    row: number,
    count: number,
    weights: number,
  ) => number;
}

export interface Workspace {
  kernel: Kernel;
  /** @returns [doubles] zeros, a place of their own. */
  take: (doubles: number) => Float64Array;
}

const PAGE_BYTES = 2 ** 16;
const MOST_PAGES = 2 ** 16;
const BYTES_OF_DOUBLE = 8;

let compiled: WebAssembly.Module | null = null;

function compileKernel(): WebAssembly.Module {
  compiled ??= new WebAssembly.Module(
    Uint8Array.from(atob(KERNEL_BASE64), (letter) => letter.charCodeAt(0)),
  );
  return compiled;
}

/**
 * @param doubles how many may be taken in all, odd numbers counted as the even ones above them; what is never written to costs nothing.
 * @throws AnalysisError "audio.too-large" where they pass what a kernel can address.
 */
export function createWorkspace(doubles: number): Workspace {
  const pages = Math.max(1, Math.ceil((doubles * BYTES_OF_DOUBLE) / PAGE_BYTES));
  if (pages > MOST_PAGES) {
    throw new AnalysisError(
      "audio.too-large",
      `The sweep is too long to be transformed at once: it would take ${Math.ceil(pages / 2 ** 14)} GiB. Shorten it.`,
    );
  }
  const memory = new WebAssembly.Memory({ initial: pages, maximum: pages });
  const { exports } = new WebAssembly.Instance(compileKernel(), { env: { memory } });
  let taken = 0;
  return {
    // The module is ours: its exports are what kernel.as exports.
    kernel: exports as unknown as Kernel,
    take(count) {
      const view = new Float64Array(memory.buffer, taken * BYTES_OF_DOUBLE, count);
      taken += count + (count % 2);
      return view;
    },
  };
}
