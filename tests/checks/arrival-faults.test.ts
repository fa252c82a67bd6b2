/**
 * Arrival checks against faults of known size, put into recordings of an invented loudspeaker: a good
 * take passes everything, and each fault is found without another one being claimed.
 */
import { beforeAll, describe, expect, it } from "vitest";
import { synthesiseStimulus } from "../../lib/analysis/sweep";
import type { ArrivalSibling } from "../../lib/runs/arrival/arrival-request";
import type { CheckCode } from "../../lib/runs/arrival-schema";
import { record, upsample } from "../../scripts/demo/resample";
import {
  RATE_HZ,
  at,
  before,
  bump,
  check,
  cut,
  overdrive,
  passes,
  recordGoodSeries,
  reports,
  rideGain,
  square,
  take,
  times,
  tone,
  withNoise,
} from "../support/arrival-takes";

beforeAll(recordGoodSeries, 120_000);

interface Fault {
  name: string;
  slot: string;
  make: () => Float64Array[];
  rateHz?: number;
  siblings?: () => ArrivalSibling[];
  fails: CheckCode[];
  warns?: CheckCode[];
  finding: RegExp;
}

const FAULTS: Fault[] = [
  {
    name: "a clipped input",
    slot: "short-86",
    make: () => [overdrive("short-86", 1.3)],
    fails: ["clipping"],
    finding: /clipped on [\d ]+ samples, between .*Hz of the sweep/,
  },
  {
    name: "a bump that clips the input",
    slot: "short-86",
    make: () => [bump("short-86", 400)],
    fails: ["clipping"],
    finding: /clipped on \d+ samples, between 400 Hz and/,
  },
  {
    name: "DC",
    slot: "short-86",
    make: () => [take("short-86").map((x) => x + 0.02)],
    fails: ["dc-offset"],
    finding: /−34\.0 dBFS/,
  },
  {
    name: "another rate",
    slot: "short-86",
    make: () => [take("short-86")],
    rateHz: 44_100,
    fails: ["rate"],
    finding: /44\.1 kHz/,
  },
  {
    name: "a recorder stopped early",
    slot: "short-86",
    make: () => [take("short-86").subarray(0, at(passes("short-86", 3800)))],
    fails: ["sweep-complete"],
    finding: /the sweep ends at 3\.8 kHz/,
  },
  {
    name: "a recorder started late",
    slot: "short-86",
    make: () => [take("short-86").subarray(at(passes("short-86", 100)))],
    fails: ["sweep-complete"],
    finding: /starts 0\.97 s into the sweep, at 100 Hz/,
  },
  {
    name: "room noise in place of a run",
    slot: "short-86",
    make: () => [times("ambient", 20)],
    fails: ["sweep-present"],
    finding: /was not found/,
  },
  {
    name: "a longer sweep",
    slot: "short-86",
    make: () => [
      synthesiseStimulus({
        startHz: 20,
        stopHz: 20_000,
        lengthS: 4.4,
        rateHz: RATE_HZ,
        leadInS: 1,
        leadOutS: 1,
        gainDb: -20,
      }),
    ],
    fails: ["sweep-identity"],
    finding: /not the planned one/,
  },
  {
    // A sweep of 0.45 % another rate constant, as where its end was planned otherwise.
    name: "a sweep that is nearly the planned one",
    slot: "short-76",
    make: () => [
      record(upsample(take("short-76"), 4), 4, {
        length: take("short-76").length,
        delay: 0,
        driftPpm: 4500,
      }),
    ],
    fails: ["sweep-identity"],
    finding: /runs 0\.4\d % too slow/,
  },
  {
    name: "digital silence",
    slot: "short-86",
    make: () => [new Float64Array(5 * RATE_HZ)],
    fails: ["silence"],
    finding: /digital silence/,
  },
  {
    name: "the microphone on the other channel",
    slot: "short-86",
    make: () => [
      take("ambient").slice(0, take("short-86").length),
      take("short-86").slice(0, take("ambient").length),
    ],
    fails: ["channel"],
    finding: /channel 2 of 2 does/,
  },
  {
    name: "a dropped buffer in the first take of all",
    slot: "short-76",
    make: () => [cut("short-76", at(passes("short-76", 1200)), 256)],
    fails: ["dropped-samples"],
    finding: /About 25\d samples \(5\.\d ms\) were dropped/,
  },
  {
    name: "a few dropped samples, told by the sibling",
    slot: "short-86",
    make: () => [cut("short-86", at(passes("short-86", 3000)), 12)],
    fails: ["dropped-samples"],
    finding: /About 1\d samples \(0\.\d ms\) were dropped/,
  },
  {
    name: "an inserted buffer",
    slot: "short-86",
    make: () => [cut("short-86", at(passes("short-86", 400)), 0, 512)],
    fails: ["dropped-samples"],
    finding: /About (49|50|51|52)\d samples .* too many/,
  },
  {
    name: "a long gap in the mid band",
    slot: "short-86",
    make: () => [cut("short-86", at(passes("short-86", 1000)), 4800)],
    fails: ["dropped-samples"],
    finding: /About 4 \d\d\d samples/,
  },
  {
    name: "a volume turned up",
    slot: "short-86",
    make: () => [times("short-86", 0.8)],
    fails: ["level-step"],
    finding: /measures 10\.80 dB; 10\.00 dB was planned/,
  },
  {
    name: "a volume touched",
    slot: "short-86",
    make: () => [times("short-86", 0.3)],
    fails: [],
    warns: ["level-step"],
    finding: /measures 10\.30 dB/,
  },
  {
    name: "an input gain turned down where the bass is limited",
    slot: "short-96",
    make: () => [times("short-96", -0.8)],
    fails: ["level-step"],
    finding: /measures 9\.20 dB/,
  },
  {
    name: "a lowest level off the plan",
    slot: "short-76",
    make: () => [times("short-76", -3.5)],
    fails: ["level-plan"],
    finding: /72\.5 dB at 1 m; 76 dB was planned/,
  },
  {
    name: "a loud run far over its plan",
    slot: "short-86",
    make: () => [times("short-86", 3.6)],
    fails: ["level-plan", "level-step"],
    finding: /89\.6 dB at 1 m/,
  },
  {
    name: "a noisy room",
    slot: "short-76",
    make: () => [withNoise("short-76", 0.01)],
    fails: ["signal-to-noise"],
    finding: /20 dB are needed/,
  },
  {
    name: "distortion at the lowest level",
    slot: "short-76",
    make: () => [square("short-76", 0.16)],
    fails: ["distortion-lowest"],
    finding: /THD is 1\d %/,
  },
  {
    name: "clocks apart",
    slot: "short-86",
    make: () => [
      record(upsample(take("short-86"), 4), 4, {
        length: take("short-86").length,
        delay: 0,
        driftPpm: 400,
      }),
    ],
    fails: ["clock-drift"],
    finding: /differ by −?(3[5-9]|4[0-4])\d ppm/,
  },
  {
    name: "a closing run that is off",
    slot: "closing-76",
    make: () => [times("closing-76", -0.3)],
    fails: ["closing-repeat"],
    finding: /0\.30 dB quieter/,
  },
  {
    name: "a calibrator at another frequency",
    slot: "calibrator-before",
    make: () => [tone(250, () => 0.1)],
    fails: ["calibrator-tone"],
    finding: /the tone is at 250 Hz/,
  },
  {
    name: "a calibrator that wanders",
    slot: "calibrator-before",
    make: () => [tone(1000, (s) => 0.1 * 10 ** (Math.sin(s) / 20))],
    fails: ["calibrator-tone"],
    finding: /wanders by 1\.\d+ dB/,
  },
  {
    name: "a calibrator that reads otherwise afterwards",
    slot: "calibrator-after",
    make: () => [times("calibrator-after", -0.7)],
    fails: ["calibrator-agreement"],
    finding: /0\.73 dB lower/,
  },
  {
    name: "hum",
    slot: "short-76",
    make: () => [
      take("short-76").map((x, n) =>
        [50, 100, 150].reduce(
          (sum, hz) => sum + 2e-4 * Math.sin((2 * Math.PI * hz * n) / RATE_HZ),
          x,
        ),
      ),
    ],
    fails: [],
    warns: ["hum"],
    finding: /50 Hz/,
  },
  {
    name: "automatic gain",
    slot: "short-76",
    make: () => [rideGain("short-76")],
    // No calibrator: its level is not the plan's, either.
    siblings: () => [],
    fails: [],
    warns: ["automatic-gain"],
    finding: /set its own gain/,
  },
  {
    name: "the other polarity",
    slot: "short-86",
    make: () => [take("short-86").map((x) => -x)],
    fails: [],
    warns: ["polarity"],
    finding: /opposite to that of the 76 dB run/,
  },
  {
    name: "more than 30 % THD",
    slot: "short-86",
    make: () => [square("short-86", 0.45)],
    fails: [],
    warns: ["stop-rule"],
    finding: /THD reaches/,
  },
];

