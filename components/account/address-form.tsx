"use client";

import { useState } from "react";
import { ApiProblem } from "@/lib/api/client";
import { formText } from "../entry/form-text";
import { PasswordField } from "../entry/password-field";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { Field, TextInput } from "../parts/field";
import { LocalMailbox } from "../parts/local-mailbox";
import { useChangeAddress } from "../queries/mail";

/** The sentence at the field that it belongs to; null where it belongs to none. */
function toFieldFault(error: Error | null): { email?: string; password?: string } | null {
  if (!(error instanceof ApiProblem)) return null;
  if (error.code === "auth.wrong") return { password: "This is not your present password." };
  if (error.code === "request.invalid") {
    return { email: error.fieldMessage("email") === undefined ? error.message : sayAddress(error) };
  }
  return null;
}

const sayAddress = (error: ApiProblem): string =>
  error.fieldMessage("email") === "is your present address"
    ? "You sign in with this address already."
    : "Enter an address such as name@lab.example.";

interface AddressFormProps {
  email: string;
  /** Of the local mailbox; null where mail goes out. */
  mailboxUrl: string | null;
}

/** The address that one signs in with, and the way to another: a link goes there first. */
export function AddressForm({ email, mailboxUrl }: AddressFormProps) {
  const change = useChangeAddress();
  const [open, setOpen] = useState(false);
  const fault = toFieldFault(change.error);
  if (!open) {
    return (
      <div className="flex flex-wrap items-center gap-x-5 gap-y-2">
        <span className="figures min-w-0 text-figure break-all">{email}</span>
        <Button
          size="small"
          onClick={() => {
            change.reset();
            setOpen(true);
          }}
        >
          Change the address
        </Button>
        <output className="basis-full text-ink-2 empty:hidden">
          {change.isSuccess && (
            <>
              A link went to {change.variables.email}. Until you open it, this one stays.
              <LocalMailbox url={mailboxUrl} />
            </>
          )}
        </output>
      </div>
    );
  }
  return (
    <form
      aria-label="Address"
      noValidate
      method="post"
      onSubmit={(event) => {
        event.preventDefault();
        const form = new FormData(event.currentTarget);
        change.mutate(
          { email: formText(form, "email").trim(), password: formText(form, "password") },
          { onSuccess: () => setOpen(false) },
        );
      }}
    >
      <div className="grid gap-x-3.5 gap-y-3 sm:grid-cols-2">
        <Field
          label="new address"
          error={fault?.email}
          hint={`We mail a link there; until you open it, ${email} stays.`}
        >
          {(control) => (
            <TextInput {...control} name="email" type="email" autoComplete="email" required />
          )}
        </Field>
        <PasswordField
          label="your password"
          autoComplete="current-password"
          error={fault?.password}
        />
      </div>
      {change.error !== null && fault === null && (
        <FaultBar className="mt-3" title="The address was not changed">
          {change.error.message}
        </FaultBar>
      )}
      <div className="mt-3 flex flex-wrap items-center gap-2.5">
        <Button type="submit" busy={change.isPending}>
          Send the link
        </Button>
        <Button tone="quiet" onClick={() => setOpen(false)}>
          Keep the address
        </Button>
      </div>
    </form>
  );
}
