import { describe, expect, it } from "vitest";
import { labSettingsSchema } from "@/lib/labs/settings-schema";
import { toLabChange, toSettingDifferences, toSettingRows, type LabState } from "./settings-words";

const before: LabState = {
  name: "Withy Lane",
  time_zone: "Europe/Helsinki",
  settings: labSettingsSchema.parse({ retention_days: 400 }),
};
const change = (settings: object, rest: Partial<LabState> = {}): LabState => ({
  ...before,
  ...rest,
  settings: labSettingsSchema.parse({ ...before.settings, ...settings }),
});

describe("toSettingDifferences", () => {
  it.each([
    ["nothing", before, []],
    [
      "the name and a rule",
      change({ two_person_rule: false }, { name: "Withy" }),
      [
        { label: "name", theirs: "Withy Lane", mine: "Withy" },
        { label: "two-person rule", theirs: "on", mine: "off" },
      ],
    ],
    [
      "the largest recording",
      change({ max_upload_mb: 120 }),
      [
        {
          label: "largest recording",
          theirs: "as the installation allows",
          mine: "120\u00a0MB",
        },
      ],
    ],
    [
      "a limit at arrival",
      change({ arrival: { ...before.settings.arrival, snr_warn_dB: 35 } }),
      [{ label: "signal-to-noise, warning under", theirs: "40\u00a0dB", mine: "35\u00a0dB" }],
    ],
  ])("%s", (_name, mine, expected) => {
    expect(toSettingDifferences(before, mine)).toEqual(expected);
  });
});

describe("toLabChange", () => {
  it("sends what differs and nothing else", () => {
    expect(toLabChange(before, before)).toEqual({});
    expect(toLabChange(before, change({}, { time_zone: "UTC" }))).toEqual({ time_zone: "UTC" });
    const mine = change({ exposure_rule: "eu" });
    expect(toLabChange(before, mine)).toEqual({ settings: mine.settings });
  });
});

it("names every setting once", () => {
  const labels = toSettingRows(before).map((row) => row.label);
  expect(new Set(labels).size).toBe(labels.length);
});
