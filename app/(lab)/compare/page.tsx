import type { Metadata } from "next";
import { getPageCaller } from "@/app/_server/page-caller";
import { CompareScreen } from "@/components/compare/compare-screen";

export const metadata: Metadata = { title: "Compare" };

export default async function ComparePage() {
  await getPageCaller();
  return <CompareScreen />;
}
