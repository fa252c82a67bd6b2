import type { Metadata } from "next";
import { findLocalMailbox } from "@/app/_server/local-mailbox";
import { getPageAccount } from "@/app/_server/page-caller";
import { AccountScreen } from "@/components/account/account-screen";
import { PASSWORD_MIN } from "@/lib/account/passwords";

export const metadata: Metadata = { title: "Account" };

export default async function AccountPage() {
  await getPageAccount();
  return <AccountScreen passwordMin={PASSWORD_MIN} mailboxUrl={findLocalMailbox()} />;
}
