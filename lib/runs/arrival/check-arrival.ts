/** The arrival checks of one recording, seconds after it came (docs/domain.md section 9). */
import { readRecording } from "../../audio/read-recording";
import { FileError, type AppError } from "../../errors/app-error";
import type { ArrivalCheck, ArrivalReport } from "../arrival-schema";
import type { ArrivalRequest } from "./arrival-request";
import { checkFile, plainCheck } from "./file-checks";
import { drawEnvelope, measureFile, round, toDbfs } from "./file-facts";

/**
 * Computes; changes nothing. A file that cannot be read gives a report that says so: only a fault
 * of ours throws.
 */
export async function checkArrival(request: ArrivalRequest): Promise<ArrivalReport> {
  const { run } = request;
  try {
    const { recording, audio } = await readRecording(request.open(run.digest), {
      file: run.file,
      channel: run.channel,
    });
    const facts = measureFile(recording);
    const format = `${audio.bits}-bit ${audio.encoding === "float" ? "float" : "PCM"}`;
    const readable: ArrivalCheck = {
      ...plainCheck,
      code: "readable",
      verdict: "pass",
      title: "readable",
      finding: `${format}, ${audio.channels === 1 ? "one channel" : `${audio.channels} channels`}, ${(audio.frames / audio.rateHz).toFixed(2)} s.`,
    };
    return {
      engine_version: request.engineVersion,
      format,
      rate_Hz: audio.rateHz,
      channels: audio.channels,
      channel: run.channel,
      bits: audio.bits,
      length_s: round(audio.frames / audio.rateHz, 4),
      peak_dBFS: toDbfs(facts.peak),
      rms_dBFS: toDbfs(facts.rms),
      measured_level_dB: null,
      snr_dB: null,
      latency_s: null,
      drift_ppm: null,
      envelope: drawEnvelope(recording),
      checks: [readable, ...checkFile(request, recording, facts, audio.channels)],
    };
  } catch (error) {
    if (!(error instanceof FileError)) throw error;
    return unreadable(request, error);
  }
}

function unreadable({ run, engineVersion }: ArrivalRequest, error: AppError): ArrivalReport {
  const channel = error.code === "audio.channel-missing";
  return {
    engine_version: engineVersion,
    format: "",
    rate_Hz: 0,
    channels: 0,
    channel: run.channel,
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
        code: channel ? "channel" : "readable",
        verdict: "fail",
        title: channel ? "no such channel" : "not readable",
        finding: error.message,
        spoils: "Nothing can be measured in it.",
        remedy: channel
          ? "Choose a channel that the file has."
          : "Export the recording as WAV or FLAC and send it again.",
      },
    ],
  };
}
