"use client";

import { useState } from "react";
import { Button } from "../parts/button";
import { Dialog } from "../parts/dialog";
import { Field, TextArea } from "../parts/field";

interface ReasonDialogProps {
  /** "Keep 91 dB short-term, with a reason". */
  title: string;
  /** What follows from it. */
  words: string;
  /** Words of the deciding button. */
  act: string;
  onGive: (reason: string) => Promise<void>;
  onClose: () => void;
}

const SHORTEST = 3;

/** Asks for the reason that stands in the history from then on. */
export function ReasonDialog({ title, words, act, onGive, onClose }: ReasonDialogProps) {
  const [reason, setReason] = useState("");
  const [fault, setFault] = useState<string>();
  const [busy, setBusy] = useState(false);
  const give = async (): Promise<void> => {
    if (reason.trim().length < SHORTEST) {
      setFault("Give a reason.");
      return;
    }
    setBusy(true);
    try {
      await onGive(reason.trim());
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
      title={title}
      actions={
        <Button tone="decision" busy={busy} onClick={() => void give()}>
          {act}
        </Button>
      }
    >
      <p className="mb-3 text-ink-2">{words}</p>
      <Field label="reason" error={fault}>
        {(control) => (
          <TextArea
            {...control}
            rows={3}
            maxLength={500}
            value={reason}
            onChange={(event) => {
              setReason(event.target.value);
              setFault(undefined);
            }}
          />
        )}
      </Field>
    </Dialog>
  );
}
