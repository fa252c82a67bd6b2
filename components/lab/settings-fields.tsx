"use client";

import type { ReactNode } from "react";
import { get, useFormContext, type FieldPath } from "react-hook-form";
import { parseTimeZone, toClock } from "@/lib/time/time-words";
import { useNow } from "../frame/use-now";
import { Checkbox } from "../parts/checkbox";
import { Field, TextInput } from "../parts/field";
import { parseNumber } from "../plan/plan-form-schema";
import type { LabState } from "./settings-words";

interface NumberSettingProps {
  name: FieldPath<LabState>;
  /** Unit included. */
  label: string;
  hint?: ReactNode;
}

/** The fault of a field in words, once it has been left. */
function useFault(name: string): string | undefined {
  const { formState } = useFormContext<LabState>();
  const fault: { message?: string } | undefined = get(formState.errors, name);
  return fault?.message;
}

export function NumberSetting({ name, label, hint }: NumberSettingProps) {
  const { register } = useFormContext<LabState>();
  return (
    <Field label={label} hint={hint} error={useFault(name)}>
      {(control) => (
        <TextInput
          {...control}
          figures
          inputMode="decimal"
          autoComplete="off"
          {...register(name, { setValueAs: parseNumber })}
        />
      )}
    </Field>
  );
}

export function NameSetting() {
  const { register } = useFormContext<LabState>();
  return (
    <Field label="name" error={useFault("name")}>
      {(control) => <TextInput {...control} autoComplete="off" {...register("name")} />}
    </Field>
  );
}

/** Any zone that the browser knows; says what time it is there, so that a slip is seen. */
export function TimeZoneSetting() {
  const { register, watch } = useFormContext<LabState>();
  const now = useNow();
  const zone = parseTimeZone(watch("time_zone"));
  return (
    <Field
      label="time zone"
      error={useFault("time_zone")}
      hint={
        zone === null || now === null
          ? "Every time on the screens is told in it."
          : `It is ${toClock(now, zone)} there. Every time on the screens is told in it.`
      }
    >
      {(control) => (
        <>
          <TextInput
            {...control}
            figures
            autoComplete="off"
            spellCheck={false}
            list="time-zones"
            {...register("time_zone")}
          />
          <datalist id="time-zones">
            {Intl.supportedValuesOf("timeZone").map((name) => (
              <option key={name} value={name}>
                {name}
              </option>
            ))}
          </datalist>
        </>
      )}
    </Field>
  );
}

export function TwoPersonSetting() {
  const { register } = useFormContext<LabState>();
  return (
    <>
      <Checkbox {...register("settings.two_person_rule")} aria-describedby="two-person">
        Who signs off has not made the recordings
      </Checkbox>
      <p id="two-person" className="pl-[25px] text-small text-ink-2 max-md:-mt-2.5">
        With the rule off one person may do both, and the page then says so.
      </p>
    </>
  );
}
