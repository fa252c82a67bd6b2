import type { Metadata } from "next";
import { getPageCaller } from "@/app/_server/page-caller";
import { HistoryScreen } from "@/components/history/history-screen";
import { may } from "@/lib/roles/roles";

export const metadata: Metadata = { title: "History" };

export default async function HistoryPage({ params }: PageProps<"/series/[seriesId]/history">) {
  const [{ seriesId }, caller] = await Promise.all([params, getPageCaller()]);
  return <HistoryScreen seriesId={seriesId} mayCapture={may(caller.roles, "capture")} />;
}
