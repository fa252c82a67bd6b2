"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useState } from "react";
import { Controller, useForm } from "react-hook-form";
import { z } from "zod";
import { emailSchema } from "@/lib/api/account";
import { ApiProblem } from "@/lib/api/client";
import { rolesSchema, type Invitation } from "@/lib/api/members";
import { Moment } from "../frame/moment";
import { ShownOnce } from "../lab/shown-once";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { Field, TextInput } from "../parts/field";
import { LocalMailbox } from "../parts/local-mailbox";
import { Sheet } from "../parts/section";
import { useCreateInvitation } from "../queries/people";
import { RoleBoxes } from "./role-boxes";

const formSchema = z.object({
  email: emailSchema,
  name: z.string().trim().max(120, "A name has up to 120 characters."),
  roles: rolesSchema,
});
type FormInput = z.input<typeof formSchema>;
type FormOutput = z.output<typeof formSchema>;

const EMPTY: FormInput = { email: "", name: "", roles: ["tester"] };

/** Address and roles; then the link, once. @param props.mailboxUrl null where mail goes out */
export function InviteForm({ mailboxUrl }: { mailboxUrl: string | null }) {
  const create = useCreateInvitation();
  const [made, setMade] = useState<{ invitation: Invitation; link: string } | null>(null);
  const form = useForm<FormInput, unknown, FormOutput>({
    mode: "onTouched",
    defaultValues: EMPTY,
    resolver: zodResolver(formSchema),
  });
  const { errors } = form.formState;

  const send = async (values: FormOutput): Promise<void> => {
    try {
      setMade(await create.mutateAsync(values));
      form.reset(EMPTY);
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
    }
  };

  if (made !== null) {
    const { invitation, link } = made;
    return (
      <ShownOnce
        title={`The link for ${invitation.email}`}
        label="one-time link"
        secret={link}
        onDone={() => setMade(null)}
      >
        It goes to them by mail, too. It can be used once, until{" "}
        <Moment at={invitation.expires_at} as="day" />, and is not shown again.
        <LocalMailbox url={mailboxUrl} />
      </ShownOnce>
    );
  }
  return (
    <Sheet>
      <h2 id="invite">Invite somebody</h2>
      <form
        aria-labelledby="invite"
        noValidate
        className="mt-2.5 grid gap-3.5"
        onSubmit={(event) => void form.handleSubmit(send)(event)}
      >
        <Field label="email" error={errors.email?.message} hint="They will sign in with it.">
          {(control) => (
            <TextInput {...control} type="email" autoComplete="off" {...form.register("email")} />
          )}
        </Field>
        <Field
          label="name"
          error={errors.name?.message}
          hint="May be left empty: who joins enters it."
        >
          {(control) => <TextInput {...control} autoComplete="off" {...form.register("name")} />}
        </Field>
        <Controller
          control={form.control}
          name="roles"
          render={({ field }) => (
            <RoleBoxes
              legend="roles"
              explained
              value={field.value}
              onChange={field.onChange}
              error={errors.roles?.message}
            />
          )}
        />
        {create.error !== null && (
          <FaultBar title="Nobody was invited">{create.error.message}</FaultBar>
        )}
        <div>
          <Button type="submit" tone="main" busy={form.formState.isSubmitting}>
            Make the invitation
          </Button>
        </div>
      </form>
    </Sheet>
  );
}
