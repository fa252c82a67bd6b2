"use client";

import { useId, useState } from "react";
import type { RunView } from "@/lib/api/runs";
import type { LevelPaint } from "@/lib/charts/tokens";
import { Button } from "../parts/button";
import { LevelSwatch } from "../parts/level-swatch";
import { NoValue } from "../parts/table";
import { PlaceButtons } from "./place-buttons";
import type { RunActs } from "./run-acts";
import {
  ActsCell,
  Cell,
  COLUMNS,
  FigureCells,
  FileCell,
  NameCell,
  RowFrame,
  VerdictCell,
} from "./run-cells";
import { RunPanel } from "./run-panel";
import { toRunName, type RunRow } from "./run-rows";
import { StillMark } from "./still-mark";
import { Received, UploadButtons } from "./upload-cells";
import type { UploadItem } from "./upload-item";
import { toRowVerdict, toRunVerdict, toUploadVerdict } from "./verdict-words";

interface RunRowsProps {
  row: RunRow;
  paint: LevelPaint | undefined;
  /** "94 dB, 1 kHz" */
  calibrator: string;
  mayCapture: boolean;
  acts: RunActs;
}

/** A planned run with its takes: the one that counts, the one on its way, the ones put aside. */
export function RunRows({ row, paint, calibrator, mayCapture, acts }: RunRowsProps) {
  const { planned, run, upload } = row;
  const [opened, setOpened] = useState<boolean | null>(null);
  const panelId = useId();
  const open = run !== null && (opened ?? (run.state === "failed" || run.state === "kept"));
  const { name, kind } = toRunName(planned, calibrator);
  const dim = run === null && upload === null && row.slot.excused === null;
  const shownUpload = run === null ? upload : null;
  return (
    <>
      <RowFrame dim={dim} flush={false}>
        <NameCell>
          {planned.levelDb === null || paint === undefined ? (
            <StillMark role={planned.role} />
          ) : (
            <LevelSwatch size={16} paint={paint} longTerm={planned.role === "long-term"} />
          )}
          {name}
          <span className="text-figure font-normal text-ink-2">{kind}</span>
        </NameCell>
        <FileCell name={run?.file_name ?? shownUpload?.fileName ?? null} />
        <Cell className={run === null && shownUpload === null ? "max-md:hidden" : undefined}>
          {run === null && shownUpload === null ? (
            <NoValue say="nothing received" />
          ) : (
            <Received
              label={planned.label}
              bytes={run?.bytes ?? shownUpload?.bytes ?? 0}
              upload={shownUpload}
              paint={paint}
            />
          )}
        </Cell>
        <FigureCells run={run} />
        <VerdictCell
          verdict={run === null || upload === null ? toRowVerdict(row) : toRunVerdict(run)}
        />
        <ActsCell>
          {shownUpload !== null ? (
            <UploadButtons upload={shownUpload} acts={acts} />
          ) : (
            <>
              {mayCapture && <PlaceButtons row={row} acts={acts} />}
              {run !== null && (
                <Button
                  tone="quiet"
                  size="small"
                  aria-expanded={open}
                  aria-controls={panelId}
                  aria-label={`${open ? "Close details" : "Details"} of ${planned.label}`}
                  onClick={() => setOpened(!open)}
                >
                  {open ? "Close" : "Details"}
                </Button>
              )}
            </>
          )}
        </ActsCell>
      </RowFrame>
      {run !== null && (
        <tr id={panelId} hidden={!open} className="max-md:block">
          <td colSpan={COLUMNS} className="px-4 pb-3.5 max-md:block max-md:px-0">
            {open && (
              <RunPanel row={row} run={run} paint={paint} mayCapture={mayCapture} acts={acts} />
            )}
          </td>
        </tr>
      )}
      {run !== null && upload !== null && (
        <TakeRow label={`take ${run.take + 1}`} upload={upload} paint={paint} acts={acts} />
      )}
      {row.earlier.map((take) => (
        <EarlierRow
          key={take.id}
          row={row}
          run={take}
          paint={paint}
          mayCapture={mayCapture}
          acts={acts}
        />
      ))}
    </>
  );
}

interface TakeRowProps {
  label: string;
  upload: UploadItem;
  paint: LevelPaint | undefined;
  acts: RunActs;
}

/** A new take on its way, below the one that it will replace. */
function TakeRow({ label, upload, paint, acts }: TakeRowProps) {
  return (
    <RowFrame dim flush>
      <NameCell>
        <span className="pl-[26px] font-normal text-ink-2">{label}</span>
      </NameCell>
      <FileCell name={upload.fileName} />
      <Cell>
        <Received label={label} bytes={upload.bytes} upload={upload} paint={paint} />
      </Cell>
      <FigureCells run={null} />
      <VerdictCell verdict={toUploadVerdict(upload)} />
      <ActsCell>
        <UploadButtons upload={upload} acts={acts} />
      </ActsCell>
    </RowFrame>
  );
}

interface EarlierRowProps extends Omit<RunRowsProps, "calibrator"> {
  run: RunView;
}

/** A take that was excluded or replaced: kept, told, out of the analysis. */
function EarlierRow({ row, run, paint, mayCapture, acts }: EarlierRowProps) {
  const [open, setOpen] = useState(false);
  const panelId = useId();
  return (
    <>
      <RowFrame dim flush>
        <NameCell>
          <span className="pl-[26px] font-normal text-ink-2">take {run.take}</span>
        </NameCell>
        <FileCell name={run.file_name} />
        <Cell>
          <Received label={`take ${run.take}`} bytes={run.bytes} upload={null} paint={undefined} />
        </Cell>
        <FigureCells run={run} />
        <VerdictCell verdict={toRunVerdict(run)} />
        <ActsCell>
          <Button
            tone="quiet"
            size="small"
            aria-expanded={open}
            aria-controls={panelId}
            aria-label={`${open ? "Close details" : "Details"} of ${row.planned.label}, take ${run.take}`}
            onClick={() => setOpen(!open)}
          >
            {open ? "Close" : "Details"}
          </Button>
        </ActsCell>
      </RowFrame>
      <tr id={panelId} hidden={!open} className="max-md:block">
        <td colSpan={COLUMNS} className="px-4 pb-3.5 max-md:block max-md:px-0">
          {open && (
            <RunPanel row={row} run={run} paint={paint} mayCapture={mayCapture} acts={acts} />
          )}
        </td>
      </tr>
    </>
  );
}
