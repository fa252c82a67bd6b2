"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useState } from "react";
import { Controller, useForm } from "react-hook-form";
import { z } from "zod";
import { ApiProblem } from "@/lib/api/client";
import { rolesSchema } from "@/lib/api/members";
import type { Token } from "@/lib/api/tokens";
import { useLabSession } from "../frame/lab-session";
import { RoleBoxes } from "../members/role-boxes";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { Field, Select, TextInput } from "../parts/field";
import { Sheet } from "../parts/section";
import { useCreateToken } from "../queries/people";
import { ShownOnce } from "./shown-once";
import { LIFETIMES } from "./token-words";

const FOR_EVER = "for-ever";
const formSchema = z.object({
  name: z.string().trim().min(1, "Enter a name.").max(80, "A name has up to 80 characters."),
  roles: rolesSchema,
  lifetime: z.string(),
});
type FormInput = z.input<typeof formSchema>;
type FormOutput = z.output<typeof formSchema>;

/** Name, roles, how long; then the token, once. */
export function TokenForm() {
  const { roles: own } = useLabSession();
  const create = useCreateToken();
  const [made, setMade] = useState<{ token: string; row: Token } | null>(null);
  const empty: FormInput = { name: "", roles: own.slice(0, 1), lifetime: "365" };
  const form = useForm<FormInput, unknown, FormOutput>({
    mode: "onTouched",
    defaultValues: empty,
    resolver: zodResolver(formSchema),
  });
  const { errors } = form.formState;

  const send = async ({ name, roles, lifetime }: FormOutput): Promise<void> => {
    const days = lifetime === FOR_EVER ? null : Number(lifetime);
    try {
      setMade(await create.mutateAsync({ name, roles, expires_in_days: days }));
      form.reset(empty);
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
    }
  };

  if (made !== null) {
    return (
      <ShownOnce
        title={`The token “${made.row.name}”`}
        label="token"
        secret={made.token}
        onDone={() => setMade(null)}
      >
        Copy it now: only its digest is kept, and it is not shown again. Whoever has it acts in your
        name, as {made.row.roles.join(", ")}.
      </ShownOnce>
    );
  }
  return (
    <Sheet>
      <h2 id="new-token">New token</h2>
      <form
        aria-labelledby="new-token"
        noValidate
        className="mt-2.5 grid gap-3.5"
        onSubmit={(event) => void form.handleSubmit(send)(event)}
      >
        <Field label="name" error={errors.name?.message} hint="What it is for: “bench computer”.">
          {(control) => <TextInput {...control} autoComplete="off" {...form.register("name")} />}
        </Field>
        <Controller
          control={form.control}
          name="roles"
          render={({ field }) => (
            <RoleBoxes
              legend="roles, of those that you hold"
              offered={own}
              value={field.value}
              onChange={field.onChange}
              error={errors.roles?.message}
            />
          )}
        />
        <Field label="good for">
          {(control) => (
            <Select {...control} {...form.register("lifetime")}>
              {LIFETIMES.map(([days, words]) => (
                <option key={words} value={days ?? FOR_EVER}>
                  {words}
                </option>
              ))}
            </Select>
          )}
        </Field>
        {create.error !== null && (
          <FaultBar title="No token was made">{create.error.message}</FaultBar>
        )}
        <div>
          <Button type="submit" tone="main" busy={form.formState.isSubmitting}>
            Make the token
          </Button>
        </div>
      </form>
    </Sheet>
  );
}
