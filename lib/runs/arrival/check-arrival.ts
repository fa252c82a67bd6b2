/** The arrival checks of one recording, seconds after it came (docs/domain.md section 9). */
import { Plans } from "../../analysis/cell-power";
import type { Recording } from "../../analysis/types";
import { readRecording } from "../../audio/read-recording";
import { FileError, type AppError } from "../../errors/app-error";
import { isTableName } from "../../series/table-columns";
import type { ArrivalCheck, ArrivalReport } from "../arrival-schema";
import type { ArrivalRequest } from "./arrival-request";
import { checkCalibrator } from "./calibrator-checks";
import { plainCheck, speaking } from "./check";
import { checkTable } from "./check-table";
import { checkSweep, type SweepFindings } from "./check-sweep";
import { checkClipping, checkFile } from "./file-checks";
import { drawEnvelope, measureFile, round, toDbfs, type FileFacts } from "./file-facts";
import { createFinder, lookForSweep } from "./measure-sweep";
import { checkHum } from "./noise-checks";
import { findFullScaleDb, findTones } from "./siblings";

/** A sine's level re a sine at full scale is its rms and this, dB. */
const SINE_OVER_RMS_DB = 20 * Math.log10(Math.SQRT2);
/** Other channels are looked at only where the chosen one holds nothing. */
const MOST_CHANNELS = 8;

/**
 * Computes; changes nothing. A file that cannot be read gives a report that says so: only a fault
 * of ours throws.
 *
 * @param plans tables of earlier checks, to be used again by a process that makes many.
 */
export async function checkArrival(
  request: ArrivalRequest,
  plans: Plans = new Plans(),
): Promise<ArrivalReport> {
  const { run } = request;
  if (isTableName(run.file)) return checkTable(request);
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
    const ofFile = checkFile(request, recording, facts, audio.channels);
    const { checks, figures } = checkContent(request, recording, facts, ofFile, plans);
    const all = [readable, ...ofFile, ...checks];
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
      envelope: figures.envelope ?? drawEnvelope(recording),
      ...figures,
      checks: await nameOtherChannel(request, all, audio.channels, plans),
    };
  } catch (error) {
    if (!(error instanceof FileError)) throw error;
    return unreadable(request, error);
  }
}

/** What the place of the recording asks for. */
function checkContent(
  request: ArrivalRequest,
  recording: Recording,
  facts: FileFacts,
  ofFile: readonly ArrivalCheck[],
  plans: Plans,
): SweepFindings {
  const { plan, run, siblings } = request;
  const spoilt = ofFile.some(
    ({ code, verdict }) => verdict === "fail" && (code === "rate" || code === "silence"),
  );
  const clipping = checkClipping(recording, facts, null);
  if (spoilt || run.place === null) return { checks: [clipping], figures: {} };
  const fullScaleDb = findFullScaleDb(plan, siblings);
  switch (run.place.role) {
    case "calibrator-before":
    case "calibrator-after": {
      const { checks, tone, purityDb } = checkCalibrator(request, recording, plans);
      const { before } = findTones(siblings);
      const reference = run.place.role === "calibrator-after" ? (before ?? tone) : tone;
      return {
        checks: [clipping, ...checks],
        figures:
          tone === null || reference === null
            ? {}
            : {
                tone,
                snr_dB: purityDb === null ? null : round(purityDb, 1),
                measured_level_dB: round(
                  plan.calibration.level_dB + tone.level_dBFS - reference.level_dBFS,
                  2,
                ),
              },
      };
    }
    case "ambient": {
      const hum = checkHum(recording.samples, recording.rateHz, plans);
      const rmsDb = toDbfs(facts.rms);
      return {
        checks: hum === null ? [clipping] : [clipping, hum],
        figures: {
          full_scale_dB: fullScaleDb === null ? null : round(fullScaleDb, 3),
          measured_level_dB:
            fullScaleDb === null || rmsDb === null
              ? null
              : round(fullScaleDb + rmsDb + SINE_OVER_RMS_DB, 2),
        },
      };
    }
    case "short-term":
    case "long-term":
    case "variant":
    case "closing":
      return checkSweep(request, recording, facts, plans);
  }
}

/** Where the chosen channel holds no sweep but another one does, that is the finding. */
async function nameOtherChannel(
  { run, plan, open }: ArrivalRequest,
  checks: ArrivalCheck[],
  channels: number,
  plans: Plans,
): Promise<ArrivalCheck[]> {
  const empty = checks.find(
    ({ code, verdict }) => verdict === "fail" && (code === "silence" || code === "sweep-present"),
  );
  const sweepWanted = run.place !== null && run.place.levelDb !== null;
  const rateFits = checks.every(({ code, verdict }) => code !== "rate" || verdict === "pass");
  if (empty === undefined || !sweepWanted || !rateFits) return checks;
  for (let channel = 1; channel <= Math.min(channels, MOST_CHANNELS); channel += 1) {
    if (channel === run.channel) continue;
    const { recording } = await readRecording(open(run.digest), { file: run.file, channel });
    if (!recording.samples.some((x) => x !== 0)) continue;
    if (lookForSweep(recording, createFinder(plan, plans)).verdict !== "found") continue;
    const wrong = speaking("channel", "fail", {
      title: "wrong channel",
      finding: `Channel ${run.channel} holds no sweep; channel ${channel} of ${channels} does.`,
      spoils: "There is nothing to measure in the chosen channel.",
      remedy: `Choose channel ${channel} if the microphone is on it. Nothing needs recording again.`,
    });
    return checks.flatMap((check) => {
      if (check.code === "channel") return [wrong];
      return check === empty ? [] : [check];
    });
  }
  return checks;
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
