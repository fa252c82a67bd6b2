"use client";

import { useState } from "react";
import { Field, TextInput } from "../parts/field";

interface PasswordFieldProps {
  label?: string;
  name?: string;
  autoComplete: "current-password" | "new-password";
  error?: string | undefined;
  hint?: string;
}

/** A password that can be looked at. */
export function PasswordField({
  label = "password",
  name = "password",
  autoComplete,
  error,
  hint,
}: PasswordFieldProps) {
  const [shown, setShown] = useState(false);
  return (
    <Field
      label={label}
      error={error}
      hint={hint}
      aside={
        <button
          type="button"
          aria-pressed={shown}
          onClick={() => setShown(!shown)}
          className="figures text-label underline underline-offset-3 max-md:-my-3 max-md:min-h-11 max-md:px-2"
        >
          {shown ? "hide" : "show"}
        </button>
      }
    >
      {(control) => (
        <TextInput
          {...control}
          name={name}
          type={shown ? "text" : "password"}
          required
          autoComplete={autoComplete}
        />
      )}
    </Field>
  );
}
