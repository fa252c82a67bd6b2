"use client";

import { QueryProvider } from "../queries/query-provider";
import { Button } from "../parts/button";
import { Field, TextInput } from "../parts/field";
import { formText } from "./form-text";
import { PasswordField } from "./password-field";
import { useSignIn } from "./use-sign-in";

interface SignInFormProps {
  /** Path of our own to go to afterwards. */
  next: string;
  /** Known from an invitation that was just accepted. */
  email?: string;
}

/** One form; after a refusal it says how many tries are left. */
export function SignInForm(props: SignInFormProps) {
  return (
    <QueryProvider>
      <Form {...props} />
    </QueryProvider>
  );
}

function Form({ next, email = "" }: SignInFormProps) {
  const entry = useSignIn(next);
  return (
    <form
      className="grid gap-[18px]"
      // Without script the password must not end up in the address.
      method="post"
      onSubmit={(event) => {
        event.preventDefault();
        const form = new FormData(event.currentTarget);
        entry.mutate({ email: formText(form, "email"), password: formText(form, "password") });
      }}
    >
      <Field label="email">
        {(control) => (
          <TextInput
            {...control}
            name="email"
            type="email"
            required
            autoComplete="username"
            defaultValue={email}
          />
        )}
      </Field>
      <PasswordField autoComplete="current-password" error={entry.error?.message} />
      <p role="alert" className="sr-only">
        {entry.error?.message}
      </p>
      <Button
        type="submit"
        tone="main"
        size="form"
        className="mt-1 w-full"
        busy={entry.isPending || entry.isSuccess}
      >
        Sign in
      </Button>
    </form>
  );
}
