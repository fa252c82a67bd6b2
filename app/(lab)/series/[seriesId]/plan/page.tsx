import type { Metadata } from "next";
import { getPageCaller } from "@/app/_server/page-caller";
import { PlanScreen } from "@/components/plan/plan-screen";
import { may } from "@/lib/roles/roles";

export const metadata: Metadata = { title: "Plan" };

export default async function PlanPage({ params }: PageProps<"/series/[seriesId]/plan">) {
  const [{ seriesId }, caller] = await Promise.all([params, getPageCaller()]);
  return <PlanScreen seriesId={seriesId} mayCapture={may(caller.roles, "capture")} />;
}
