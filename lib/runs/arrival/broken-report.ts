import { AppError } from "../../errors/app-error";
import type { ArrivalReport } from "../arrival-schema";
import { plainCheck } from "./check";

/** Where the checks themselves could not be carried out: the take is not at fault, and is safe. */
export function toBrokenReport(error: unknown, engineVersion: string): ArrivalReport {
  const known = error instanceof AppError && error.code !== "internal" ? error.message : null;
  return {
    engine_version: engineVersion,
    format: "",
    rate_Hz: 0,
    channels: 0,
    channel: 1,
    bits: 0,
    length_s: 0,
    peak_dBFS: null,
    rms_dBFS: null,
    measured_level_dB: null,
    snr_dB: null,
    latency_s: null,
    drift_ppm: null,
    envelope: { from_s: 0, to_s: 0, low: [], high: [], from_Hz: null, to_Hz: null },
    checks: [
      {
        ...plainCheck,
        code: "readable",
        verdict: "fail",
        title: "could not be checked",
        finding:
          known ?? "The checks stopped because of a fault on our side, not of the recording.",
        spoils: "Whether the take is good is not known.",
        remedy:
          "Have it checked again. If that fails too, tell the admin of your lab; the file is safe.",
      },
    ],
  };
}
