import type { Metadata } from "next";
import { getPageCaller } from "@/app/_server/page-caller";
import { SettingsScreen } from "@/components/lab/settings-screen";
import { getEnvironment } from "@/lib/config/environment";
import { may } from "@/lib/roles/roles";

export const metadata: Metadata = { title: "Settings of the lab" };

export default async function LabPage() {
  const caller = await getPageCaller();
  return (
    <SettingsScreen
      mayAdminister={may(caller.roles, "administer")}
      mostUploadMb={getEnvironment().maxUploadBytes / 1_000_000}
    />
  );
}
