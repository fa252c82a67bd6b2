import type { Metadata } from "next";
import { getPageCaller } from "@/app/_server/page-caller";
import { OutputLimitView } from "@/components/output-limit/output-limit-view";
import { may } from "@/lib/roles/roles";

export const metadata: Metadata = { title: "Output limit" };

export default async function OutputLimitPage({
  params,
}: PageProps<"/series/[seriesId]/output-limit">) {
  const [{ seriesId }, caller] = await Promise.all([params, getPageCaller()]);
  return (
    <div className="px-gutter pb-9 max-md:px-phone">
      <OutputLimitView
        seriesId={seriesId}
        mayAnalyse={may(caller.roles, "analyse")}
        mayDecide={may(caller.roles, "decide")}
      />
    </div>
  );
}
