import { notFound, redirect } from "next/navigation";
import { getDatabase } from "@/app/_server/database";
import { getPageCaller } from "@/app/_server/page-caller";
import { toRowHref } from "@/components/series-list/row-href";
import { inLab } from "@/db/in-lab";
import { getSeries } from "@/db/queries/series";
import { idSchema } from "@/lib/api/common";

/** On to the view that its state asks for. */
export default async function SeriesHome({ params }: PageProps<"/series/[seriesId]">) {
  const [{ seriesId }, caller] = await Promise.all([params, getPageCaller()]);
  if (!idSchema.safeParse(seriesId).success) notFound();
  const series = await inLab(getDatabase(), caller, (trx) =>
    getSeries(trx, caller.labId, seriesId),
  );
  redirect(toRowHref(series));
}
