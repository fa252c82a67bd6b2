/** The settings of a lab as rows of words: for those who may only read, and to compare two states. */
import type { Lab } from "@/lib/api/labs";
import { formatPlain, NBSP } from "@/lib/charts/format";
import type { LabSettings } from "@/lib/labs/settings-schema";

export const EXPOSURE_WORDS: Record<LabSettings["exposure_rule"], string> = {
  niosh: "NIOSH: 85 dB(A) for 8 h, 3 dB more halves the time",
  eu: "EU: 85 dB(A) for 8 h, the upper action value",
};

/** What a form holds, and what the server compares. */
export type LabState = Pick<Lab, "name" | "time_zone" | "settings">;

export interface SettingRow {
  label: string;
  value: string;
}

const db = (value: number): string => `${formatPlain(value)}${NBSP}dB`;

export function toSettingRows({ name, time_zone, settings }: LabState): SettingRow[] {
  const { arrival } = settings;
  return [
    { label: "name", value: name },
    { label: "time zone", value: time_zone },
    { label: "two-person rule", value: settings.two_person_rule ? "on" : "off" },
    { label: "rule of the daily dose", value: EXPOSURE_WORDS[settings.exposure_rule] },
    {
      label: "largest recording",
      value:
        settings.max_upload_mb === null
          ? "as the installation allows"
          : `${settings.max_upload_mb}${NBSP}MB`,
    },
    {
      label: "recordings of archived series stay",
      value:
        settings.retention_days === null ? "for good" : `${settings.retention_days}${NBSP}days`,
    },
    { label: "level off the plan, warning beyond", value: db(arrival.level_warn_dB) },
    { label: "level off the plan, failure beyond", value: db(arrival.level_fail_dB) },
    { label: "step to the other runs, warning beyond", value: db(arrival.step_warn_dB) },
    { label: "step to the other runs, failure beyond", value: db(arrival.step_fail_dB) },
    { label: "signal-to-noise, warning under", value: db(arrival.snr_warn_dB) },
    { label: "signal-to-noise, failure under", value: db(arrival.snr_fail_dB) },
  ];
}

export interface SettingDifference {
  label: string;
  theirs: string;
  mine: string;
}

export function toSettingDifferences(theirs: LabState, mine: LabState): SettingDifference[] {
  const own = toSettingRows(mine);
  return toSettingRows(theirs).flatMap(({ label, value }, at) => {
    const written = own[at]?.value ?? "";
    return written === value ? [] : [{ label, theirs: value, mine: written }];
  });
}

/** Only what differs from before; the trail then says no more than was done. */
export function toLabChange(before: LabState, after: LabState): Partial<LabState> {
  const { name, time_zone, settings } = after;
  const sameSettings = toSettingDifferences(before, { ...before, settings }).length === 0;
  return {
    ...(name === before.name ? {} : { name }),
    ...(time_zone === before.time_zone ? {} : { time_zone }),
    ...(sameSettings ? {} : { settings }),
  };
}

/**
 * What stands after a change made on `before` is carried over to `theirs`: only what was touched
 * here goes over what another admin saved.
 */
export function mergeStates(before: LabState, mine: LabState, theirs: LabState): LabState {
  const settings = mergeTouched(before.settings, mine.settings, theirs.settings);
  const arrival = mergeTouched(
    before.settings.arrival,
    mine.settings.arrival,
    theirs.settings.arrival,
  );
  return { ...mergeTouched(before, mine, theirs), settings: { ...settings, arrival } };
}

function mergeTouched<State extends object>(before: State, mine: State, theirs: State): State {
  const known = new Map(Object.entries(before));
  const touched = Object.entries(mine).filter(([name, value]) => known.get(name) !== value);
  return { ...theirs, ...Object.fromEntries(touched) };
}
