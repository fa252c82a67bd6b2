import type { Metadata } from "next";
import { HowWeMeasure } from "@/components/how-we-measure/how-we-measure";
import report from "@/lib/checks/report.json";

export const metadata: Metadata = {
  title: "How we measure",
  description: "How Tidemark measures loudspeakers, and what its figures were checked against.",
};

export default function HowWeMeasurePage() {
  return <HowWeMeasure report={report} />;
}
