"use client";

import { Controller, useFormContext, useWatch } from "react-hook-form";
import {
  CALIBRATION_WAYS,
  planSchema,
  sweepPlanSchema,
  TESTER_PLACES,
} from "@/lib/series/plan-schema";
import { conditioningSchema } from "@/lib/series/series-schema";
import { ENVIRONMENTS } from "@/lib/series/vocabulary";
import { FormSection } from "../parts/section";
import { SegmentedControl } from "../parts/segmented-control";
import { ChoiceField, FieldGrid, NumberField, SectionHint, TextField } from "./form-fields";
import { MicrophoneField } from "./microphone-field";
import type { PlanFormInput } from "./plan-form-schema";
import {
  CALIBRATION_WORDS,
  ENVIRONMENT_WORDS,
  TESTER_PLACE_WORDS,
  toConditioningHint,
  toDistanceHint,
  toSweepHint,
} from "./plan-words";

const INPUTS = ["balanced", "unbalanced", "digital", "wireless"];
const EQS = ["off"];
const POWERS = ["mains, 230 V", "mains, 120 V", "battery, full", "USB"];

export function StateSection() {
  const kind = useWatch<PlanFormInput, "loudspeaker.kind">({ name: "loudspeaker.kind" });
  return (
    <FormSection title="Its state">
      <FieldGrid>
        <TextField name="plan.state.firmware" label="firmware" figures />
        <TextField name="plan.state.preset" label="preset" suggestions={["flat"]} />
        <TextField name="plan.state.input" label="input used" suggestions={INPUTS} />
        <TextField name="plan.state.volume" label="volume position" figures />
        <TextField name="plan.state.eq" label="EQ" suggestions={EQS} />
        <TextField name="plan.state.power" label="power" suggestions={POWERS} />
        {kind?.startsWith("passive") && (
          <>
            <TextField name="plan.state.amplifier" label="amplifier" />
            <TextField name="plan.state.voltage" label="voltage at the terminals" figures />
          </>
        )}
      </FieldGrid>
    </FormSection>
  );
}

export function PlaceSection() {
  const { control } = useFormContext<PlanFormInput>();
  const [environment, distance, largest] = useWatch({
    control,
    name: ["plan.place.environment", "plan.place.distance_m", "loudspeaker.largest_dimension_m"],
  });
  const hint = toDistanceHint(distance ?? Number.NaN, largest ?? null);
  return (
    <FormSection title="Place">
      <FieldGrid>
        <ChoiceField
          name="plan.place.environment"
          label="environment"
          choices={ENVIRONMENTS.map((value) => [value, ENVIRONMENT_WORDS[value]] as const)}
        />
        <NumberField name="plan.place.distance_m" label="distance, m" hint={hint?.words} />
        <NumberField name="plan.place.temperature_C" label="temperature, °C" />
        {environment === "gated" && <NumberField name="plan.place.gate_ms" label="gate, ms" />}
      </FieldGrid>
      <div className="mt-3">
        <Controller
          control={control}
          name="plan.place.tester"
          render={({ field }) => (
            <SegmentedControl
              legend="tester’s place during runs"
              wide
              value={field.value ?? "in-room"}
              onChange={field.onChange}
              segments={TESTER_PLACES.map((value) => ({ value, label: TESTER_PLACE_WORDS[value] }))}
            />
          )}
        />
      </div>
    </FormSection>
  );
}

export function CalibrationSection() {
  const by = useWatch<PlanFormInput, "plan.calibration.by">({ name: "plan.calibration.by" });
  return (
    <FormSection title="Calibration">
      <FieldGrid>
        <ChoiceField
          name="plan.calibration.by"
          label="by"
          choices={[...CALIBRATION_WAYS].reverse().map((way) => [way, CALIBRATION_WORDS[way]])}
        />
        {by === "sensitivity" ? (
          <NumberField
            name="plan.calibration.full_scale_dB"
            label="full scale is, dB SPL"
            hint="The level of a sine that just reaches digital full scale."
          />
        ) : (
          <>
            <NumberField name="plan.calibration.level_dB" label="calibrator, dB" />
            <NumberField name="plan.calibration.frequency_Hz" label="its tone, Hz" />
          </>
        )}
      </FieldGrid>
      <FieldGrid>
        <NumberField name="plan.uncertainty.calibrator_dB" label="calibrator ±, dB (k = 2)" />
        <NumberField name="plan.uncertainty.microphone_dB" label="microphone ±, dB (k = 2)" />
        <NumberField name="plan.uncertainty.distance_m" label="distance ±, m" />
      </FieldGrid>
      <SectionHint>
        From their certificates, for the uncertainty of an absolute level. Left empty, class 1 and ±
        1 cm are assumed, and said to be.
      </SectionHint>
      <MicrophoneField />
    </FormSection>
  );
}

const RATES = [44_100, 48_000, 88_200, 96_000, 176_400, 192_000];

export function SweepSection() {
  const sweep = useWatch<PlanFormInput, "plan.sweep">({ name: "plan.sweep" });
  const parsed = sweepPlanSchema.safeParse(sweep);
  return (
    <FormSection title="Sweep">
      <FieldGrid columns={4}>
        <NumberField name="plan.sweep.start_Hz" label="start, Hz" />
        <NumberField name="plan.sweep.stop_Hz" label="end, Hz" />
        <NumberField name="plan.sweep.length_s" label="length, s" />
        <ChoiceField
          name="plan.sweep.rate_Hz"
          label="rate, kHz"
          numbers
          figures
          choices={RATES.map((rate) => [String(rate), String(rate / 1000)] as const)}
        />
      </FieldGrid>
      {parsed.success && <SectionHint>{toSweepHint(parsed.data)}</SectionHint>}
    </FormSection>
  );
}

export function ConditioningSection() {
  const [conditioning, levels] = useWatch<PlanFormInput, ["plan.conditioning", "plan.levels"]>({
    name: ["plan.conditioning", "plan.levels"],
  });
  const parsed = conditioningSchema.safeParse(conditioning);
  const parsedLevels = planSchema.shape.levels.safeParse(levels);
  return (
    <FormSection title="Conditioning">
      <FieldGrid columns={4}>
        <NumberField name="plan.conditioning.minutes" label="minutes" />
        <NumberField name="plan.conditioning.crest_dB" label="crest, dB" />
        <NumberField name="plan.conditioning.rms_re_sweep_dB" label="rms re sweep, dB" />
        <NumberField name="plan.conditioning.gap_s" label="gap to the sweep, s" />
      </FieldGrid>
      {parsed.success && parsedLevels.success && (
        <SectionHint>
          {toConditioningHint({ conditioning: parsed.data, levels: parsedLevels.data })}
        </SectionHint>
      )}
    </FormSection>
  );
}
