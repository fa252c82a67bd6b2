import type { Metadata } from "next";
import { getDatabase } from "@/app/_server/database";
import { getOpenInvitation } from "@/app/_server/invitations";
import { InvitationForm } from "@/components/entry/invitation-form";
import { LinkButton } from "@/components/parts/button";
import { FaultBar } from "@/components/parts/fault-bar";
import { PASSWORD_MIN } from "@/lib/account/passwords";
import type { OpenInvitation } from "@/lib/api/members";
import { AppError } from "@/lib/errors/app-error";

/** The address is the secret: it is not handed on to other sites, nor kept by search engines. */
export const metadata: Metadata = {
  title: "Invitation",
  referrer: "no-referrer",
  robots: { index: false },
};

async function findOpenInvitation(secret: string): Promise<OpenInvitation | null> {
  try {
    return await getOpenInvitation(getDatabase(), secret);
  } catch (error) {
    if (error instanceof AppError && error.code === "invitation.invalid") return null;
    throw error;
  }
}

export default async function InvitationPage({ params }: PageProps<"/invitation/[secret]">) {
  const { secret } = await params;
  const invitation = await findOpenInvitation(secret);
  if (invitation === null) {
    return (
      <FaultBar
        title="This invitation is no longer good"
        announce={false}
        actions={<LinkButton href="/sign-in">Go to sign-in</LinkButton>}
      >
        It was used, was withdrawn or has expired. Ask the admin of the lab for a new one.
      </FaultBar>
    );
  }
  return (
    <>
      <h1 className="text-entry max-lg:text-[32px]/[38px]">Join {invitation.lab}</h1>
      <p className="mt-1.5 mb-6.5 text-[16px]/6 text-ink-2">
        You are invited as {invitation.roles.join(", ")}.
      </p>
      <InvitationForm secret={secret} invitation={invitation} passwordMin={PASSWORD_MIN} />
    </>
  );
}
