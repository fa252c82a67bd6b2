"use client";

import { useFieldArray, useFormContext } from "react-hook-form";
import { Button } from "../parts/button";
import { NumberField, TextField, useFault } from "./form-fields";
import type { PlanFormInput } from "./plan-form-schema";

const MOST = 24;

/** Runs with another setting, port blocked for one: each beside a plain run of its level. */
export function VariantRows() {
  const { control, getValues } = useFormContext<PlanFormInput>();
  const { fields, append, remove } = useFieldArray({ control, name: "plan.variants" });
  const fault = useFault("plan.variants");
  return (
    <div className="mt-4">
      {fields.length > 0 && (
        <ul aria-label="Variant runs" className="border-b border-rule">
          {fields.map((field, at) => (
            <li
              key={field.id}
              className="flex flex-wrap items-start gap-x-4 gap-y-1 border-t border-rule py-2"
            >
              <TextField
                size="normal"
                name={`plan.variants.${at}.text`}
                label="what differs"
                className="min-w-52 flex-1"
                suggestions={["port blocked", "grille on", "other preset"]}
              />
              <NumberField
                size="normal"
                name={`plan.variants.${at}.level_dB`}
                label="level, dB"
                className="w-24"
              />
              <Button
                tone="quiet"
                size="small"
                className="mt-[25px]"
                aria-label={`Remove variant run ${at + 1}`}
                onClick={() => remove(at)}
              >
                Remove
              </Button>
            </li>
          ))}
        </ul>
      )}
      {fault !== undefined && (
        <p role="alert" className="mt-2 text-small text-fault">
          {fault}
        </p>
      )}
      {fields.length < MOST && (
        <div className="mt-2.5 flex flex-wrap items-center gap-3">
          <Button
            size="small"
            onClick={() =>
              append({ text: "port blocked", level_dB: getValues("plan.levels.0.level_dB") ?? 76 })
            }
          >
            Add a variant run
          </Button>
          <span className="text-small text-ink-2">
            Port blocked, another setting: never mixed into the plain runs.
          </span>
        </div>
      )}
    </div>
  );
}
