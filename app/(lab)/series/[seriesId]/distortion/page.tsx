import type { Metadata } from "next";
import { getPageCaller } from "@/app/_server/page-caller";
import { DistortionView } from "@/components/distortion/distortion-view";

export const metadata: Metadata = { title: "Distortion" };

export default async function DistortionPage({
  params,
}: PageProps<"/series/[seriesId]/distortion">) {
  const [{ seriesId }] = await Promise.all([params, getPageCaller()]);
  return (
    <div className="px-gutter pb-9 max-md:px-phone">
      <DistortionView seriesId={seriesId} />
    </div>
  );
}
