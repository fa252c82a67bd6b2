import type { Metadata } from "next";
import { getPageCaller } from "@/app/_server/page-caller";
import { RunsScreen } from "@/components/runs/runs-screen";
import { may } from "@/lib/roles/roles";

export const metadata: Metadata = { title: "Runs" };

export default async function RunsPage({ params }: PageProps<"/series/[seriesId]/runs">) {
  const [{ seriesId }, { roles }] = await Promise.all([params, getPageCaller()]);
  return (
    <RunsScreen
      seriesId={seriesId}
      mayCapture={may(roles, "capture")}
      mayAnalyse={may(roles, "analyse")}
    />
  );
}
