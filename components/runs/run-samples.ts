/** Recordings for the tests of this folder. */
import type { RunView } from "@/lib/api/runs";
import type { ArrivalCheck, ArrivalReport } from "@/lib/runs/arrival-schema";
import type { UploadItem } from "./upload-item";

let count = 0;
const nextId = (): string => {
  count += 1;
  return `00000000-0000-4000-8000-${String(count).padStart(12, "0")}`;
};

export function makeCheck(change: Partial<ArrivalCheck> = {}): ArrivalCheck {
  return {
    code: "clipping",
    verdict: "fail",
    title: "clipped input",
    finding: "The microphone input clipped on 1 214 samples, between 57 and 72 Hz.",
    spoils: "Harmonics of 57 to 72 Hz would be the recorder’s, not the loudspeaker’s.",
    remedy: "Record 91 dB again at the same gain.",
    figure: { value: 1214, limit: null, unit: "samples" },
    where: { from_s: 2.7, to_s: 3.1, from_Hz: 57, to_Hz: 72 },
    bands_Hz: [63],
    ...change,
  };
}

export function makeReport(change: Partial<ArrivalReport> = {}): ArrivalReport {
  return {
    engine_version: "1.0.0",
    format: "WAV, 24-bit PCM",
    rate_Hz: 48_000,
    channels: 1,
    channel: 1,
    bits: 24,
    length_s: 12.85,
    peak_dBFS: -21.2,
    rms_dBFS: -30,
    measured_level_dB: 86.1,
    snr_dB: 48,
    latency_s: 0.31,
    drift_ppm: 3,
    envelope: {
      from_s: 0,
      to_s: 12.85,
      low: [-0.05, -0.09, -0.1, -0.08],
      high: [0.05, 0.09, 0.1, 0.08],
      from_Hz: 20,
      to_Hz: 20_000,
    },
    checks: [],
    ...change,
  };
}

export function makeRun(change: Partial<RunView> = {}): RunView {
  return {
    id: nextId(),
    slot: "short-86",
    take: 1,
    role: "short-term",
    level_dB: 86,
    file_name: "osier5a_86_short.wav",
    digest: "0".repeat(64),
    bytes: 1_900_000,
    removed_at: null,
    channel: 1,
    state: "passed",
    report: makeReport(),
    reason: null,
    reason_by: null,
    uploaded_by: { id: nextId(), name: "Ines Varley" },
    uploaded_at: "2026-05-12T09:40:00.000Z",
    ...change,
  };
}

export function makeUpload(change: Partial<UploadItem> = {}): UploadItem {
  return {
    id: nextId(),
    fileName: "osier5a_86_short.wav",
    bytes: 1_900_000,
    sentBytes: 1_200_000,
    bytesPerS: 400_000,
    slot: null,
    state: "sending",
    fault: null,
    ...change,
  };
}
