/** What a lab may set for itself. */
import { z } from "zod";

export const THEMES = ["system", "light", "dark"] as const;
export type Theme = (typeof THEMES)[number];

export const EXPOSURE_RULES = ["niosh", "eu"] as const;

export const labSettingsSchema = z.strictObject({
  /** Who signs off has not uploaded any run of that analysis version. */
  two_person_rule: z.boolean().default(true),
  exposure_rule: z.enum(EXPOSURE_RULES).default("niosh"),
  /** Largest recording taken, MB; null: the limit of the installation. */
  max_upload_mb: z.number().int().min(1).max(4096).nullable().default(null),
  /** Days after which recordings of archived series may go; null: kept. */
  retention_days: z.number().int().min(30).max(36_500).nullable().default(null),
  arrival: z
    .strictObject({
      /** Measured level against the planned one: warn and fail beyond, dB; the same gives no warning. */
      level_warn_dB: z.number().min(0.1).max(12).default(3),
      level_fail_dB: z.number().min(0.2).max(12).default(3),
      /** Step to the neighbouring run against the planned one: warn and fail beyond, dB. */
      step_warn_dB: z.number().min(0.05).max(6).default(0.2),
      step_fail_dB: z.number().min(0.1).max(12).default(0.5),
      /** Signal over noise in the reference band, dB; single bands warn under the failure. */
      snr_warn_dB: z.number().min(0).max(80).default(20),
      snr_fail_dB: z.number().min(0).max(80).default(20),
    })
    .refine((a) => a.level_warn_dB <= a.level_fail_dB, {
      error: "The warning must come before the failure.",
      path: ["level_warn_dB"],
    })
    .refine((a) => a.step_warn_dB <= a.step_fail_dB, {
      error: "The warning must come before the failure.",
      path: ["step_warn_dB"],
    })
    .refine((a) => a.snr_warn_dB >= a.snr_fail_dB, {
      error: "The warning must come before the failure.",
      path: ["snr_warn_dB"],
    })
    .prefault({}),
});
export type LabSettings = z.infer<typeof labSettingsSchema>;
export type LabSettingsInput = z.input<typeof labSettingsSchema>;
