/** An invented publication of the sample result, with an estimate for music; nothing in it was measured. */
import type { Snapshot } from "../../lib/publication/snapshot-schema";
import { toSnapshot, type SnapshotFacts } from "../../lib/publication/to-snapshot";
import { planSchema } from "../../lib/series/plan-schema";
import { makeSampleResult } from "./sample-result";

const CRITERION = { compression_dB: 3 };

/** Everything confirmed, but for the cause at 50 Hz, which a person changed. */
export function makeSampleFacts(): SnapshotFacts {
  const result = makeSampleResult();
  result.programme = [
    {
      spectrum: "pink",
      crest_dB: 12,
      criterion: CRITERION,
      spl_dB: 94.2,
      spl_dBA: 91.4,
      bound_by: "peak",
      first_band_Hz: 50,
      at_least: true,
      from_Hz: 50,
      to_Hz: 16_000,
    },
  ];
  return {
    lab: { slug: "reedholm", name: "Reedholm Test Lab" },
    series: { number: "S-0231", slug: "osier-8a" },
    loudspeaker: {
      maker: "Withy Lane",
      model: "Osier 8A",
      serial: "0417",
      kind: "active, two-way",
      largest_dimension_m: 0.4,
      tuning_Hz: 42,
      photo_digest: null,
    },
    plan: planSchema.parse({}),
    firstRecordingAt: new Date("2026-05-11T09:00:00.000Z"),
    analysis: { version: 3, engineVersion: "1.0.0" },
    result,
    signOff: {
      criterion: CRITERION,
      decisions: result.bands.map((band) => {
        const changed = band.nominal_Hz === 50;
        return {
          nominal_Hz: band.nominal_Hz,
          cause: changed ? "port" : band.cause,
          computed_cause: band.cause,
          reason: changed ? "seen with the port blocked" : null,
          by: "Tomas Reith",
          at: "2026-05-12T10:00:00.000Z",
        };
      }),
      decisionsDigest: "d".repeat(64),
      resultDigest: "e".repeat(64),
      onePerson: false,
      by: "Tomas Reith",
      at: new Date("2026-05-12T10:00:00.000Z"),
    },
    revision: 1,
    publishedAt: new Date("2026-05-14T08:00:00.000Z"),
    publishedBy: "Nadia Okell",
    changeNote: null,
    words: {
      words: "",
      supplied_by: "lent by the maker",
      maker_statement: null,
      answer_to_maker: null,
      evidence_public: false,
    },
  };
}

export const makeSampleSnapshot = (change: Partial<Snapshot> = {}): Snapshot => ({
  ...toSnapshot(makeSampleFacts()),
  ...change,
});
