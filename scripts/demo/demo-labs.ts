/**
 * What stands in the demo labs: people, loudspeakers, plans, and how far each series has come.
 * Every name is invented; the recordings are made by record-series.ts.
 */
import type { LoudspeakerInput } from "../../lib/api/loudspeakers";
import type { Role } from "../../lib/roles/roles";
import { planSchema, type Plan, type PlanInput } from "../../lib/series/plan-schema";
import { toFileStem } from "../../lib/series/planned-runs";
import { LOUDSPEAKERS, type LoudspeakerKey } from "./loudspeakers";

export interface DemoMember {
  name: string;
  email: string;
  roles: Role[];
}

/** A take that went wrong while recording; the tester keeps it where a reason is given. */
export type Mishap =
  | { kind: "bump"; atS: number; keptBecause: null }
  | { kind: "stops-early"; lengthS: number; keptBecause: string }
  | { kind: "silence"; keptBecause: string };

/** What the reviewer says when a series is published. */
export interface Published {
  suppliedBy: string;
  words: string;
  makerStatement?: { name: string; words: string };
}

export interface DemoSeries {
  /** One word, of this series alone. */
  name: string;
  key: LoudspeakerKey;
  loudspeaker: LoudspeakerInput;
  plan: Plan;
  /** Of the recording interface: SPL of a sine that just reaches full scale. */
  fullScaleDb: number;
  /** How much of the plan is recorded so far; `upTo` names the last slot. */
  recorded: "all" | "none" | { upTo: string };
  /** By slot. */
  mishaps: Record<string, Mishap>;
  /** Decided, signed off and published; null: it waits in review, or is not there yet. */
  published: Published | null;
}

export interface DemoLab {
  slug: string;
  name: string;
  timeZone: string;
  members: DemoMember[];
  series: DemoSeries[];
}

const levels = (of: number[], longTerm: number[] = []): PlanInput["levels"] =>
  of.map((level_dB) => ({ level_dB, long_term: longTerm.includes(level_dB) }));

/** As the invented certificates of both labs' calibrators and microphones say; k = 2. */
const CERTIFIED: PlanInput["uncertainty"] = {
  calibrator_dB: 0.2,
  microphone_dB: 1,
  distance_m: 0.01,
};

const compose = (
  key: LoudspeakerKey,
  loudspeaker: Omit<LoudspeakerInput, "serial" | "tuning_Hz"> & Partial<LoudspeakerInput>,
  plan: PlanInput,
  rest: Partial<
    Pick<DemoSeries, "name" | "fullScaleDb" | "recorded" | "mishaps" | "published">
  > = {},
): DemoSeries => ({
  name: toFileStem(loudspeaker.model),
  key,
  loudspeaker: { serial: "", tuning_Hz: null, ...loudspeaker },
  plan: planSchema.parse({
    place: { environment: "anechoic", temperature_C: 21 },
    uncertainty: CERTIFIED,
    ...plan,
  }),
  fullScaleDb: 116,
  recorded: "all",
  mishaps: {},
  published: null,
  ...rest,
});

/** Planned, and nothing recorded: its recordings are for whoever tries the upload. */
export const TO_BE_RECORDED = "brackenmini-second";

const MAINS = { power: "mains, 230 V", eq: "off" };
const BENCH_AMPLIFIER = { amplifier: "bench amplifier, 26 dB", voltage: "2.83 V at 86 dB" };

