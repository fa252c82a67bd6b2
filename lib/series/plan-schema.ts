/**
 * The plan of a series: what the tester enters before the first recording, and what follows from it.
 * Kept as one document with the series; the schema of the folder format is series-schema.ts.
 */
import { z } from "zod";
import {
  conditioningSchema,
  type Criterion,
  criterionSchema,
  DEFAULT_CRITERIA,
  relativeFileSchema,
} from "./series-schema";
import { ENVIRONMENTS } from "./vocabulary";

/** Pairs first: the screens open with THD 10 % or 3 dB, and only a computed pair has a headline. */
const USUAL_CRITERIA: readonly Criterion[] = [
  { thd_percent: 10, compression_dB: 3 },
  { thd_percent: 3, compression_dB: 1 },
  ...DEFAULT_CRITERIA,
];

const text = (max: number) => z.string().trim().max(max).default("");
const finite = z.number().finite();

export const TESTER_PLACES = ["in-room", "next-room", "outdoors-10m"] as const;
export const CALIBRATION_WAYS = ["calibrator", "calibrator-before-after", "sensitivity"] as const;

export const loudspeakerStateSchema = z.strictObject({
  firmware: text(80),
  preset: text(80),
  input: text(80),
  volume: text(80),
  eq: text(120),
  power: text(80),
  /** Passive loudspeakers: what drives them. */
  amplifier: text(120),
  voltage: text(80),
});

export const sweepPlanSchema = z
  .strictObject({
    start_Hz: finite.min(1).max(1000).default(20),
    stop_Hz: finite.min(1000).max(96_000).default(20_000),
    length_s: finite.min(1).max(60).default(11.05),
    rate_Hz: z
      .union([
        z.literal(44_100),
        z.literal(48_000),
        z.literal(88_200),
        z.literal(96_000),
        z.literal(176_400),
        z.literal(192_000),
      ])
      .default(48_000),
    lead_in_s: finite.min(0).max(10).default(1),
    lead_out_s: finite.min(0).max(10).default(0.8),
  })
  .refine((s) => s.stop_Hz <= s.rate_Hz / 2, {
    error: "The end frequency must not pass half the sample rate.",
    path: ["stop_Hz"],
  });

export const planSchema = z
  .strictObject({
    state: loudspeakerStateSchema.prefault({}),
    place: z
      .strictObject({
        environment: z.enum(ENVIRONMENTS).default("anechoic"),
        distance_m: finite
          .min(0.25, "Distance must be from 0.25 to 10 m.")
          .max(10, "Distance must be from 0.25 to 10 m.")
          .default(1),
        gate_ms: finite.min(1).max(1000).nullable().default(null),
        temperature_C: finite.min(-20).max(60).nullable().default(null),
        tester: z.enum(TESTER_PLACES).default("in-room"),
      })
      .prefault({}),
    calibration: z
      .strictObject({
        by: z.enum(CALIBRATION_WAYS).default("calibrator-before-after"),
        level_dB: finite.min(70).max(140).default(94),
        frequency_Hz: finite.min(100).max(4000).default(1000),
        /** With `sensitivity`: SPL of a sine that just reaches full scale. */
        full_scale_dB: finite.min(60).max(200).nullable().default(null),
      })
      .prefault({}),
    /** What is known of the uncertainty of an absolute level; absent in plans from before it was asked. */
    uncertainty: z
      .strictObject({
        calibrator_dB: finite.min(0).max(10).nullable().default(null),
        microphone_dB: finite.min(0).max(10).nullable().default(null),
        distance_m: finite.min(0).max(1).nullable().default(null),
      })
      .optional(),
    microphone: z
      .strictObject({
        file_name: z.string().max(200),
        digest: z.string().regex(/^[0-9a-f]{64}$/),
        kind: z.enum(["response", "correction"]),
      })
      .nullable()
      .default(null),
    levels: z
      .array(
        z.strictObject({
          level_dB: finite.min(40).max(130),
          long_term: z.boolean().default(false),
          repeats: z.number().int().min(0).max(9).default(0),
        }),
      )
      .min(2, "A series needs at least two levels.")
      .max(12, "A series has at most twelve levels.")
      .default([76, 86, 96, 102].map((level_dB) => ({ level_dB, long_term: false, repeats: 0 }))),
    variants: z
      .array(
        z.strictObject({
          text: z.string().trim().min(1).max(120),
          level_dB: finite.min(40).max(130),
        }),
      )
      .max(24)
      .default([]),
    ambient: z.boolean().default(true),
    closing: z.boolean().default(true),
    sweep: sweepPlanSchema.prefault({}),
    conditioning: conditioningSchema.prefault({
      minutes: 10,
      crest_dB: 12,
      rms_re_sweep_dB: -9,
      gap_s: 0.5,
    }),
    reference_band_Hz: z.tuple([finite.positive(), finite.positive()]).default([500, 2000]),
    criteria: z
      .array(criterionSchema)
      .min(1)
      .max(12)
      .default([...USUAL_CRITERIA]),
    /** Names of the recordings, in the order of the analysis, where they came as a folder. */
    files: z
      .array(z.strictObject({ slot: z.string().max(60), file: relativeFileSchema }))
      .max(250)
      .optional(),
  })
  .refine((p) => new Set(p.levels.map((l) => l.level_dB)).size === p.levels.length, {
    error: "Two levels are the same. Plan a repeat instead.",
    path: ["levels"],
  })
  .refine((p) => p.calibration.by !== "sensitivity" || p.calibration.full_scale_dB !== null, {
    error: "Enter the level of digital full scale.",
    path: ["calibration", "full_scale_dB"],
  })
  .refine((p) => p.place.environment !== "gated" || p.place.gate_ms !== null, {
    error: "Enter the gate.",
    path: ["place", "gate_ms"],
  })
  .refine((p) => p.variants.every((v) => p.levels.some((l) => l.level_dB === v.level_dB)), {
    error: "A variant run needs a plain run at the same level.",
    path: ["variants"],
  });
export type Plan = z.infer<typeof planSchema>;
export type PlanInput = z.input<typeof planSchema>;
