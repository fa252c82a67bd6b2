/**
 * What is known of a recording seconds after it arrived: its figures, and the verdict of each check.
 * Words are the tester's; every failed check says what is wrong, what it spoils and the remedy.
 */
import { z } from "zod";

const value = z.number().nullable();

export const CHECK_CODES = [
  "readable",
  "rate",
  "channel",
  "clipping",
  "dc-offset",
  "silence",
  "sweep-present",
  "sweep-identity",
  "sweep-complete",
  "dropped-samples",
  "level-step",
  "level-plan",
  "signal-to-noise",
  "distortion-lowest",
  "duplicate",
  "clock-drift",
  "closing-repeat",
  "calibrator-tone",
  "calibrator-agreement",
  "hum",
  "automatic-gain",
  "polarity",
  "stop-rule",
] as const;
export type CheckCode = (typeof CHECK_CODES)[number];

export const arrivalCheckSchema = z.object({
  code: z.enum(CHECK_CODES),
  verdict: z.enum(["pass", "warn", "fail"]),
  /** One short phrase for the verdict column: "clipped input". */
  title: z.string(),
  /** Full sentence with the figure: "The microphone input clipped on 1 214 samples, between 57 and 72 Hz." */
  finding: z.string(),
  /** What it spoils; "" where nothing. */
  spoils: z.string(),
  /** What to do; keeps the calibration. "" where nothing is to be done. */
  remedy: z.string(),
  /** The figure held against its limit. */
  figure: z.object({ value: z.number(), limit: value, unit: z.string() }).nullable(),
  /** Where in the recording; frequencies of the sweep where it applies. */
  where: z
    .object({ from_s: z.number(), to_s: z.number(), from_Hz: value, to_Hz: value })
    .nullable(),
  bands_Hz: z.array(z.number()),
});
export type ArrivalCheck = z.infer<typeof arrivalCheckSchema>;

/** A sweep in figures, levels re a sine that just reaches full scale; third octaves of the plan's sweep. */
const sweepSummarySchema = z.object({
  /** [bands] null where the recording holds too little of it. */
  band_dBFS: z.array(value),
  /** [bands] standard uncertainty from noise. */
  sigma_dB: z.array(value),
  /** Mean square over the reference band. */
  level_dBFS: z.number(),
  /** [12] phase from the low to the high end of 500 Hz to 2 kHz, even in lg f, re the arrival. */
  phase_rad: z.array(z.number()),
  /** Noise from 2 to 8 kHz before the sweep; follows the input gain. null where there is too little. */
  hiss_dBFS: value,
  /** When parts of the sweep arrived after the mid band. */
  arrivals: z.array(z.object({ hz: z.number(), delay_ms: z.number() })),
});
export type SweepSummary = z.infer<typeof sweepSummarySchema>;

export const arrivalReportSchema = z.object({
  engine_version: z.string(),
  format: z.string(),
  rate_Hz: z.number(),
  channels: z.number().int(),
  channel: z.number().int(),
  bits: z.number().int(),
  length_s: z.number(),
  peak_dBFS: value,
  rms_dBFS: value,
  /** Mean-square SPL over the reference band at 1 m; calibrator: its level by the known sensitivity. */
  measured_level_dB: value,
  snr_dB: value,
  latency_s: value,
  drift_ppm: value,
  /** The picture of the recording: per column lowest and highest sample, and its time; a sweep adds the frequency. */
  envelope: z.object({
    from_s: z.number(),
    to_s: z.number(),
    low: z.array(z.number()),
    high: z.array(z.number()),
    /** Instantaneous frequency of the sweep at from_s and to_s, where one was found. */
    from_Hz: value,
    to_Hz: value,
  }),
  checks: z.array(arrivalCheckSchema),
  /** SPL of a sine that just reaches full scale, by which levels were told; null where not known yet. */
  full_scale_dB: value.optional(),
  /** What siblings are held against. Absent without a sweep. */
  sweep: sweepSummarySchema.optional(),
  /** The calibrator's tone. Absent without one. */
  tone: z
    .object({
      frequency_Hz: z.number(),
      /** Re a sine that just reaches full scale. */
      level_dBFS: z.number(),
    })
    .optional(),
});
export type ArrivalReport = z.infer<typeof arrivalReportSchema>;

export const RUN_STATES = [
  "checking",
  "passed",
  "warned",
  "failed",
  "kept",
  "excluded",
  "replaced",
] as const;
export type RunState = (typeof RUN_STATES)[number];

/** A run that may enter an analysis. */
export const USABLE_RUN_STATES: readonly RunState[] = ["passed", "warned", "kept"];
