import { describe, expect, it } from "vitest";
import type { Detection } from "./detect";
import { isEdgeOfWay } from "./edge-of-way";

const toDetections = (losses: readonly (number | null)[]): (Detection | null)[] =>
  losses.map((loss) =>
    loss === null
      ? null
      : {
          gainDb: 0,
          gainSigmaDb: 0.01,
          lossDb: Float64Array.from([0, loss]),
          lossSigmaDb: Float64Array.from([0.01, 0.01]),
          firstActive: 1,
          top: 1,
        },
  );
const edgesOf = (losses: readonly (number | null)[]) => {
  const detections = toDetections(losses);
  return losses.map((_, b) => isEdgeOfWay(detections, b));
};

describe("the edge of a limited way", () => {
  it.each([
    ["falls from band to band", [6.8, 5.2, 3, 0.8, 0], [true, true, true, false, false]],
    ["falls towards the bass as well", [0, 0.8, 3, 5.2, 6.8], [false, false, true, true, true]],
    ["is none where all bands are limited alike", [6, 6.3, 5.8, 6.1, 6], Array(5).fill(false)],
    ["is none in one odd band", [6, 6, 3, 6, 6], Array(5).fill(false)],
    ["is not seen across a band without a value", [6, null, 3, 0, 0], Array(5).fill(false)],
  ])("%s", (_, losses, edges) => {
    expect(edgesOf(losses)).toEqual(edges);
  });
});
