"use client";

import { useMutation } from "@tanstack/react-query";
import { resetPassword } from "@/lib/api/account-links";
import { ApiProblem, callApi } from "@/lib/api/client";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { Field, TextInput } from "../parts/field";
import { QueryProvider } from "../queries/query-provider";
import { formText } from "./form-text";
import { PasswordField } from "./password-field";
import { enter } from "./use-sign-in";

interface ResetFormProps {
  secret: string;
  /** Of the account; password managers keep the new password under it. */
  email: string;
  /** Fewest characters of a new password. */
  passwordMin: number;
}

/** Sets the new password and signs in with it. */
export function ResetForm(props: ResetFormProps) {
  return (
    <QueryProvider>
      <Form {...props} />
    </QueryProvider>
  );
}

function Form({ secret, email, passwordMin }: ResetFormProps) {
  const reset = useMutation({
    mutationFn: async (password: string) => {
      const account = await callApi(resetPassword, { body: { secret, password } });
      await enter({ email: account.email, password });
    },
    onSuccess: () => window.location.assign("/series"),
  });
  const weak = reset.error instanceof ApiProblem && reset.error.code === "password.weak";
  return (
    <form
      className="grid gap-[18px]"
      method="post"
      onSubmit={(event) => {
        event.preventDefault();
        reset.mutate(formText(new FormData(event.currentTarget), "password"));
      }}
    >
      {reset.error !== null && !weak && (
        <FaultBar title="The password was not set">{reset.error.message}</FaultBar>
      )}
      <Field label="email">
        {(control) => (
          <TextInput
            {...control}
            name="email"
            type="email"
            readOnly
            autoComplete="username"
            value={email}
          />
        )}
      </Field>
      <PasswordField
        label="new password"
        autoComplete="new-password"
        hint={`${passwordMin} characters or more.`}
        error={weak ? reset.error?.message : undefined}
      />
      <Button
        type="submit"
        tone="main"
        size="form"
        className="mt-1 w-full"
        busy={reset.isPending || reset.isSuccess}
      >
        Set the password
      </Button>
    </form>
  );
}
