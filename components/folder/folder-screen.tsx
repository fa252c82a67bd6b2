"use client";

import { useRef, useState, type DragEvent } from "react";
import { parseSeries } from "@/lib/series/parse-series";
import { listSeriesFiles } from "@/lib/series/list-series-files";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { joinClasses } from "../parts/join-classes";
import { LoadingState } from "../parts/states";
import { FolderForm } from "./folder-form";
import { useCreateFromFolder, type ReadFolder, type WantedSeries } from "./folder-queries";
import { readFolder, takeDrop, toDroppedFiles, type DroppedFile } from "./read-folder";
import { missing } from "./series-folder";
import { SendFiles, type FileToSend } from "./send-files";

/** A series from a folder of the analysis command, or from its archive: plan and recordings at once. */
export function FolderScreen() {
  const [read, setRead] = useState<ReadFolder | null>(null);
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<string | null>(null);
  const [sending, setSending] = useState<{ seriesId: string; files: FileToSend[] } | null>(null);
  const create = useCreateFromFolder();

  const take = async (files: Promise<DroppedFile[]>): Promise<void> => {
    setBusy(true);
    setFault(null);
    setRead(null);
    create.reset();
    try {
      setRead(await readSeriesFolder(await files));
    } catch (error) {
      setFault(error instanceof Error ? error.message : "The folder could not be read.");
    } finally {
      setBusy(false);
    }
  };
  const start = (wanted: WantedSeries): void => {
    create.mutate(wanted, {
      onSuccess: ({ series, uploads }) =>
        setSending({
          seriesId: series.id,
          files: uploads.map((upload) => ({
            ...upload,
            open: () => wanted.read.folder.open(upload.file),
          })),
        }),
    });
  };

  if (sending !== null) return <SendFiles {...sending} />;
  return (
    <div className="max-w-[860px] space-y-6 px-gutter pt-5 pb-10 max-md:px-phone">
      <FolderDrop onFiles={(files) => void take(files)} />
      {busy && <LoadingState label="Reading the folder" />}
      {fault !== null && <FaultBar title="The folder was not taken">{fault}</FaultBar>}
      {read !== null && (
        <FolderForm key={read.text} read={read} busy={create.isPending} onStart={start} />
      )}
      {create.isError && <FaultBar title="No series was created">{create.error.message}</FaultBar>}
    </div>
  );
}

/** @throws AppError with what is wrong with the folder, its series.json or the files beside it */
async function readSeriesFolder(files: DroppedFile[]): Promise<ReadFolder> {
  const folder = await readFolder(files);
  const text = await (await folder.open("series.json")).text();
  const series = parseSeries(text);
  const absent = listSeriesFiles(series).find((name) => !folder.sizes.has(name));
  if (absent !== undefined) throw missing(absent);
  return { folder, text, series };
}

function FolderDrop({ onFiles }: { onFiles: (files: Promise<DroppedFile[]>) => void }) {
  const archive = useRef<HTMLInputElement>(null);
  const folder = useRef<HTMLInputElement>(null);
  const [over, setOver] = useState(false);
  const onDrag = (event: DragEvent, inside: boolean): void => {
    if (!event.dataTransfer.types.includes("Files")) return;
    event.preventDefault();
    setOver(inside);
  };
  const chosen = (input: HTMLInputElement): void => {
    const files = toDroppedFiles(input.files);
    if (files.length > 0) onFiles(Promise.resolve(files));
    // The same may be chosen again.
    input.value = "";
  };
  return (
    // oxlint-disable-next-line jsx-a11y/no-noninteractive-element-interactions -- a folder may be dropped; the buttons do the same by keyboard
    <section
      aria-label="Drop a series folder here"
      onDragEnter={(event) => onDrag(event, true)}
      onDragOver={(event) => onDrag(event, true)}
      onDragLeave={(event) => onDrag(event, false)}
      onDrop={(event) => {
        onDrag(event, false);
        onFiles(takeDrop(event.dataTransfer));
      }}
      className={joinClasses(
        "border-2 border-dashed px-6 pt-[18px] pb-3.5 max-md:px-phone",
        over ? "border-overprint bg-overprint-wash" : "border-edge bg-sheet",
      )}
    >
      <h2 className="text-big">{over ? "Let go to read it" : "Drop a series folder here"}</h2>
      <p className="mt-1 max-w-[60ch] text-ink-2">
        The folder that the analysis command takes, or its ZIP: series.json and the recordings that
        it names. Plan and names follow from it, and the result is the command’s, byte for byte.
      </p>
      <div className="mt-3 flex flex-wrap gap-2.5">
        <Button tone="main" onClick={() => folder.current?.click()}>
          Choose a folder
        </Button>
        <Button onClick={() => archive.current?.click()}>Choose a ZIP</Button>
        <input
          ref={(input) => {
            folder.current = input;
            // React has no name for it.
            input?.setAttribute("webkitdirectory", "");
          }}
          type="file"
          multiple
          aria-label="Choose a folder"
          tabIndex={-1}
          className="sr-only"
          onChange={(event) => chosen(event.target)}
        />
        <input
          ref={archive}
          type="file"
          accept=".zip,application/zip"
          aria-label="Choose a ZIP"
          tabIndex={-1}
          className="sr-only"
          onChange={(event) => chosen(event.target)}
        />
      </div>
    </section>
  );
}
