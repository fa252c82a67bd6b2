/** A short series of an invented loudspeaker, recorded in code, for the tests of web and worker. */
import { planSchema, type PlanInput } from "../../lib/series/plan-schema";
import { DEMO_LABS, type DemoSeries } from "../../scripts/demo/demo-labs";
import { recordSeries } from "../../scripts/demo/record-series";

/** Two levels and sweeps of 2 s: everything that an analysis needs, quickly made. */
const SHORT_PLAN: PlanInput = {
  levels: [{ level_dB: 76 }, { level_dB: 86 }],
  sweep: { length_s: 2, lead_in_s: 0.5, lead_out_s: 0.5 },
  calibration: { by: "calibrator" },
};

export interface TestFile {
  slot: string;
  name: string;
  bytes: Uint8Array<ArrayBuffer>;
}

export interface TestSeries {
  loudspeaker: DemoSeries["loudspeaker"];
  plan: PlanInput;
  files: TestFile[];
}

let made: TestSeries | undefined;

/** Recorded once per process. */
export function getTestSeries(): TestSeries {
  if (made === undefined) {
    const model = DEMO_LABS[0]?.series.find((series) => series.key === "brackenMini");
    if (model === undefined) throw new Error("the demo labs have no Bracken Mini any more");
    const series = {
      ...model,
      plan: planSchema.parse(SHORT_PLAN),
      recorded: "all" as const,
      mishaps: {},
    };
    const files = recordSeries(series).map(({ run, makeWav }) => ({
      slot: run.slot,
      name: run.fileName,
      bytes: makeWav(),
    }));
    made = { loudspeaker: model.loudspeaker, plan: SHORT_PLAN, files };
  }
  return made;
}
