"use client";

import { useState } from "react";
import { formatBytes } from "@/lib/charts/format";
import { Button } from "../parts/button";
import { Dialog } from "../parts/dialog";
import { Field, Select } from "../parts/field";
import { toPlaceNote, type PlacedFile } from "./place-files";
import type { RunRow } from "./run-rows";
import type { ChosenFile } from "./upload-controller";

interface PlaceDialogProps {
  placed: readonly PlacedFile[];
  rows: readonly RunRow[];
  onSend: (files: ChosenFile[]) => void;
  onClose: () => void;
}

const LATER = "";

/** Where each file goes, before it is sent: by name, or by a person's word. */
export function PlaceDialog({ placed, rows, onSend, onClose }: PlaceDialogProps) {
  const [slots, setSlots] = useState(() => placed.map((p) => p.slot ?? LATER));
  const twice = slots.filter((slot, at) => slot !== LATER && slots.indexOf(slot) !== at);
  const send = (): void => {
    onSend(
      placed.map(({ file, slot: byName }, at) => {
        const slot = slots[at] ?? LATER;
        if (slot === LATER) return { file, slot: null, shownSlot: null };
        return { file, slot: slot === byName ? null : slot, shownSlot: slot };
      }),
    );
    onClose();
  };
  return (
    <Dialog
      open
      onClose={onClose}
      title={placed.length === 1 ? "Where does this file go?" : "Where do these files go?"}
      actions={
        <Button tone="main" disabled={twice.length > 0} onClick={send}>
          Send {placed.length === 1 ? "it" : `${placed.length} files`}
        </Button>
      }
    >
      <ul>
        {placed.map(({ file, reason }, at) => {
          const slot = slots[at] ?? LATER;
          const note = toPlaceNote(rows.find((row) => row.planned.slot === slot));
          const error = twice.includes(slot) ? "Two files cannot be the same run." : undefined;
          return (
            <li key={`${file.name} ${file.size}`} className="border-t border-rule py-2.5">
              <Field
                label={
                  <>
                    <span className="break-all text-ink">{file.name}</span>,{" "}
                    {formatBytes(file.size)}
                  </>
                }
                error={error}
                hint={slot === LATER ? (reason ?? "It waits at the foot of the table.") : note}
              >
                {(control) => (
                  <Select
                    {...control}
                    size="normal"
                    value={slot}
                    onChange={(event) => setSlots(slots.with(at, event.target.value))}
                  >
                    <option value={LATER}>decide later</option>
                    {rows.map((row) => (
                      <option key={row.planned.slot} value={row.planned.slot}>
                        {row.planned.label}
                      </option>
                    ))}
                  </Select>
                )}
              </Field>
            </li>
          );
        })}
      </ul>
    </Dialog>
  );
}
