"use client";

import type { ReactNode } from "react";
import { get, useController, useFormContext, type FieldPath } from "react-hook-form";
import { Field, Select, TextInput } from "../parts/field";
import { parseNumber, type PlanFormInput } from "./plan-form-schema";

/** In a list the first row carries the labels for the eye; the others keep theirs for readers. */
export const LABEL_FOR_READERS = "[&>div:first-child]:sr-only";
export const LABEL_FROM_SM = "max-sm:[&>div:first-child]:sr-only";

type PlanPath = FieldPath<PlanFormInput>;

interface FormFieldProps {
  name: PlanPath;
  /** normal: in the rows of a list. */
  size?: "normal" | "form";
  label: ReactNode;
  hint?: ReactNode;
  className?: string;
}

interface FaultOfField {
  message?: string;
  root?: { message?: string };
}

/** The fault of a field in words, once it has been left. */
export function useFault(name: string): string | undefined {
  const { formState } = useFormContext();
  const fault: FaultOfField | undefined = get(formState.errors, name);
  return fault?.message ?? fault?.root?.message;
}

/** A line of words, or of figures (serial number, firmware). */
export function TextField({
  figures = false,
  suggestions,
  ...field
}: FormFieldProps & { figures?: boolean; suggestions?: readonly string[] }) {
  const { register } = useFormContext<PlanFormInput>();
  const error = useFault(field.name);
  const listId = `${field.name.replaceAll(".", "-")}-suggestions`;
  return (
    <Field label={field.label} hint={field.hint} error={error} className={field.className}>
      {(control) => (
        <>
          <TextInput
            {...control}
            figures={figures}
            size={field.size}
            autoComplete="off"
            list={suggestions === undefined ? undefined : listId}
            {...register(field.name)}
          />
          {suggestions !== undefined && (
            <datalist id={listId}>
              {suggestions.map((word) => (
                <option key={word} value={word}>
                  {word}
                </option>
              ))}
            </datalist>
          )}
        </>
      )}
    </Field>
  );
}

const parseOptionalNumber = (text: unknown): number | undefined => parseNumber(text) ?? undefined;

/** A number as people write it; empty where it may be. `optional`: the schema wants it left out then. */
export function NumberField({
  optional = false,
  ...field
}: FormFieldProps & { optional?: boolean }) {
  const { register } = useFormContext<PlanFormInput>();
  const error = useFault(field.name);
  return (
    <Field label={field.label} hint={field.hint} error={error} className={field.className}>
      {(control) => (
        <TextInput
          {...control}
          figures
          size={field.size}
          inputMode="decimal"
          autoComplete="off"
          {...register(field.name, { setValueAs: optional ? parseOptionalNumber : parseNumber })}
        />
      )}
    </Field>
  );
}

interface ChoiceFieldProps extends FormFieldProps {
  choices: readonly (readonly [value: string, words: string])[];
  figures?: boolean;
  /** The schema wants a number. */
  numbers?: boolean;
}

const toChoice = (value: unknown): string =>
  typeof value === "string" || typeof value === "number" ? String(value) : "";

/** One of a closed list. */
export function ChoiceField({
  choices,
  figures = false,
  numbers = false,
  ...field
}: ChoiceFieldProps) {
  const { control } = useFormContext<PlanFormInput>();
  const { field: input } = useController({ control, name: field.name });
  const error = useFault(field.name);
  return (
    <Field label={field.label} hint={field.hint} error={error} className={field.className}>
      {(props) => (
        <Select
          {...props}
          ref={input.ref}
          figures={figures}
          name={input.name}
          value={toChoice(input.value)}
          onBlur={input.onBlur}
          onChange={(event) =>
            input.onChange(numbers ? Number(event.target.value) : event.target.value)
          }
        >
          {choices.map(([value, words]) => (
            <option key={value} value={value}>
              {words}
            </option>
          ))}
        </Select>
      )}
    </Field>
  );
}

/** Three fields in a row on a desk, one under the other on a phone. */
export function FieldGrid({ children, columns = 3 }: { children: ReactNode; columns?: 3 | 4 }) {
  return (
    <div
      className={`grid gap-x-3.5 gap-y-3 ${
        columns === 4 ? "grid-cols-2 sm:grid-cols-4" : "sm:grid-cols-3"
      }`}
    >
      {children}
    </div>
  );
}

/** A sentence under the fields of a section. */
export function SectionHint({ children }: { children: ReactNode }) {
  return <p className="mt-2.5 max-w-prose text-small text-ink-2">{children}</p>;
}
