import type { Metadata } from "next";
import { getPageCaller } from "@/app/_server/page-caller";
import { SummaryScreen } from "@/components/summary/summary-screen";
import { may } from "@/lib/roles/roles";

export const metadata: Metadata = { title: "Summary" };

export default async function SummaryPage({ params }: PageProps<"/series/[seriesId]/summary">) {
  const [{ seriesId }, caller] = await Promise.all([params, getPageCaller()]);
  return <SummaryScreen seriesId={seriesId} mayPublish={may(caller.roles, "publish")} />;
}
