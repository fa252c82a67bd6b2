import type { Metadata } from "next";
import { EngineScreen } from "@/components/lab/engine-screen";
import { getPageCaller } from "@/app/_server/page-caller";

export const metadata: Metadata = { title: "Engine and published values" };

export default async function EnginePage() {
  await getPageCaller();
  return <EngineScreen />;
}
