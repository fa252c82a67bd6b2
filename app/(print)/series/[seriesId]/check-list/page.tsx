import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { getDatabase } from "@/app/_server/database";
import { getPageCaller } from "@/app/_server/page-caller";
import { loadSeriesView } from "@/app/_server/views/series-view";
import { CheckListSheet } from "@/components/plan/check-list-sheet";
import { inLab } from "@/db/in-lab";
import { getLab } from "@/db/queries/labs";
import { idSchema } from "@/lib/api/common";
import { AppError } from "@/lib/errors/app-error";
import { labSettingsSchema } from "@/lib/labs/settings-schema";

export const metadata: Metadata = { title: "Capture check-list" };

/** One sheet to print, without the frame of the product. */
export default async function CheckListPage({
  params,
}: PageProps<"/series/[seriesId]/check-list">) {
  const [{ seriesId }, caller] = await Promise.all([params, getPageCaller()]);
  if (!idSchema.safeParse(seriesId).success) notFound();
  const sheet = await inLab(getDatabase(), caller, async (trx) => {
    const series = await loadSeriesView(trx, caller.labId, seriesId);
    const { settings } = await getLab(trx, caller.labId);
    return { series, rule: labSettingsSchema.parse(settings).exposure_rule };
  }).catch((error: unknown) => {
    if (error instanceof AppError && error.code === "not-found") notFound();
    throw error;
  });
  return <CheckListSheet {...sheet} />;
}
