import type { Metadata } from "next";
import { getPageCallerWith } from "@/app/_server/page-caller";
import { PageHead } from "@/components/frame/page-head";
import { LinkButton } from "@/components/parts/button";
import { NewSeries } from "@/components/plan/plan-screen";
import { idSchema } from "@/lib/api/common";

export const metadata: Metadata = { title: "New series" };

export default async function NewSeriesPage({ searchParams }: PageProps<"/series/new">) {
  const [{ loudspeaker }] = await Promise.all([searchParams, getPageCallerWith("capture")]);
  const picked = idSchema.safeParse(loudspeaker);
  return (
    <>
      <PageHead
        crumb={{ href: "/series", label: "Series", here: "new" }}
        title="New series"
        line="nothing saved yet"
        aside={<LinkButton href="/series/new/folder">From a folder</LinkButton>}
      />
      <NewSeries loudspeakerId={picked.success ? picked.data : null} />
    </>
  );
}
