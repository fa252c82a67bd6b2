import type { Metadata } from "next";
import { getPageCallerWith } from "@/app/_server/page-caller";
import { TrailScreen } from "@/components/lab/trail-screen";

export const metadata: Metadata = { title: "Trail of the lab" };

export default async function TrailPage() {
  await getPageCallerWith("administer");
  return <TrailScreen />;
}