export const DEMO_LABS: readonly DemoLab[] = [
  {
    slug: "saltmarsh",
    name: "Saltmarsh Acoustics",
    timeZone: "Europe/London",
    members: [
      { name: "Ines Varley", email: "ines@saltmarsh.example", roles: ["tester"] },
      { name: "Tomas Reith", email: "tomas@saltmarsh.example", roles: ["analyst"] },
      { name: "Mina Oduya", email: "mina@saltmarsh.example", roles: ["tester", "analyst"] },
      { name: "Rue Calder", email: "rue@saltmarsh.example", roles: ["reviewer"] },
      { name: "Ada Lindqvist", email: "ada@saltmarsh.example", roles: ["admin"] },
    ],
    series: [
      compose(
        "osier8a",
        {
          maker: "Withy Lane",
          model: "Osier 8A",
          serial: "0231",
          kind: "active, two-way",
          largest_dimension_m: 0.38,
        },
        {
          state: {
            ...MAINS,
            firmware: "2.1.4",
            preset: "flat",
            input: "balanced",
            volume: "0 dB, full",
          },
          levels: levels([76, 86, 96, 102]),
        },
      ),
      compose(
        "brackenMini",
        {
          maker: "Stonecrop Works",
          model: "Bracken Mini",
          serial: "A-17",
          kind: "passive, two-way",
          largest_dimension_m: 0.24,
        },
        { state: BENCH_AMPLIFIER, sweep: { length_s: 5.5 }, levels: levels([76, 86, 96, 102]) },
        {
          published: {
            suppliedBy: "bought by the lab",
            words:
              "For a shelf. The small woofer runs out of excursion in the bass; the bands above it stayed within the limit.",
          },
        },
      ),
      compose(
        "harbourTwo",
        {
          maker: "Gannet Yard",
          model: "Harbour Two",
          serial: "H2-0044",
          kind: "passive, three-way",
          largest_dimension_m: 0.33,
        },
        { state: BENCH_AMPLIFIER, sweep: { length_s: 5.5 }, levels: levels([76, 86, 96, 102]) },
        {
          published: {
            suppliedBy: "lent by the maker",
            words:
              "No band gave out up to the 102 dB run. How loud it plays beyond that, this test does not say.",
          },
        },
      ),
      compose(
        "loom6",
        {
          maker: "Sedge & Daughters",
          model: "Loom 6",
          serial: "118",
          kind: "passive, two-way",
          largest_dimension_m: 0.33,
        },
        { state: BENCH_AMPLIFIER, levels: levels([76, 86, 96, 102], [96, 102]) },
      ),
      compose(
        "fennel5",
        {
          maker: "Stonecrop Works",
          model: "Fennel 5",
          serial: "F-203",
          kind: "passive, two-way",
          largest_dimension_m: 0.3,
          tuning_Hz: 52,
        },
        { state: BENCH_AMPLIFIER, sweep: { length_s: 5.5 }, levels: levels([76, 86, 96, 102]) },
        {
          published: {
            suppliedBy: "bought by the lab",
            words:
              "The port gives way around its tuning. Where it does, the figures hold for this unit with the port as it was delivered.",
            makerStatement: {
              name: "Stonecrop Works",
              words:
                "Fennel 5 is meant to be used with a high-pass filter at 80 Hz. We thank the lab for measuring it without one, too.",
            },
          },
        },
      ),
      compose(
        "samphire3",
        {
          maker: "Plover & Rook",
          model: "Samphire 3",
          serial: "S3-9",
          kind: "active, battery",
          largest_dimension_m: 0.18,
        },
        {
          state: { power: "battery, full", volume: "80 %", eq: "off" },
          levels: levels([68, 74, 80, 84]),
        },
        {
          fullScaleDb: 110,
          published: {
            suppliedBy: "bought by the lab",
            words:
              "A battery loudspeaker for the table. Its electronics turn the bass down from the quietest run on, so the losses there are lower bounds.",
          },
        },
      ),
      compose(
        "osier5a",
        {
          maker: "Withy Lane",
          model: "Osier 5A",
          serial: "0112",
          kind: "active, two-way",
          largest_dimension_m: 0.31,
        },
        {
          state: {
            ...MAINS,
            firmware: "2.1.4",
            preset: "flat",
            input: "balanced",
            volume: "0 dB, full",
          },
          levels: levels([76, 81, 86, 91, 96, 102], [102]),
        },
        {
          recorded: { upTo: "short-91" },
          mishaps: {
            "short-86": {
              kind: "stops-early",
              lengthS: 9.4,
              keptBecause: "The woofer is what 86 dB is for; treble is covered by 81 and 91.",
            },
            "short-91": { kind: "bump", atS: 3.05, keptBecause: null },
          },
        },
      ),
      compose(
        "brackenMini",
        {
          maker: "Stonecrop Works",
          model: "Bracken Mini",
          serial: "A-18",
          kind: "passive, two-way",
          largest_dimension_m: 0.24,
        },
        { state: BENCH_AMPLIFIER, sweep: { length_s: 5.5 }, levels: levels([76, 86, 96, 102]) },
        { name: TO_BE_RECORDED, recorded: "none" },
      ),
    ],
  },
  {
    slug: "northpier",
    name: "North Pier Stage Test",
    timeZone: "Europe/Stockholm",
    members: [
      { name: "Orla Finch", email: "orla@northpier.example", roles: ["tester", "analyst"] },
      {
        name: "Pavel Strand",
        email: "pavel@northpier.example",
        roles: ["analyst", "reviewer", "admin"],
      },
    ],
    series: [
      compose(
        "ketch12",
        {
          maker: "Gannet Yard",
          model: "Ketch 12",
          serial: "K-301",
          kind: "active, stage",
          largest_dimension_m: 0.6,
        },
        {
          state: { ...MAINS, preset: "front of house" },
          sweep: { length_s: 5.5 },
          levels: levels([90, 100, 108, 112]),
          calibration: { level_dB: 114 },
          place: { environment: "anechoic", temperature_C: 19, distance_m: 2, tester: "next-room" },
        },
        {
          fullScaleDb: 128,
          published: {
            suppliedBy: "lent by a hire company",
            words:
              "For stages. At 1 m these levels can injure within minutes; the microphone stood 2 m away and nobody in the room.",
          },
        },
      ),
      compose(
        "ketch12",
        {
          maker: "Gannet Yard",
          model: "Ketch 12",
          serial: "K-302",
          kind: "active, stage",
          largest_dimension_m: 0.6,
        },
        {
          state: { ...MAINS, preset: "front of house" },
          sweep: { length_s: 5.5 },
          levels: levels([88, 98]),
          calibration: { level_dB: 114, by: "calibrator" },
          ambient: false,
          closing: false,
          place: { environment: "anechoic", temperature_C: 19, distance_m: 2, tester: "next-room" },
        },
        {
          name: "ketch12-second",
          fullScaleDb: 128,
          mishaps: {
            "calibrator-before": {
              kind: "silence",
              keptBecause: "The calibrator's battery was flat; the gain is as for K-301.",
            },
          },
        },
      ),
    ],
  },
];

export const toVirtualLoudspeaker = (series: DemoSeries) => LOUDSPEAKERS[series.key];
