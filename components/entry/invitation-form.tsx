"use client";

import { useMutation } from "@tanstack/react-query";
import { callApi } from "@/lib/api/client";
import { acceptInvitation, type OpenInvitation } from "@/lib/api/members";
import { QueryProvider } from "../queries/query-provider";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { Field, TextInput } from "../parts/field";
import { formText } from "./form-text";
import { PasswordField } from "./password-field";
import { enter } from "./use-sign-in";

interface InvitationFormProps {
  secret: string;
  invitation: OpenInvitation;
  /** Fewest characters of a new password. */
  passwordMin: number;
}

/** Accepts the invitation and signs in with what was just entered. */
export function InvitationForm(props: InvitationFormProps) {
  return (
    <QueryProvider>
      <Form {...props} />
    </QueryProvider>
  );
}

function Form({ secret, invitation, passwordMin }: InvitationFormProps) {
  const known = invitation.account_exists;
  const join = useMutation({
    mutationFn: async (form: FormData) => {
      const password = formText(form, "password");
      const name = formText(form, "name").trim();
      const { email } = await callApi(acceptInvitation, {
        body: { secret, password, ...(known ? {} : { name }) },
      });
      await enter({ email, password });
    },
    onSuccess: () => window.location.assign("/series"),
  });
  return (
    <form
      className="grid gap-[18px]"
      method="post"
      onSubmit={(event) => {
        event.preventDefault();
        join.mutate(new FormData(event.currentTarget));
      }}
    >
      {join.error !== null && (
        <FaultBar title="The invitation was not accepted">{join.error.message}</FaultBar>
      )}
      <Field label="email">
        {(control) => (
          <TextInput
            {...control}
            name="email"
            type="email"
            readOnly
            autoComplete="username"
            value={invitation.email}
          />
        )}
      </Field>
      {!known && (
        <Field label="your name">
          {(control) => (
            <TextInput
              {...control}
              name="name"
              required
              maxLength={120}
              autoComplete="name"
              defaultValue={invitation.name}
            />
          )}
        </Field>
      )}
      <PasswordField
        label={known ? "your password" : "choose a password"}
        autoComplete={known ? "current-password" : "new-password"}
        hint={known ? "This address has an account already." : `${passwordMin} characters or more.`}
      />
      <Button
        type="submit"
        tone="main"
        size="form"
        className="mt-1 w-full"
        busy={join.isPending || join.isSuccess}
      >
        Join {invitation.lab}
      </Button>
    </form>
  );
}
