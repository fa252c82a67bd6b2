import type { ReactNode } from "react";
import type { SeriesView } from "@/lib/api/series";
import { formatNumber, formatPlain, NBSP } from "@/lib/charts/format";
import type { DayRuleName } from "@/lib/exposure/rules";
import type { Plan } from "@/lib/series/plan-schema";
import { NoValue } from "../parts/table";
import { FormSection } from "../parts/section";
import { toCriterionWords } from "../series-list/list-words";
import { LadderPicture } from "./ladder-picture";
import { PlanAside } from "./plan-aside";
import {
  CALIBRATION_WORDS,
  ENVIRONMENT_WORDS,
  TESTER_PLACE_WORDS,
  toConditioningHint,
  toSweepHint,
} from "./plan-words";

interface PlanViewProps {
  series: SeriesView;
  rule: DayRuleName;
  /** Why it is not a form: "The plan is fixed: a recording is in." */
  why: string;
}

/** The plan to read: once a recording is in, or for who may not change it. */
export function PlanView({ series, rule, why }: PlanViewProps) {
  const { plan, loudspeaker } = series;
  return (
    <div className="grid gap-x-10 gap-y-6 px-gutter pb-9 max-md:px-phone lg:grid-cols-[minmax(0,1fr)_440px]">
      <div className="min-w-0">
        <p className="border-l-4 border-edge py-1 pl-4 text-ink-2">{why}</p>
        <FormSection title="Loudspeaker">
          <div className="flex flex-wrap gap-6">
            <Values
              of={[
                ["maker", loudspeaker.maker],
                ["model", loudspeaker.model],
                ["serial number", loudspeaker.serial],
                ["kind", loudspeaker.kind],
                ["largest dimension", withUnit(loudspeaker.largest_dimension_m, "m")],
                ["port tuning", withUnit(loudspeaker.tuning_Hz, "Hz")],
              ]}
            />
            {loudspeaker.photo_url !== null && (
              // A photo of the lab behind its own sign-in: the optimiser cannot fetch it.
              // oxlint-disable-next-line nextjs/no-img-element
              <img
                src={loudspeaker.photo_url}
                alt={`${loudspeaker.maker} ${loudspeaker.model}`}
                className="h-28 w-auto border border-rule"
              />
            )}
          </div>
        </FormSection>
        <FormSection title="Its state">
          <Values of={toStateValues(plan, loudspeaker.kind)} />
        </FormSection>
        <FormSection title="Place">
          <Values
            of={[
              ["environment", ENVIRONMENT_WORDS[plan.place.environment]],
              ["distance", withUnit(plan.place.distance_m, "m")],
              ["temperature", withUnit(plan.place.temperature_C, "°C")],
              ...(plan.place.gate_ms === null
                ? []
                : ([["gate", withUnit(plan.place.gate_ms, "ms")]] as const)),
              ["tester’s place during runs", TESTER_PLACE_WORDS[plan.place.tester]],
            ]}
          />
        </FormSection>
        <FormSection title="Calibration">
          <Values of={toCalibrationValues(plan)} />
        </FormSection>
        <FormSection title="Levels">
          <LadderPicture plan={plan} />
          {plan.variants.length > 0 && (
            <ul className="mt-2 text-small">
              {plan.variants.map((variant) => (
                <li key={`${variant.level_dB} ${variant.text}`}>
                  {formatPlain(variant.level_dB)}
                  {NBSP}dB again, {variant.text}
                </li>
              ))}
            </ul>
          )}
        </FormSection>
        <FormSection title="Sweep">
          <Values
            of={[
              ["start", withUnit(plan.sweep.start_Hz, "Hz")],
              ["end", withUnit(plan.sweep.stop_Hz, "Hz")],
              ["length", withUnit(plan.sweep.length_s, "s")],
              ["rate", withUnit(plan.sweep.rate_Hz / 1000, "kHz")],
            ]}
          />
          <p className="mt-2 text-small text-ink-2">{toSweepHint(plan.sweep)}</p>
        </FormSection>
        {plan.levels.some((level) => level.long_term) && (
          <FormSection title="Conditioning">
            <Values
              of={[
                ["minutes", formatPlain(plan.conditioning.minutes)],
                ["crest", withUnit(plan.conditioning.crest_dB, "dB")],
                ["rms re sweep", withUnit(plan.conditioning.rms_re_sweep_dB, "dB")],
                ["gap to the sweep", withUnit(plan.conditioning.gap_s, "s")],
              ]}
            />
            <p className="mt-2 text-small text-ink-2">{toConditioningHint(plan)}</p>
          </FormSection>
        )}
        <FormSection title="Criteria">
          <ul>
            {plan.criteria.map((criterion) => (
              <li key={JSON.stringify(criterion)}>{toCriterionWords(criterion)}</li>
            ))}
          </ul>
        </FormSection>
      </div>
      <PlanAside
        plan={plan}
        model={loudspeaker.model}
        kind={loudspeaker.kind}
        rule={rule}
        seriesId={series.id}
        unsaved={false}
      />
    </div>
  );
}

type Pair = readonly [label: string, value: ReactNode];

const withUnit = (value: number | null, unit: string): string | null =>
  value === null ? null : `${formatPlain(value)}${NBSP}${unit}`;

function toStateValues(plan: Plan, kind: string): Pair[] {
  const { state } = plan;
  const pairs: Pair[] = [
    ["firmware", state.firmware],
    ["preset", state.preset],
    ["input used", state.input],
    ["volume position", state.volume],
    ["EQ", state.eq],
    ["power", state.power],
  ];
  if (!kind.startsWith("passive")) return pairs;
  return [...pairs, ["amplifier", state.amplifier], ["voltage at the terminals", state.voltage]];
}

function toCalibrationValues(plan: Plan): Pair[] {
  const { calibration, microphone } = plan;
  const by: Pair[] =
    calibration.by === "sensitivity"
      ? [["full scale is", withUnit(calibration.full_scale_dB, "dB SPL")]]
      : [
          ["calibrator", `${formatNumber(calibration.level_dB)}${NBSP}dB`],
          ["its tone", withUnit(calibration.frequency_Hz, "Hz")],
        ];
  return [
    ["by", CALIBRATION_WORDS[calibration.by]],
    ...by,
    ["microphone file", microphone === null ? null : `${microphone.file_name}, ${microphone.kind}`],
    ...toUncertaintyValues(plan),
  ];
}

/** Only what was stated: the rest is assumed, and said to be where it counts. */
function toUncertaintyValues({ uncertainty }: Plan): Pair[] {
  if (uncertainty === undefined) return [];
  const { calibrator_dB, microphone_dB, distance_m } = uncertainty;
  const pairs: Pair[] = [
    ["calibrator ± (k = 2)", withUnit(calibrator_dB, "dB")],
    ["microphone ± (k = 2)", withUnit(microphone_dB, "dB")],
    ["distance ±", withUnit(distance_m, "m")],
  ];
  return pairs.filter(([, value]) => value !== null);
}

function Values({ of }: { of: readonly Pair[] }) {
  return (
    <dl className="grid flex-1 gap-x-3.5 gap-y-3 max-sm:grid-cols-2 sm:grid-cols-3">
      {of.map(([label, value]) => (
        <div key={label} className="min-w-0">
          <dt className="figures text-label text-ink-2">{label}</dt>
          <dd className="break-words">
            {value === null || value === "" ? <NoValue say="not given" /> : value}
          </dd>
        </div>
      ))}
    </dl>
  );
}
