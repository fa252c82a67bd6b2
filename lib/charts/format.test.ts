import { describe, expect, it } from "vitest";
import * as format from "./format";

const N = format.NBSP;

describe("numbers in words", () => {
  it.each([
    [format.formatNumber(-0.04), "0.0"],
    [format.formatNumber(-0.06), "\u22120.1"],
    [format.formatDb(94), `94.0${N}dB`],
    [format.formatSigned(7.68), "+7.7"],
    [format.formatSigned(-0.04), "\u22120.0"],
    [format.formatSigned(0.04), "+0.0"],
    [format.formatSignedDb(-2), `\u22122.0${N}dB`],
    [format.formatLevel(76), `76${N}dB`],
    [format.formatLevel(76.5), `76.5${N}dB`],
    [format.formatLimitDown(101.99), `101${N}dB`],
    [format.formatLimitDown(101), `101${N}dB`],
    [format.formatLimitDown(100.9999999999), `101${N}dB`],
    [format.formatFrequency(63), `63${N}Hz`],
    [format.formatFrequency(1250), `1.25${N}kHz`],
    [format.formatFrequency(15848.9), `15.8${N}kHz`],
    [format.formatFrequency(999.9), `1${N}kHz`],
    [format.formatFrequencyShort(12500), "12.5k"],
    [format.formatFrequencyShort(63), "63"],
    [format.sayFrequency(12500), "12.5 kilohertz"],
    [format.formatPercent(1.36), `1.4${N}%`],
    [format.formatPercent(0.399), `0.40${N}%`],
    [format.formatPercent(0.996), `1.0${N}%`],
    [format.formatPercent(9.96), `10${N}%`],
    [format.formatPercent(0.0032), `0.003${N}%`],
    [format.formatPercent(0.0002), `under 0.001${N}%`],
    [format.formatPercentCell(0.066), ".07"],
    [format.formatPercentCell(0.0032), ".003"],
    [format.formatPercentCell(13.6), "14"],
    [format.formatCount(1214), "1\u2009214"],
    [format.formatBytes(2_200_000), `2.2${N}MB`],
    [format.formatBytes(999_600), `1.0${N}MB`],
    [format.formatBytes(312_000), `312${N}kB`],
    [format.formatDurationDown(18_179), `5${N}h 2${N}min`],
    [format.formatDurationDown(2639), `43${N}min`],
    [format.formatDurationDown(7200), `2${N}h`],
    [format.formatList(["40", "50", "63 Hz"]), "40, 50 and 63 Hz"],
    [format.formatList([]), ""],
  ])("%s", (text, expected) => expect(text).toBe(expected));

  it.each([
    [101.2, 102, 101],
    [101, 101, 101],
    [101.00000000000001, 101, 101],
  ])("%d rounds up to %d at the ear, down to %d as a limit", (level, up, down) => {
    expect(format.roundLevelUp(level)).toBe(up);
    expect(format.roundLimitDown(level)).toBe(down);
  });
});
