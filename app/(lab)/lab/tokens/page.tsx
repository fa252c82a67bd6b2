import type { Metadata } from "next";
import { getPageCaller } from "@/app/_server/page-caller";
import { TokensScreen } from "@/components/lab/tokens-screen";
import { getEnvironment } from "@/lib/config/environment";
import { may } from "@/lib/roles/roles";

export const metadata: Metadata = { title: "Tokens" };

export default async function TokensPage() {
  const caller = await getPageCaller();
  return (
    <TokensScreen
      seesAll={may(caller.roles, "administer")}
      publicUrl={getEnvironment().publicUrl}
    />
  );
}
