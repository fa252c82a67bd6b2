/** Checks of the file itself, in the tester's words: what is wrong, what it spoils, the remedy. */
import type { Recording, ThirdOctave } from "../../analysis/types";
import type { ArrivalCheck } from "../arrival-schema";
import type { ArrivalRequest } from "./arrival-request";
import { sayHz } from "../../analysis/say";
import { GAIN_REMEDY, passed, plainCheck, sayCount, speaking } from "./check";
import { round, toDbfs, type FileFacts } from "./file-facts";
import { toBandsBetween, toPlace, type SweepTimeline } from "./sweep-timeline";

const DC_LIMIT_DBFS = -40;
/** A recording of sound that peaks under this holds none. */
const SILENT_PEAK_DBFS = -70;

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

/** @param timeline of the sweep, where one was found: then the place is said by its frequency. */
export function checkClipping(
  { rateHz }: Recording,
  facts: FileFacts,
  sweep: { timeline: SweepTimeline; bands: readonly ThirdOctave[] } | null,
): ArrivalCheck {
  if (facts.clips.length === 0) {
    return passed("clipping", {
      title: "not clipped",
      finding: `The input peaks at ${toText(toDbfs(facts.peak))}.`,
      figure: { value: 0, limit: 0, unit: "samples" },
    });
  }
  const fromS = Math.min(...facts.clips.map((clip) => clip.from)) / rateHz;
  const toS = Math.max(...facts.clips.map((clip) => clip.to)) / rateHz;
  const place = sweep === null ? null : toPlace(sweep.timeline, fromS, toS);
  const playing = place !== null && place.from_Hz !== null && place.to_Hz !== null;
  const count = sayCount(facts.clippedSamples);
  return speaking("clipping", "fail", {
    title: "clipped input",
    finding: `The input clipped on ${count} ${facts.clippedSamples === 1 ? "sample" : "samples"}, between ${
      playing
        ? `${sayHz(Number(place.from_Hz?.toPrecision(3)))} and ${sayHz(Number(place.to_Hz?.toPrecision(3)))} of the sweep`
        : `${fromS.toFixed(2)} and ${toS.toFixed(2)} s`
    }.`,
    spoils: "Harmonics there would be the recorder's, not the loudspeaker's.",
    remedy: GAIN_REMEDY,
    figure: { value: facts.clippedSamples, limit: 0, unit: "samples" },
    where: place ?? { from_s: round(fromS, 4), to_s: round(toS, 4), from_Hz: null, to_Hz: null },
    bands_Hz: sweep === null ? [] : toBandsBetween(sweep.timeline, sweep.bands, fromS, toS),
  });
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
        finding: `The recording is shifted by ${toText(level)} of DC; up to ${toText(DC_LIMIT_DBFS)} is usual.`,
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

export function checkDuplicate({ run, siblings }: ArrivalRequest): ArrivalCheck {
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
