"use client";

import { useState } from "react";
import type { RunView, UploadView } from "@/lib/api/runs";
import { formatBytes, formatNumber, NBSP } from "@/lib/charts/format";
import { Button } from "../parts/button";
import { Dialog } from "../parts/dialog";
import { Field, Select } from "../parts/field";
import { VerdictMark } from "../parts/verdict";
import { toPlaceNote } from "./place-files";
import type { RunActs } from "./run-acts";
import type { RunRow } from "./run-rows";
import { Received, UploadButtons } from "./upload-cells";
import type { UploadItem } from "./upload-item";
import { toSpeakingChecks, toUploadVerdict } from "./verdict-words";

interface UnassignedFilesProps {
  unassigned: readonly RunView[];
  loose: readonly UploadItem[];
  /** Begun elsewhere or before a reload: their bytes wait at the server. */
  unfinished: readonly UploadView[];
  rows: readonly RunRow[];
  mayCapture: boolean;
  acts: RunActs;
}

const LINE =
  "flex flex-wrap items-center gap-x-4 gap-y-2 border border-t-0 border-edge bg-wash px-4 py-2.5";

/** At the foot of the table: what fits no planned run, and what is still on its way. */
export function UnassignedFiles(props: UnassignedFilesProps) {
  const { unassigned, loose, unfinished, rows, mayCapture, acts } = props;
  if (unassigned.length + loose.length + unfinished.length === 0) return null;
  return (
    <ul aria-label="Files without a planned run">
      {unassigned.map((run) => (
        <UnassignedFile key={run.id} run={run} rows={rows} mayCapture={mayCapture} acts={acts} />
      ))}
      {loose.map((upload) => {
        const { words, note } = toUploadVerdict(upload);
        return (
          <li key={upload.id} className={LINE}>
            <VerdictMark kind={upload.state === "failed" ? "bad" : "going"} />
            <span className="min-w-0">
              <span className="figures text-figure break-all">{upload.fileName}</span>, {words}
              {note !== null && `: ${note}`}
            </span>
            <span className="ml-auto">
              <Received
                label={upload.fileName}
                bytes={upload.bytes}
                upload={upload}
                paint={undefined}
              />
            </span>
            <UploadButtons upload={upload} acts={acts} />
          </li>
        );
      })}
      {unfinished.map((upload) => (
        <UnfinishedUpload key={upload.id} upload={upload} mayCapture={mayCapture} acts={acts} />
      ))}
    </ul>
  );
}

interface UnfinishedUploadProps {
  upload: UploadView;
  mayCapture: boolean;
  acts: RunActs;
}

/** Where it was begun it goes on; anywhere else it can be taken away. */
function UnfinishedUpload({ upload, mayCapture, acts }: UnfinishedUploadProps) {
  const [asked, setAsked] = useState(false);
  const [fault, setFault] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const remove = async (): Promise<void> => {
    setBusy(true);
    try {
      await acts.removeUpload(upload.id);
    } catch (error) {
      setFault(error instanceof Error ? error.message : "It was not removed. Try again.");
    } finally {
      setBusy(false);
    }
  };
  return (
    <li className={LINE}>
      <VerdictMark kind="wait" />
      <span className="min-w-0 flex-1">
        <b>Unfinished:</b> <span className="figures text-figure break-all">{upload.file_name}</span>
        , {formatBytes(upload.received)} of {formatBytes(upload.bytes)} arrived. Where it was begun,
        choose the file again and it goes on from there.
      </span>
      {mayCapture && (
        <Button
          tone="quiet"
          size="small"
          aria-label={`Remove what arrived of ${upload.file_name}`}
          onClick={() => {
            setFault(null);
            setAsked(true);
          }}
        >
          Remove
        </Button>
      )}
      <Dialog
        open={asked}
        onClose={() => setAsked(false)}
        title={`Remove what arrived of ${upload.file_name}?`}
        actions={
          <Button tone="main" busy={busy} onClick={() => void remove()}>
            Remove
          </Button>
        }
      >
        <p>Whoever is still sending it has to begin again.</p>
        {fault !== null && (
          <p role="alert" className="mt-2 text-small text-fault">
            {fault}
          </p>
        )}
      </Dialog>
    </li>
  );
}

