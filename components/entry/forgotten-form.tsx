"use client";

import { useMutation } from "@tanstack/react-query";
import { requestPasswordReset } from "@/lib/api/account-links";
import { callApi } from "@/lib/api/client";
import { Button, LinkButton } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { Field, TextInput } from "../parts/field";
import { LocalMailbox } from "../parts/local-mailbox";
import { QueryProvider } from "../queries/query-provider";
import { formText } from "./form-text";

interface ForgottenFormProps {
  /** Of the local mailbox; null where mail goes out. */
  mailboxUrl: string | null;
}

/** Asks for the link; what it says afterwards does not tell whether the address has an account. */
export function ForgottenForm(props: ForgottenFormProps) {
  return (
    <QueryProvider>
      <div aria-live="polite">
        <Form {...props} />
      </div>
    </QueryProvider>
  );
}

function Form({ mailboxUrl }: ForgottenFormProps) {
  const ask = useMutation({
    mutationFn: (email: string) => callApi(requestPasswordReset, { body: { email } }),
  });
  if (ask.isSuccess) {
    return (
      <section className="border-l-4 border-ink py-0.5 pl-4">
        <h2 className="text-section">Look into your mail</h2>
        <p className="mt-1 max-w-prose">
          If an account has the address <b className="break-all">{ask.variables}</b>, a link is on
          its way. It is good for one hour.
          <LocalMailbox url={mailboxUrl} />
        </p>
        <div className="mt-3">
          <LinkButton href="/sign-in">Go to sign-in</LinkButton>
        </div>
      </section>
    );
  }
  return (
    <form
      className="grid gap-[18px]"
      method="post"
      onSubmit={(event) => {
        event.preventDefault();
        ask.mutate(formText(new FormData(event.currentTarget), "email").trim());
      }}
    >
      {ask.error !== null && (
        <FaultBar title="The link was not asked for">{ask.error.message}</FaultBar>
      )}
      <Field label="email" hint="The address that you sign in with.">
        {(control) => (
          <TextInput {...control} name="email" type="email" required autoComplete="username" />
        )}
      </Field>
      <Button type="submit" tone="main" size="form" className="mt-1 w-full" busy={ask.isPending}>
        Send the link
      </Button>
    </form>
  );
}
