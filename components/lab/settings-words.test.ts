import { describe, expect, it } from "vitest";
import { labSettingsSchema } from "@/lib/labs/settings-schema";
import {
  mergeStates,
  toLabChange,
  toSettingDifferences,
  toSettingRows,
  type LabState,
} from "./settings-words";

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
      "the retention",
      change({ retention_days: null }),
      [
        {
          label: "recordings of archived series stay",
          theirs: "400\u00a0days",
          mine: "for good",
        },
      ],
    ],
    [
      "a limit at arrival",
      change({ arrival: { ...before.settings.arrival, snr_warn_dB: 35 } }),
      [{ label: "signal-to-noise, warning under", theirs: "20\u00a0dB", mine: "35\u00a0dB" }],
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

describe("mergeStates", () => {
  it("puts over theirs what was touched here, and nothing else", () => {
    const { arrival } = before.settings;
    const theirs = change(
      { two_person_rule: false, arrival: { ...arrival, snr_fail_dB: 18 } },
      { name: "Withy Lane Lab" },
    );
    const mine = change(
      { max_upload_mb: 120, arrival: { ...arrival, level_warn_dB: 0.8 } },
      { time_zone: "UTC" },
    );
    expect(mergeStates(before, mine, theirs)).toEqual({
      name: "Withy Lane Lab",
      time_zone: "UTC",
      settings: {
        ...before.settings,
        two_person_rule: false,
        max_upload_mb: 120,
        arrival: { ...arrival, level_warn_dB: 0.8, snr_fail_dB: 18 },
      },
    });
  });

  it("keeps ours where both touched the same", () => {
    const merged = mergeStates(before, change({}, { name: "A" }), change({}, { name: "B" }));
    expect(merged.name).toBe("A");
  });
});
