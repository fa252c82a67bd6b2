import { describe, expect, it } from "vitest";
import { detectLoss } from "./detect";
import { readNoLaw } from "./no-law";

const DRIVES = [76, 86, 96, 102];
const read = (losses: readonly number[], sigmaDb = 0.01, isEdge = false) => {
  const gains = {
    gainDb: Float64Array.from(losses, (loss) => -loss),
    sigmaDb: new Float64Array(losses.length).fill(sigmaDb),
    stepSigmaDb: new Float64Array(losses.length).fill(0.02),
  };
  const detection = detectLoss(gains);
  if (detection === null) throw new Error("nothing was detected");
  return readNoLaw(detection, gains, DRIVES, isEdge);
};

describe("losses that no law follows", () => {
  it("are slow control where the loss shrinks with more drive", () => {
    const { control, reason } = read([0, 2, 0.4, 3]);
    expect(control).toBe("slow control");
    expect(reason).toContain("the loss shrinks by 1.6 dB from the 86 dB to the 96 dB run");
  });

  it("are slow control where more drive gives less output", () => {
    const { control, reason } = read([0, 0, 1, 9]);
    expect(control).toBe("slow control");
    expect(reason).toContain("the output falls by 2.0 dB from the 96 dB to the 102 dB run");
  });

  it("are none of time where two paths may work against each other", () => {
    expect(read([0, 2, 0.4, 3], 0.01, true).control).toBe("several controls");
  });

  it.each([
    ["a boost that is withdrawn, then a limiter", [0, 3, 3.2, 8]],
    ["within what noise allows", [0, 2, 1.6, 3]],
  ])("may be two static controls: %s", (name, losses) => {
    const sigmaDb = name.startsWith("within") ? 0.2 : 0.01;
    expect(read(losses, sigmaDb)).toMatchObject({
      control: "several controls",
      reason: expect.stringContaining(
        "two gain controls or two paths add up in this band",
      ) as string,
    });
  });
});
