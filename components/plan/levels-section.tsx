"use client";

import { useFieldArray, useFormContext, useWatch } from "react-hook-form";
import { planSchema } from "@/lib/series/plan-schema";
import { Button } from "../parts/button";
import { Checkbox } from "../parts/checkbox";
import { FormSection } from "../parts/section";
import { LABEL_FOR_READERS, NumberField, SectionHint, useFault } from "./form-fields";
import { LadderPicture } from "./ladder-picture";
import type { PlanFormInput } from "./plan-form-schema";
import { suggestLevel, usualLevels, withLongTermRun, type PlannedLevel } from "./plan-levels";
import { VariantRows } from "./variant-rows";

/** The levels as a picture and as rows; the picture follows the rows. */
export function LevelsSection() {
  const { control, register, getValues, setFocus } = useFormContext<PlanFormInput>();
  const { fields, append, remove, replace } = useFieldArray({ control, name: "plan.levels" });
  const [levels, closing, conditioning] = useWatch({
    control,
    name: ["plan.levels", "plan.closing", "plan.conditioning"],
  });
  const fault = useFault("plan.levels");
  const drawn = planSchema.shape.levels.safeParse(levels);
  const drawnConditioning = planSchema.shape.conditioning.safeParse(conditioning);
  const toNow = (): PlannedLevel[] => (getValues("plan.levels") ?? []) as PlannedLevel[];
  const next = suggestLevel((levels ?? []) as PlannedLevel[]);
  const withLong = withLongTermRun((levels ?? []) as PlannedLevel[]);

  return (
    <FormSection title="Levels">
      {drawn.success && drawnConditioning.success && (
        <LadderPicture
          plan={{
            levels: drawn.data,
            closing: closing ?? true,
            conditioning: drawnConditioning.data,
          }}
        />
      )}
      <SectionHint>
        Mean-square SPL over 500 Hz to 2 kHz at 1 m. Set the gain once, on the quietest file; the
        files hold the steps. Then leave volume control and input gain alone.
      </SectionHint>
      <ul aria-label="Levels" className="mt-3 border-b border-rule">
        {fields.map((field, at) => (
          <li
            key={field.id}
            className="flex flex-wrap items-start gap-x-4 gap-y-1 border-t border-rule py-1.5"
          >
            <NumberField
              size="normal"
              name={`plan.levels.${at}.level_dB`}
              label="level, dB"
              className={`w-24 ${at === 0 ? "" : LABEL_FOR_READERS}`}
            />
            <NumberField
              size="normal"
              name={`plan.levels.${at}.repeats`}
              label="repeats"
              className={`w-20 ${at === 0 ? "" : LABEL_FOR_READERS}`}
            />
            <Checkbox
              className={`min-h-9 ${at === 0 ? "mt-[21px]" : ""}`}
              {...register(`plan.levels.${at}.long_term`)}
            >
              long-term run
            </Checkbox>
            <Button
              tone="quiet"
              size="small"
              className={`ml-auto ${at === 0 ? "mt-[25px]" : "mt-[3px]"}`}
              aria-label={`Remove level ${at + 1}`}
              disabled={fields.length <= 2}
              onClick={() => remove(at)}
            >
              Remove
            </Button>
          </li>
        ))}
      </ul>
      {fault !== undefined && (
        <p role="alert" className="mt-2 text-small text-fault">
          {fault}
        </p>
      )}
      <div className="mt-3 flex flex-wrap items-center gap-2">
        {next !== null && fields.length < 12 && (
          <Button
            size="small"
            onClick={() => {
              append(next, { shouldFocus: false });
              setFocus(`plan.levels.${fields.length}.level_dB`, { shouldSelect: true });
            }}
          >
            Add a level
          </Button>
        )}
        {withLong !== null && (
          <Button
            size="small"
            onClick={() => {
              replace(withLongTermRun(toNow()) ?? toNow());
            }}
          >
            Add a long-term run
          </Button>
        )}
        <Button tone="quiet" size="small" onClick={() => replace(usualLevels())}>
          Usual plan: 76, 86, 96, 102
        </Button>
      </div>
      <div className="mt-4 flex flex-wrap gap-x-6 gap-y-2">
        <Checkbox {...register("plan.ambient")}>room noise before the first run</Checkbox>
        <Checkbox {...register("plan.closing")}>closing repeat of the lowest level</Checkbox>
      </div>
      <VariantRows />
    </FormSection>
  );
}
