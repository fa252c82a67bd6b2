/** Checks of the file itself, in the tester's words: what is wrong, what it spoils, the remedy. */
import type { Recording } from "../../analysis/types";
import type { ArrivalCheck } from "../arrival-schema";
import type { ArrivalRequest } from "./arrival-request";
import { round, toDbfs, type FileFacts } from "./file-facts";

const DC_LIMIT_DBFS = -40;
/** A recording of sound that peaks under this holds none. */
const SILENT_PEAK_DBFS = -70;

/** The keys that most checks leave empty. */
export const plainCheck = {
  spoils: "",
  remedy: "",
  figure: null,
  where: null,
  bands_Hz: [],
} as const satisfies Partial<ArrivalCheck>;

/** After a fault of the input gain: both ways keep the calibration. */
export const GAIN_REMEDY =
  "If it was an accident, a door or a bump, record this run again at the same gain. If the gain is too high, lower it, record the calibrator again and repeat every level.";

/** @param channels in the file. */
export function checkFile(
  request: ArrivalRequest,
  recording: Recording,
  facts: FileFacts,
  channels: number,
): ArrivalCheck[] {
  return [
    checkRate(request, recording.rateHz),
    checkChannel(request.run.channel, channels),
    checkClipping(recording, facts),
    checkMean(facts),
    checkSilence(request, facts),
    checkDuplicate(request),
  ];
}

function checkRate({ plan }: ArrivalRequest, rateHz: number): ArrivalCheck {
  const planned = plan.sweep.rate_Hz;
  const figure = { value: rateHz, limit: planned, unit: "Hz" };
  if (rateHz === planned) {
    return {
      ...plainCheck,
      code: "rate",
      verdict: "pass",
      title: "sample rate",
      finding: `${toKhz(rateHz)} as planned.`,
      figure,
    };
  }
  return {
    ...plainCheck,
    code: "rate",
    verdict: "fail",
    title: "wrong sample rate",
    finding: `The file has ${toKhz(rateHz)}; the stimulus is played at ${toKhz(planned)}.`,
    spoils: "The sweep cannot be told apart from another one, so no level can be computed.",
    remedy: `Set the recorder to ${toKhz(planned)} and record this run again. Do not convert the file: conversion changes what is measured.`,
    figure,
  };
}

function checkChannel(channel: number, channels: number): ArrivalCheck {
  const said =
    channels === 1
      ? "One channel."
      : `Channel ${channel} of ${channels} is used; the others are left out, never mixed in.`;
  return {
    ...plainCheck,
    code: "channel",
    verdict: "pass",
    title: channels === 1 ? "one channel" : `channel ${channel} of ${channels}`,
    finding: said,
  };
}

function checkClipping({ rateHz }: Recording, facts: FileFacts): ArrivalCheck {
  const [longest] = facts.clips;
  if (longest === undefined) {
    return {
      ...plainCheck,
      code: "clipping",
      verdict: "pass",
      title: "not clipped",
      finding: `The input peaks at ${toText(toDbfs(facts.peak))}.`,
      figure: { value: 0, limit: 0, unit: "samples" },
    };
  }
  const first = Math.min(...facts.clips.map((clip) => clip.from));
  const last = Math.max(...facts.clips.map((clip) => clip.to));
  const count = facts.clippedSamples.toLocaleString("en").replaceAll(",", " ");
  return {
    ...plainCheck,
    code: "clipping",
    verdict: "fail",
    title: "clipped input",
    finding: `The input clipped on ${count} ${facts.clippedSamples === 1 ? "sample" : "samples"}, between ${(first / rateHz).toFixed(2)} and ${(last / rateHz).toFixed(2)} s.`,
    spoils: "Harmonics there would be the recorder's, not the loudspeaker's.",
    remedy: GAIN_REMEDY,
    figure: { value: facts.clippedSamples, limit: 0, unit: "samples" },
    where: {
      from_s: round(first / rateHz, 4),
      to_s: round(last / rateHz, 4),
      from_Hz: null,
      to_Hz: null,
    },
  };
}

function checkMean(facts: FileFacts): ArrivalCheck {
  const level = toDbfs(Math.abs(facts.mean));
  const bad = level !== null && level > DC_LIMIT_DBFS;
  const figure = level === null ? null : { value: level, limit: DC_LIMIT_DBFS, unit: "dBFS" };
  return bad
    ? {
        ...plainCheck,
        code: "dc-offset",
        verdict: "fail",
        title: "DC offset",
        finding: `The recording is shifted by ${toText(level)} of DC; up to ${DC_LIMIT_DBFS} dBFS is usual.`,
        spoils: "It takes headroom and points at a fault of the input.",
        remedy:
          "Check the input and its cable, record the calibrator again and repeat every level.",
        figure,
      }
    : {
        ...plainCheck,
        code: "dc-offset",
        verdict: "pass",
        title: "no DC offset",
        finding: "The recording is centred.",
        figure,
      };
}

function checkSilence({ run }: ArrivalRequest, facts: FileFacts): ArrivalCheck {
  const level = toDbfs(facts.peak);
  // Room noise may be as quiet as it likes, but not digital silence.
  const silent =
    level === null ||
    (run.place?.role !== "ambient" && run.place !== null && level < SILENT_PEAK_DBFS);
  const figure = level === null ? null : { value: level, limit: SILENT_PEAK_DBFS, unit: "dBFS" };
  if (!silent) {
    return {
      ...plainCheck,
      code: "silence",
      verdict: "pass",
      title: "sound is there",
      finding: `The recording peaks at ${toText(level)}.`,
      figure,
    };
  }
  return {
    ...plainCheck,
    code: "silence",
    verdict: "fail",
    title: "silent recording",
    finding:
      level === null
        ? `Channel ${run.channel} is digital silence from start to end.`
        : `Channel ${run.channel} peaks at ${toText(level)}: no sound reached it.`,
    spoils: "There is nothing to measure in it.",
    remedy:
      "Check that the microphone is plugged into this channel, or choose another channel of the file. Then record this run again at the same gain.",
    figure,
  };
}

function checkDuplicate({ run, siblings }: ArrivalRequest): ArrivalCheck {
  const twin = siblings.find((sibling) => sibling.digest === run.digest);
  if (twin === undefined || twin.channel !== run.channel) {
    return {
      ...plainCheck,
      code: "duplicate",
      verdict: "pass",
      title: "a take of its own",
      finding: "No other recording of this series has the same bytes.",
    };
  }
  const where = twin.place === null ? twin.file : `${twin.file} (${twin.place.label})`;
  return {
    ...plainCheck,
    code: "duplicate",
    verdict: "fail",
    title: "the same file twice",
    finding: `The file has the same bytes as ${where}.`,
    spoils: "One recording would count as two.",
    remedy: "Send the file that was meant for this run, or record the run again at the same gain.",
  };
}

const toText = (levelDb: number | null): string =>
  levelDb === null ? "no level" : `${levelDb.toFixed(1).replace("-", "−")} dBFS`;
const toKhz = (rateHz: number): string => `${round(rateHz / 1000, 3)} kHz`;
