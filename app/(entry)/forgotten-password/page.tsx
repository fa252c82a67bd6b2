import type { Metadata } from "next";
import { findLocalMailbox } from "@/app/_server/local-mailbox";
import { ForgottenForm } from "@/components/entry/forgotten-form";

export const metadata: Metadata = { title: "Forgotten password" };
// Where mail goes is known when it runs, not when it is built.
export const dynamic = "force-dynamic";

export default function ForgottenPasswordPage() {
  return (
    <>
      <h1 className="text-entry max-lg:text-[32px]/[38px]">Forgotten password</h1>
      <p className="mt-1.5 mb-6.5 text-[16px]/6 text-ink-2">
        We mail you a link by which you set a new one.
      </p>
      <ForgottenForm mailboxUrl={findLocalMailbox()} />
    </>
  );
}
