"use client";

import { useQuery } from "@tanstack/react-query";
import { useState } from "react";
import { previewTable, type TablePreview } from "@/lib/audio/preview-table";
import { formatCount } from "@/lib/charts/format";
import { MEANINGS, toChoice, toMeanings, type Meaning } from "@/lib/runs/column-meanings";
import type { ColumnChoice } from "@/lib/series/table-columns";
import { Button } from "../parts/button";
import { Dialog } from "../parts/dialog";
import { Select } from "../parts/field";
import { NoValue, Table, TableFrame, Td, Th } from "../parts/table";

interface ColumnsDialogProps {
  /** The tables among the chosen files, asked for one after the other. */
  files: readonly File[];
  /** @param choices [files] null where the head tells. */
  onChosen: (choices: (ColumnChoice | null)[]) => void;
  onClose: () => void;
}

/** Which column of a table holds what: as its head tells, or by a person's word, beside the first rows. */
export function ColumnsDialog({ files, onChosen, onClose }: ColumnsDialogProps) {
  const [choices, setChoices] = useState<(ColumnChoice | null)[]>([]);
  const file = files[choices.length];
  if (file === undefined) return null;
  const choose = (choice: ColumnChoice | null): void => {
    const next = [...choices, choice];
    if (next.length === files.length) onChosen(next);
    else setChoices(next);
  };
  return (
    <OneTable
      key={choices.length}
      file={file}
      count={files.length > 1 ? `${choices.length + 1} of ${files.length}` : null}
      last={choices.length === files.length - 1}
      onChosen={choose}
      onClose={onClose}
    />
  );
}

interface OneTableProps {
  file: File;
  count: string | null;
  last: boolean;
  onChosen: (choice: ColumnChoice | null) => void;
  onClose: () => void;
}

function OneTable({ file, count, last, onChosen, onClose }: OneTableProps) {
  const look = useQuery({
    queryKey: ["table preview", file.name, file.size, file.lastModified],
    queryFn: async () => previewTable(new Uint8Array(await file.arrayBuffer()), file.name),
    gcTime: 0,
    retry: false,
  });
  const [changed, setChanged] = useState<Meaning[] | null>(null);
  const preview = look.data;
  const meanings = changed ?? toMeanings(preview?.recognised ?? null, preview?.columns ?? 0);
  const { choice, fault } = toChoice(meanings);
  const words = last ? "Send" : "Next table";
  return (
    <Dialog
      open
      onClose={onClose}
      title={count === null ? "What is in this table?" : `What is in this table? (${count})`}
      actions={
        preview !== undefined && (
          <Button
            tone="main"
            disabled={choice === null}
            onClick={() => onChosen(changed === null ? null : choice)}
          >
            {words}
          </Button>
        )
      }
    >
      <p>
        <span className="figures text-figure break-all">{file.name}</span>
        {preview !== undefined && `, ${formatCount(preview.rows)} rows; the first ones:`}
      </p>
      {look.isError && (
        <p role="alert" className="mt-2 text-fault">
          {look.error.message} Export the table as text with a column for the frequency and one for
          the level.
        </p>
      )}
      {preview !== undefined && (
        <>
          <Preview
            preview={preview}
            meanings={meanings}
            onChange={(column, meaning) => setChanged(meanings.with(column, meaning))}
          />
          <output className="mt-2 block text-small">
            {fault ??
              "Levels are taken as dB SPL at 1 m. Noise, clipping and latency are not known of a table."}
          </output>
        </>
      )}
    </Dialog>
  );
}

interface PreviewProps {
  preview: TablePreview;
  meanings: readonly Meaning[];
  onChange: (column: number, meaning: Meaning) => void;
}

function Preview({ preview, meanings, onChange }: PreviewProps) {
  const { head, columns, first } = preview;
  const at = Array.from({ length: columns }, (_, column) => column);
  return (
    <TableFrame label="First rows of the table" className="mt-2">
      <Table>
        <thead>
          <tr>
            {at.map((column) => (
              <Th key={column}>
                <Select
                  size="normal"
                  figures
                  className="min-w-[150px]"
                  aria-label={`Column ${column + 1}${head[column] === undefined ? "" : `, “${head[column]}”`}`}
                  value={meanings[column]}
                  onChange={(event) => onChange(column, event.target.value)}
                >
                  {MEANINGS.map(({ meaning, words }) => (
                    <option key={meaning} value={meaning}>
                      {words}
                    </option>
                  ))}
                </Select>
                <span className="mt-1.5 block">{head[column] ?? `column ${column + 1}`}</span>
              </Th>
            ))}
          </tr>
        </thead>
        <tbody>
          {first.map((row) => (
            <tr key={row.join(" ")}>
              {at.map((column) => (
                <Td key={column} figures right>
                  {row[column] ?? <NoValue say="no number" />}
                </Td>
              ))}
            </tr>
          ))}
        </tbody>
      </Table>
    </TableFrame>
  );
}
