"use client";

import { useFieldArray, useFormContext } from "react-hook-form";
import { Button } from "../parts/button";
import { FormSection } from "../parts/section";
import {
  LABEL_FOR_READERS,
  LABEL_FROM_SM,
  NumberField,
  SectionHint,
  useFault,
} from "./form-fields";
import type { PlanFormInput } from "./plan-form-schema";

const MOST = 12;

/** What counts as the limit: THD, compression, or the pair, whichever comes first. */
export function CriteriaSection() {
  const { control } = useFormContext<PlanFormInput>();
  const { fields, append, remove } = useFieldArray({ control, name: "plan.criteria" });
  const fault = useFault("plan.criteria");
  return (
    <FormSection title="Criteria">
      <ul aria-label="Criteria" className="grid gap-x-6 sm:grid-cols-2">
        {fields.map((field, at) => (
          <li key={field.id} className="flex items-start gap-3 pb-2">
            <NumberField
              optional
              size="normal"
              name={`plan.criteria.${at}.thd_percent`}
              label="THD, %"
              className={`w-24 ${at > 1 ? LABEL_FOR_READERS : at === 1 ? LABEL_FROM_SM : ""}`}
            />
            <NumberField
              optional
              size="normal"
              name={`plan.criteria.${at}.compression_dB`}
              label="compression, dB"
              className={`w-32 ${at > 1 ? LABEL_FOR_READERS : at === 1 ? LABEL_FROM_SM : ""}`}
            />
            <Button
              tone="quiet"
              size="small"
              className={at > 1 ? "mt-1" : at === 1 ? "mt-[25px] max-sm:mt-1" : "mt-[25px]"}
              aria-label={`Remove criterion ${at + 1}`}
              disabled={fields.length <= 1}
              onClick={() => remove(at)}
            >
              Remove
            </Button>
          </li>
        ))}
      </ul>
      {fault !== undefined && (
        <p role="alert" className="text-small text-fault">
          {fault}
        </p>
      )}
      {fields.length < MOST && (
        <Button
          size="small"
          onClick={() => append({ thd_percent: undefined, compression_dB: undefined })}
        >
          Add a criterion
        </Button>
      )}
      <SectionHint>
        With both fields filled, whichever comes first counts. THD cannot apply above 10 kHz.
      </SectionHint>
    </FormSection>
  );
}
