import type { Metadata } from "next";
import { getPageCallerWith } from "@/app/_server/page-caller";
import { PageHead } from "@/components/frame/page-head";
import { LoudspeakerForm } from "@/components/loudspeakers/loudspeaker-form";

export const metadata: Metadata = { title: "New loudspeaker" };

export default async function NewLoudspeakerPage() {
  await getPageCallerWith("capture");
  return (
    <>
      <PageHead
        crumb={{ href: "/loudspeakers", label: "Loudspeakers", here: "new" }}
        title="New loudspeaker"
      />
      <div className="px-gutter pb-8 max-md:px-phone">
        <LoudspeakerForm loudspeaker={null} />
      </div>
    </>
  );
}
