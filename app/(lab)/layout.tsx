import { NuqsAdapter } from "nuqs/adapters/next/app";
import type { ReactNode } from "react";
import { getDatabase } from "@/app/_server/database";
import { getPageAccount } from "@/app/_server/page-caller";
import { getSessionView } from "@/app/_server/session-view";
import { AccountControl } from "@/components/frame/account-control";
import { LabSessionProvider } from "@/components/frame/lab-session";
import { toNavItems } from "@/components/frame/nav-items";
import { SiteHeader } from "@/components/frame/site-header";
import { ThemeKeeper } from "@/components/frame/theme-keeper";
import { QueryProvider } from "@/components/queries/query-provider";

/** The signed-in part. Each page asks for its caller itself; a layout is not drawn anew at every step. */
export default async function LabLayout({ children }: { children: ReactNode }) {
  const caller = await getPageAccount();
  const session = await getSessionView(getDatabase(), caller);
  return (
    <LabSessionProvider session={session}>
      <QueryProvider>
        <NuqsAdapter>
          <ThemeKeeper theme={session.account.theme} />
          <SiteHeader items={toNavItems(session.roles)} account={<AccountControl />} />
          <main id="content" className="mx-auto max-w-page">
            {children}
          </main>
        </NuqsAdapter>
      </QueryProvider>
    </LabSessionProvider>
  );
}
