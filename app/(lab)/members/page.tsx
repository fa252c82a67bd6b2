import type { Metadata } from "next";
import { findLocalMailbox } from "@/app/_server/local-mailbox";
import { getPageCaller } from "@/app/_server/page-caller";
import { MembersScreen } from "@/components/members/members-screen";
import { may } from "@/lib/roles/roles";

export const metadata: Metadata = { title: "Members" };

export default async function MembersPage() {
  const caller = await getPageCaller();
  return (
    <MembersScreen
      mayAdminister={may(caller.roles, "administer")}
      mailboxUrl={findLocalMailbox()}
    />
  );
}
