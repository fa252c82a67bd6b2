"use client";

import { useRef } from "react";
import { ApiProblem } from "@/lib/api/client";
import { formText } from "../entry/form-text";
import { PasswordField } from "../entry/password-field";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { useChangePassword } from "../queries/people";

/** The sentence at the field that it belongs to; null where it belongs to none. */
function toFieldFault(error: Error | null): { current?: string; next?: string } | null {
  if (!(error instanceof ApiProblem)) return null;
  if (error.code === "auth.wrong") return { current: "This is not your present password." };
  if (error.code === "password.weak") return { next: error.message };
  return null;
}

/** A new password; every other session ends with the old one. */
export function PasswordForm({ passwordMin }: { passwordMin: number }) {
  const change = useChangePassword();
  const ref = useRef<HTMLFormElement>(null);
  const fault = toFieldFault(change.error);
  return (
    <form
      ref={ref}
      aria-label="Password"
      method="post"
      onSubmit={(event) => {
        event.preventDefault();
        const form = new FormData(event.currentTarget);
        change.mutate(
          { current: formText(form, "current"), next: formText(form, "next") },
          { onSuccess: () => ref.current?.reset() },
        );
      }}
    >
      <div className="grid gap-x-3.5 gap-y-3 sm:grid-cols-2">
        <PasswordField
          label="present password"
          name="current"
          autoComplete="current-password"
          error={fault?.current}
        />
        <PasswordField
          label="new password"
          name="next"
          autoComplete="new-password"
          error={fault?.next}
          hint={`${passwordMin} characters or more.`}
        />
      </div>
      {change.error !== null && fault === null && (
        <FaultBar className="mt-3" title="The password was not changed">
          {change.error.message}
        </FaultBar>
      )}
      <div className="mt-3 flex flex-wrap items-center gap-4">
        <Button type="submit" busy={change.isPending}>
          Change the password
        </Button>
        <p className="text-small text-ink-2">
          <output>{change.isSuccess ? sayEnded(change.data.ended_sessions) : ""}</output>
          {!change.isSuccess && "Every other session ends."}
        </p>
      </div>
    </form>
  );
}

function sayEnded(sessions: number): string {
  if (sessions === 0) return "Changed. There was no other session.";
  return sessions === 1
    ? "Changed. One other session has ended."
    : `Changed. ${sessions} other sessions have ended.`;
}
