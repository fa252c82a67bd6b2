import type { Metadata } from "next";
import { getPageCaller } from "@/app/_server/page-caller";
import { SeriesList } from "@/components/series-list/series-list";
import { may } from "@/lib/roles/roles";

export const metadata: Metadata = { title: "Series" };

export default async function SeriesPage() {
  const caller = await getPageCaller();
  return <SeriesList mayCapture={may(caller.roles, "capture")} />;
}
