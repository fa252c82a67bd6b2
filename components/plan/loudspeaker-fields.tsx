"use client";

import type { ReactNode } from "react";
import { LOUDSPEAKER_KINDS } from "@/lib/api/loudspeakers";
import { ChoiceField, FieldGrid, NumberField, TextField } from "./form-fields";

/** The particulars of a loudspeaker, for the plan and for its own page. */
export function LoudspeakerFields({ children }: { children?: ReactNode }) {
  return (
    <FieldGrid>
      <TextField name="loudspeaker.maker" label="maker" />
      <TextField name="loudspeaker.model" label="model" />
      <TextField name="loudspeaker.serial" label="serial number" figures />
      <ChoiceField
        name="loudspeaker.kind"
        label="kind"
        choices={LOUDSPEAKER_KINDS.map((kind) => [kind, kind] as const)}
      />
      <NumberField name="loudspeaker.largest_dimension_m" label="largest dimension, m" />
      <NumberField name="loudspeaker.tuning_Hz" label="port tuning, Hz, if known" />
      {children}
    </FieldGrid>
  );
}