interface UnassignedFileProps {
  run: RunView;
  rows: readonly RunRow[];
  mayCapture: boolean;
  acts: RunActs;
}

function UnassignedFile({ run, rows, mayCapture, acts }: UnassignedFileProps) {
  const [asked, setAsked] = useState(false);
  const [fault, setFault] = useState<string | null>(null);
  const remove = (): void => {
    setFault(null);
    acts.remove(run).catch((error: unknown) => {
      setFault(error instanceof Error ? error.message : "It was not removed. Try again.");
    });
  };
  return (
    <li className={LINE}>
      <VerdictMark kind={run.state === "checking" ? "going" : "bad"} />
      <span className="min-w-0 flex-1">
        <b>Fits no planned run yet:</b>{" "}
        <span className="figures text-figure break-all">{run.file_name}</span>
        {toFactWords(run)}
        {fault !== null && (
          <span role="alert" className="block text-small text-fault">
            {fault}
          </span>
        )}
      </span>
      {mayCapture && (
        <>
          <Button
            size="small"
            aria-label={`Assign to a run: ${run.file_name}`}
            onClick={() => setAsked(true)}
          >
            Assign to a run
          </Button>
          <Button tone="quiet" size="small" aria-label={`Remove ${run.file_name}`} onClick={remove}>
            Remove
          </Button>
        </>
      )}
      {asked && <AssignDialog run={run} rows={rows} acts={acts} onClose={() => setAsked(false)} />}
    </li>
  );
}

/** ", 44.1 kHz, no sweep was found": what is known of a file without a place. */
function toFactWords(run: RunView): string {
  if (run.reason !== null) return `. ${run.reason}`;
  if (run.report === null) return ", being checked.";
  const { rate_Hz: rateHz, format } = run.report;
  const rate = rateHz === 0 ? `a ${format}` : `${formatNumber(rateHz / 1000)}${NBSP}kHz`;
  const [check] = toSpeakingChecks(run);
  return check === undefined ? `, ${rate}.` : `, ${rate}, ${check.title}.`;
}

interface AssignDialogProps {
  run: RunView;
  rows: readonly RunRow[];
  acts: RunActs;
  onClose: () => void;
}

function AssignDialog({ run, rows, acts, onClose }: AssignDialogProps) {
  const free = rows.find((row) => row.run === null && row.slot.open && row.slot.excused === null);
  const [slot, setSlot] = useState(free?.planned.slot ?? rows[0]?.planned.slot ?? "");
  const [fault, setFault] = useState<string>();
  const [busy, setBusy] = useState(false);
  const note = toPlaceNote(rows.find((row) => row.planned.slot === slot));
  const assign = async (): Promise<void> => {
    setBusy(true);
    try {
      await acts.act(run, { act: "assign", slot });
      onClose();
    } catch (error) {
      setFault(error instanceof Error ? error.message : "It was not taken. Try again.");
    } finally {
      setBusy(false);
    }
  };
  return (
    <Dialog
      open
      onClose={onClose}
      title={`Which run is ${run.file_name}?`}
      actions={
        <Button tone="main" busy={busy} onClick={() => void assign()}>
          Assign
        </Button>
      }
    >
      <Field label="planned run" error={fault} hint={note ?? undefined}>
        {(control) => (
          <Select
            {...control}
            value={slot}
            onChange={(event) => {
              setSlot(event.target.value);
              setFault(undefined);
            }}
          >
            {rows.map((row) => (
              <option key={row.planned.slot} value={row.planned.slot}>
                {row.planned.label}
              </option>
            ))}
          </Select>
        )}
      </Field>
    </Dialog>
  );
}
