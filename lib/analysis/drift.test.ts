import { describe, expect, it } from "vitest";
import { simulateRecording } from "../../tests/support/simulated-sweep";
import { Plans } from "./cell-power";
import { estimateDriftPpm } from "./drift";
import { toPlayedStimulus } from "./stimulus-in-use";
import { SweepFinder } from "./sweep-in-recording";

describe("estimateDriftPpm", () => {
  it.each([0, 20, -20, 200])("finds %d ppm behind a minimum-phase loudspeaker", (driftPpm) => {
    const stimulus = {
      startHz: 20,
      stopHz: 20_000,
      lengthS: 5.5,
      rateHz: 48_000,
      leadInS: 0.2,
      leadOutS: 0.2,
    };
    const played = toPlayedStimulus(
      {
        start_Hz: 20,
        stop_Hz: 20_000,
        length_s: 5.5,
        rate_Hz: 48_000,
        lead_in_s: 0.2,
        lead_out_s: 0.2,
      },
      undefined,
    );
    const recording = simulateRecording("run.wav", {
      stimulus,
      device: {
        amplitudes: () => [0.1],
        responseDb: (f) =>
          -10 * Math.log10(1 + (60 / f) ** 8) - 10 * Math.log10(1 + (f / 15_000) ** 4),
      },
      delay: 5000,
      after: 24_000,
      noiseRms: 1e-5,
      driftPpm,
    });
    const plans = new Plans();
    const { deconvolved, lag } = new SweepFinder(played, plans).find(recording);
    const estimate = estimateDriftPpm(deconvolved.response, lag, played.sweep, plans);
    // The cut at the end of the sweep is no minimum phase: a few microseconds of delay, some ppm.
    expect(Math.abs(estimate - driftPpm)).toBeLessThan(15);
  });
});
