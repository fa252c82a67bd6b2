"use client";

import { useRef, useState, type DragEvent, type ReactNode } from "react";
import type { Plan } from "@/lib/series/plan-schema";
import { Button, LinkButton } from "../parts/button";
import { joinClasses } from "../parts/join-classes";

interface DropZoneProps {
  seriesId: string;
  rateHz: Plan["sweep"]["rate_Hz"];
  onFiles: (files: File[]) => void;
  /** The picture of the ladder. */
  children: ReactNode;
}

export const RECORDING_TYPES = ".wav,.wave,.rf64,.bwf,.flac,.csv,.tsv,.txt,.frd,audio/*";

/** Takes files by drop or by choice; the picture beside it says what is still to come. */
export function DropZone({ seriesId, rateHz, onFiles, children }: DropZoneProps) {
  const input = useRef<HTMLInputElement>(null);
  const [over, setOver] = useState(false);
  const take = (list: FileList | null): void => {
    const files = Array.from(list ?? []);
    if (files.length > 0) onFiles(files);
  };
  const onDrag = (event: DragEvent, inside: boolean): void => {
    if (!event.dataTransfer.types.includes("Files")) return;
    event.preventDefault();
    setOver(inside);
  };
  return (
    // oxlint-disable-next-line jsx-a11y/no-noninteractive-element-interactions -- files may be dropped; the button does the same by keyboard
    <section
      aria-label="Drop run files here"
      onDragEnter={(event) => onDrag(event, true)}
      onDragOver={(event) => onDrag(event, true)}
      onDragLeave={(event) => {
        const { relatedTarget: to } = event;
        onDrag(event, to instanceof Node && event.currentTarget.contains(to));
      }}
      onDrop={(event) => {
        onDrag(event, false);
        take(event.dataTransfer.files);
      }}
      className={joinClasses(
        "grid items-end gap-x-[30px] gap-y-5 border-2 border-dashed px-6 pt-[18px] pb-3.5 max-md:px-phone lg:grid-cols-[minmax(280px,1fr)_minmax(0,auto)]",
        over ? "border-overprint bg-overprint-wash" : "border-edge bg-sheet",
      )}
    >
      <div>
        <h2 className="text-big">{over ? "Let go to send" : "Drop run files here"}</h2>
        <p className="mt-1 max-w-[54ch] text-ink-2">
          WAV or FLAC, {rateHz / 1000} kHz, 24 bit or float; or runs reduced elsewhere as tables
          (.csv, .tsv, .txt, .frd). A file is matched by its name; then its level is checked against
          the plan. Volume and input gain stay as they are.
        </p>
        <div className="mt-3 flex flex-wrap items-center gap-2.5">
          <Button tone="main" onClick={() => input.current?.click()}>
            Choose files
          </Button>
          <input
            ref={input}
            type="file"
            multiple
            accept={RECORDING_TYPES}
            aria-label="Choose files"
            tabIndex={-1}
            className="sr-only"
            onChange={(event) => {
              take(event.target.files);
              event.target.value = "";
            }}
          />
          <LinkButton tone="quiet" href={`/series/${seriesId}/plan#stimulus-files`}>
            Stimulus files
          </LinkButton>
        </div>
      </div>
      {children}
    </section>
  );
}
