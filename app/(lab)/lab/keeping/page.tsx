import type { Metadata } from "next";
import { getPageCallerWith } from "@/app/_server/page-caller";
import { KeepingScreen } from "@/components/lab/keeping-screen";

export const metadata: Metadata = { title: "Keeping" };

export default async function KeepingPage() {
  await getPageCallerWith("administer");
  return <KeepingScreen />;
}
