import { SeriesFrame } from "@/components/series/series-frame";

export default async function SeriesLayout({
  params,
  children,
}: LayoutProps<"/series/[seriesId]">) {
  const { seriesId } = await params;
  return <SeriesFrame seriesId={seriesId}>{children}</SeriesFrame>;
}
