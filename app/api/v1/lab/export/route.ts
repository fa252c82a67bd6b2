import { makeZip } from "client-zip";
import { getDatabase } from "@/app/_server/database";
import { handle } from "@/app/_server/handle";
import { exportLab as listEntries } from "@/app/_server/lab-export";
import { getStore } from "@/app/_server/storage";
import { getLab } from "@/db/queries/labs";
import { exportLab } from "@/lib/api/keeping";
import { toDisposition } from "@/lib/http/disposition";

export const GET = handle(exportLab, async ({ scope, inLab }) => {
  const { slug } = await inLab((trx) => getLab(trx, scope.labId));
  const folder = `${slug}_${new Date().toISOString().slice(0, 10)}`;
  const entries = listEntries({ db: getDatabase(), store: getStore(), scope }, folder);
  return new Response(makeZip(entries), {
    headers: {
      "content-type": "application/zip",
      "cache-control": "private, no-store, no-transform",
      "content-disposition": toDisposition(`${folder}.zip`),
    },
  });
});
