"use client";

import Link from "next/link";
import { useLabSession } from "../frame/lab-session";
import { PageHead } from "../frame/page-head";
import { ThemeSwitch } from "../frame/theme-switch";
import { FormSection } from "../parts/section";
import { useUpdateAccount } from "../queries/people";
import { AddressForm } from "./address-form";
import { LabChoices } from "./lab-choices";
import { NameForm } from "./name-form";
import { NoticeChoices } from "./notice-choices";
import { PasswordForm } from "./password-form";
import { SessionList } from "./session-list";

interface AccountScreenProps {
  passwordMin: number;
  /** Of the local mailbox; null where mail goes out. */
  mailboxUrl: string | null;
}

/** One's own account; it works without a lab, too. */
export function AccountScreen({ passwordMin, mailboxUrl }: AccountScreenProps) {
  const { account, lab, roles } = useLabSession();
  const theme = useUpdateAccount();
  return (
    <>
      <PageHead title="Account" line={account.email} />
      <div className="max-w-[908px] px-gutter pb-10 max-md:px-phone">
        <FormSection title="You">
          <NameForm name={account.name} />
        </FormSection>
        <FormSection title="Address">
          <AddressForm email={account.email} mailboxUrl={mailboxUrl} />
        </FormSection>
        <FormSection title="Labs">
          <LabChoices />
          {lab !== null && (
            <p className="mt-2 text-small text-ink-2">
              In {lab.name} you are {roles.join(", ")}; times are told in {lab.time_zone}.{" "}
              <Link href="/lab/tokens">Tokens for scripts</Link>
            </p>
          )}
        </FormSection>
        {lab !== null && (
          <FormSection title="Notices">
            <NoticeChoices lab={lab.name} />
          </FormSection>
        )}
        <FormSection title="Password">
          <PasswordForm passwordMin={passwordMin} />
        </FormSection>
        <FormSection title="Sessions">
          <SessionList />
        </FormSection>
        <FormSection title="Theme">
          <ThemeSwitch value={account.theme} onChange={(next) => theme.mutate({ theme: next })} />
          {theme.isError && (
            <p role="alert" className="mt-2 text-fault">
              The theme shows here, but was not saved. {theme.error.message}
            </p>
          )}
        </FormSection>
      </div>
    </>
  );
}
