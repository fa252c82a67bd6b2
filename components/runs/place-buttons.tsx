"use client";

import { useRef, useState } from "react";
import { Button } from "../parts/button";
import { RECORDING_TYPES } from "./drop-zone";
import { ReasonDialog } from "./reason-dialog";
import type { RunActs } from "./run-acts";
import type { RunRow } from "./run-rows";

/** Replace what is there; send what is due; excuse what will not come. */
export function PlaceButtons({ row, acts }: { row: RunRow; acts: RunActs }) {
  const input = useRef<HTMLInputElement>(null);
  const [asked, setAsked] = useState(false);
  const [fault, setFault] = useState<string | null>(null);
  const { planned, run, slot } = row;
  const withdraw = (): void => {
    acts.excuse(row, null).catch((error: unknown) => {
      setFault(error instanceof Error ? error.message : "It was not taken. Try again.");
    });
  };
  return (
    <>
      {slot.excused !== null && run === null && (
        <Button
          tone="quiet"
          size="small"
          aria-label={`Withdraw the excuse of ${planned.label}`}
          onClick={withdraw}
        >
          Withdraw
        </Button>
      )}
      {slot.excused === null && (run !== null || slot.open) && (
        <Button
          tone="quiet"
          size="small"
          aria-label={`${run === null ? "Send" : "Replace"} ${planned.label}`}
          onClick={() => input.current?.click()}
        >
          {run === null ? "Send" : "Replace"}
        </Button>
      )}
      {slot.excused === null && run === null && (
        <Button
          tone="quiet"
          size="small"
          aria-label={`Excuse ${planned.label}`}
          onClick={() => setAsked(true)}
        >
          Excuse
        </Button>
      )}
      <input
        ref={input}
        type="file"
        accept={RECORDING_TYPES}
        aria-label={`File for ${planned.label}`}
        tabIndex={-1}
        className="sr-only"
        onChange={(event) => {
          const files = Array.from(event.target.files ?? []);
          if (files.length > 0) acts.replace(row, files);
          event.target.value = "";
        }}
      />
      {fault !== null && (
        <span role="alert" className="block text-small text-fault">
          {fault}
        </span>
      )}
      {asked && (
        <ReasonDialog
          title={`Excuse ${planned.label}, with a reason`}
          words="The series does without this recording; what it would have shown is not assessed. The excuse can be withdrawn."
          act="Excuse it"
          onGive={(reason) => acts.excuse(row, reason)}
          onClose={() => setAsked(false)}
        />
      )}
    </>
  );
}
