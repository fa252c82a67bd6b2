"use client";

import { useQuery } from "@tanstack/react-query";
import { useFormContext, useWatch } from "react-hook-form";
import type { Loudspeaker } from "@/lib/api/loudspeakers";
import { Field, Select } from "../parts/field";
import { FormSection } from "../parts/section";
import { loudspeakerListQuery } from "../queries/loudspeakers";
import { FileChoice } from "./file-choice";
import { SectionHint } from "./form-fields";
import { LoudspeakerFields } from "./loudspeaker-fields";
import { NEW_LOUDSPEAKER, type PlanFormInput } from "./plan-form-schema";

interface LoudspeakerSectionProps {
  /** A series keeps its loudspeaker: only a new one may pick. */
  mayPick: boolean;
  photo: File | null;
  onPhoto: (photo: File) => void;
}

export function LoudspeakerSection({ mayPick, photo, onPhoto }: LoudspeakerSectionProps) {
  const { control } = useFormContext<PlanFormInput>();
  const loudspeakerId = useWatch({ control, name: "loudspeakerId" });
  const list = useQuery(loudspeakerListQuery());
  const loudspeakers = list.data?.loudspeakers ?? [];
  const known = loudspeakers.find((l) => l.id === loudspeakerId);
  return (
    <FormSection title="Loudspeaker">
      {mayPick && loudspeakers.length > 0 && <Pick loudspeakers={loudspeakers} />}
      <LoudspeakerFields />
      <div className="mt-3">
        <FileChoice
          words={photo !== null || known?.photo_url != null ? "Another photo" : "Add a photo"}
          accept="image/jpeg,image/png,image/webp"
          onChoose={onPhoto}
        >
          {photo !== null ? (
            <span className="figures text-figure break-all">{photo.name}</span>
          ) : (
            known?.photo_url != null && (
              // A photo of the lab behind its own sign-in: the optimiser cannot fetch it.
              // oxlint-disable-next-line nextjs/no-img-element
              <img
                src={known.photo_url}
                alt={`${known.maker} ${known.model}`}
                className="h-16 w-auto border border-rule"
              />
            )
          )}
        </FileChoice>
      </div>
      {known !== undefined && known.series_count > (mayPick ? 0 : 1) && (
        <SectionHint>
          Changes of maker, model and the like hold for all series of this loudspeaker.
        </SectionHint>
      )}
    </FormSection>
  );
}

function Pick({ loudspeakers }: { loudspeakers: readonly Loudspeaker[] }) {
  const { control, setValue } = useFormContext<PlanFormInput>();
  const chosen = useWatch({ control, name: "loudspeakerId" });
  const pick = (id: string): void => {
    const known = loudspeakers.find((l) => l.id === id);
    setValue("loudspeakerId", id, { shouldDirty: true });
    setValue("loudspeaker", toLoudspeakerValues(known), {
      shouldDirty: true,
      shouldValidate: known !== undefined,
    });
  };
  return (
    <Field label="loudspeaker" className="mb-3">
      {(props) => (
        <Select {...props} value={chosen} onChange={(event) => pick(event.target.value)}>
          <option value={NEW_LOUDSPEAKER}>a new one</option>
          {loudspeakers.map((l) => (
            <option key={l.id} value={l.id}>
              {l.model}, {l.maker}
              {l.serial === "" ? "" : `, ${l.serial}`}
            </option>
          ))}
        </Select>
      )}
    </Field>
  );
}

/** The fields of a known loudspeaker, or empty ones. */
export function toLoudspeakerValues(known?: Loudspeaker): PlanFormInput["loudspeaker"] {
  return {
    maker: known?.maker ?? "",
    model: known?.model ?? "",
    serial: known?.serial ?? "",
    kind: known?.kind ?? "active, two-way",
    largest_dimension_m: known?.largest_dimension_m ?? null,
    tuning_Hz: known?.tuning_Hz ?? null,
  };
}
