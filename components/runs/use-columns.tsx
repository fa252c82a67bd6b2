"use client";

import dynamic from "next/dynamic";
import { useState, type ReactNode } from "react";
import { isTableName } from "@/lib/series/table-columns";
import type { ChosenFile } from "./upload-controller";

/** The readers of tables come when a table does. */
const ColumnsDialog = dynamic(() => import("./columns-dialog").then((m) => m.ColumnsDialog), {
  ssr: false,
});

/**
 * Puts the question for the columns of tables between choosing files and sending them.
 *
 * @param send takes the files once it is answered; recordings alone go at once.
 */
export function useColumns(send: (files: readonly ChosenFile[]) => void): {
  ask: (files: readonly ChosenFile[]) => void;
  dialog: ReactNode;
} {
  const [asked, setAsked] = useState<readonly ChosenFile[] | null>(null);
  const isTable = ({ file }: ChosenFile): boolean => isTableName(file.name);
  const tables = asked?.filter(isTable) ?? [];
  return {
    ask: (files) => {
      if (files.some(isTable)) setAsked(files);
      else send(files);
    },
    dialog: asked !== null && (
      <ColumnsDialog
        files={tables.map(({ file }) => file)}
        onChosen={(choices) => {
          setAsked(null);
          send(
            asked.map((chosen) => {
              const columns = choices[tables.indexOf(chosen)] ?? null;
              return columns === null ? chosen : { ...chosen, columns };
            }),
          );
        }}
        onClose={() => setAsked(null)}
      />
    ),
  };
}