describe("arrival checks", () => {
  it("pass every take of a good series, with its level", () => {
    const speaking = reports.flatMap(({ place, report }) =>
      (report?.checks ?? [])
        .filter(({ verdict }) => verdict !== "pass")
        .map(({ code, finding }) => `${place?.slot}: ${code}: ${finding}`),
    );
    expect(speaking).toEqual([]);
    for (const { place, report } of reports) {
      const levelDb = place?.levelDb ?? (place?.role === "ambient" ? 36 : 94);
      expect(Math.abs((report?.measured_level_dB ?? 0) - levelDb)).toBeLessThan(0.6);
    }
  });

  it.each(FAULTS)("find $name, and nothing else", async (fault) => {
    const report = await check(fault.slot, fault.make(), {
      siblings: fault.siblings?.() ?? before(fault.slot),
      ...(fault.rateHz === undefined ? {} : { rateHz: fault.rateHz }),
    });
    const codes = (verdict: string) =>
      report.checks
        .filter((one) => one.verdict === verdict)
        .map(({ code }) => code)
        .sort();
    expect({ fails: codes("fail"), warns: codes("warn") }).toEqual({
      fails: [...fault.fails].sort(),
      warns: fault.warns ?? [],
    });
    const spoken = report.checks.filter(({ verdict }) => verdict !== "pass");
    expect(spoken.map(({ finding }) => finding).join(" ")).toMatch(fault.finding);
    expect(spoken.every(({ spoils, remedy }) => spoils !== "" && remedy !== "")).toBe(true);
  });

  it("mark the place of a gap and of a stop", async () => {
    const gap = await check("short-86", [cut("short-86", at(passes("short-86", 1200)), 256)], {
      siblings: before("short-86"),
    });
    const where = gap.checks.find(({ code }) => code === "dropped-samples")?.where;
    expect(where?.from_Hz).toBeGreaterThan(900);
    expect(where?.to_Hz).toBeLessThan(1600);
    expect(where?.from_s).toBeLessThanOrEqual(passes("short-86", 1200) + 0.1);
    expect(where?.to_s).toBeGreaterThanOrEqual(passes("short-86", 1200) - 0.1);
    const stop = await check(
      "short-86",
      [take("short-86").subarray(0, at(passes("short-86", 3800)))],
      { siblings: before("short-86") },
    );
    const complete = stop.checks.find(({ code }) => code === "sweep-complete");
    expect(complete?.bands_Hz).toEqual([4000, 5000, 6300, 8000, 10_000, 12_500, 16_000]);
    expect(complete?.where?.from_Hz).toBeCloseTo(3800, -1);
    expect(complete?.where?.to_Hz).toBe(20_000);
  });
});
