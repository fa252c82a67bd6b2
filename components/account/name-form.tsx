"use client";

import { useState } from "react";
import { nameSchema } from "@/lib/api/account";
import { Button } from "../parts/button";
import { Field, TextInput } from "../parts/field";
import { useUpdateAccount } from "../queries/people";

/** The name that stands by everything one does. */
export function NameForm({ name }: { name: string }) {
  const update = useUpdateAccount();
  const [text, setText] = useState(name);
  const [left, setLeft] = useState(false);
  const parsed = nameSchema.safeParse(text);
  const fault = parsed.success
    ? update.error?.message
    : left
      ? "Enter a name of up to 120 characters."
      : undefined;
  return (
    <form
      aria-label="Name"
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        setLeft(true);
        if (parsed.success) update.mutate({ name: parsed.data });
      }}
    >
      <div className="sm:w-1/2">
        <Field label="name" error={fault} hint="Stands by everything that you do, in every lab.">
          {(control) => (
            <TextInput
              {...control}
              autoComplete="name"
              value={text}
              onChange={(event) => {
                update.reset();
                setText(event.target.value);
              }}
              onBlur={() => setLeft(true)}
            />
          )}
        </Field>
      </div>
      <div className="mt-3 flex flex-wrap items-center gap-4">
        <Button type="submit" busy={update.isPending}>
          Save the name
        </Button>
        <output className="text-ink-2">{update.isSuccess ? "Saved." : ""}</output>
      </div>
    </form>
  );
}
