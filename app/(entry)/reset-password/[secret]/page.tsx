import type { Metadata } from "next";
import { findPageLink } from "@/app/_server/page-link";
import { ResetForm } from "@/components/entry/reset-form";
import { LinkButton } from "@/components/parts/button";
import { FaultBar } from "@/components/parts/fault-bar";
import { PASSWORD_MIN } from "@/lib/account/passwords";

/** The address is the secret: it is not handed on to other sites, nor kept by search engines. */
export const metadata: Metadata = {
  title: "New password",
  referrer: "no-referrer",
  robots: { index: false },
};

export default async function ResetPasswordPage({ params }: PageProps<"/reset-password/[secret]">) {
  const { secret } = await params;
  const link = await findPageLink(secret, "reset-password");
  if (link === null) {
    return (
      <FaultBar
        title="This link is no longer good"
        announce={false}
        actions={<LinkButton href="/forgotten-password">Ask for a new one</LinkButton>}
      >
        It was used, or its hour is over.
      </FaultBar>
    );
  }
  return (
    <>
      <h1 className="text-entry max-lg:text-[32px]/[38px]">New password</h1>
      <p className="mt-1.5 mb-6.5 text-[16px]/6 text-ink-2">
        Every session of this account ends; you are signed in here with the new one.
      </p>
      <ResetForm secret={secret} email={link.email} passwordMin={PASSWORD_MIN} />
    </>
  );
}
