"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { FormProvider, useForm } from "react-hook-form";
import { z } from "zod";
import { ApiProblem } from "@/lib/api/client";
import { loudspeakerInputSchema, type Loudspeaker } from "@/lib/api/loudspeakers";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { FileChoice } from "../plan/file-choice";
import { LoudspeakerFields } from "../plan/loudspeaker-fields";
import { toLoudspeakerValues } from "../plan/loudspeaker-section";
import { sayPlanFault } from "../plan/plan-form-schema";
import { useUnsavedGuard } from "../plan/use-unsaved-guard";
import { useCreateLoudspeaker, usePutPhoto, useUpdateLoudspeaker } from "../queries/loudspeakers";

const formSchema = z.object({ loudspeaker: loudspeakerInputSchema });
type FormInput = z.input<typeof formSchema>;
type FormOutput = z.output<typeof formSchema>;

/** @param loudspeaker null for a new one. */
export function LoudspeakerForm({ loudspeaker }: { loudspeaker: Loudspeaker | null }) {
  const router = useRouter();
  const [photo, setPhoto] = useState<File | null>(null);
  const [made, setMade] = useState(loudspeaker);
  const [problem, setProblem] = useState<ApiProblem | null>(null);
  const [saved, setSaved] = useState(false);
  const create = useCreateLoudspeaker();
  const update = useUpdateLoudspeaker();
  const putPhoto = usePutPhoto();
  const form = useForm<FormInput, unknown, FormOutput>({
    mode: "onTouched",
    defaultValues: { loudspeaker: toLoudspeakerValues(loudspeaker ?? undefined) },
    resolver: zodResolver(formSchema, { error: sayPlanFault }),
  });
  const { isDirty, isSubmitting } = form.formState;
  useUnsavedGuard((isDirty || photo !== null) && !isSubmitting);

  const write = async (values: FormOutput): Promise<void> => {
    setProblem(null);
    setSaved(false);
    try {
      const known =
        made === null
          ? await create.mutateAsync(values.loudspeaker)
          : await update.mutateAsync({ loudspeakerId: made.id, change: values.loudspeaker });
      setMade(known);
      form.reset({ loudspeaker: toLoudspeakerValues(known) });
      if (photo !== null) {
        await putPhoto.mutateAsync({ loudspeakerId: known.id, photo });
        setPhoto(null);
      }
      setSaved(true);
      if (loudspeaker === null) router.replace(`/loudspeakers/${known.id}`);
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
      setProblem(error);
    }
  };

  return (
    <FormProvider {...form}>
      <form
        aria-label="Loudspeaker"
        noValidate
        className="max-w-[860px]"
        onSubmit={(event) => void form.handleSubmit(write)(event)}
      >
        <LoudspeakerFields />
        <div className="mt-3">
          <FileChoice
            words={photo === null && made?.photo_url == null ? "Add a photo" : "Another photo"}
            accept="image/jpeg,image/png,image/webp"
            onChoose={setPhoto}
          >
            {photo !== null && (
              <span className="figures text-figure break-all">{photo.name}, not saved yet</span>
            )}
          </FileChoice>
        </div>
        {problem !== null && (
          <FaultBar className="mt-4" title="It was not saved">
            {problem.message}
          </FaultBar>
        )}
        <div className="mt-4 flex flex-wrap items-center gap-4">
          <Button type="submit" tone="main" busy={isSubmitting}>
            Save
          </Button>
          <output className="text-ink-2">{saved && !isDirty ? "Saved." : ""}</output>
        </div>
      </form>
    </FormProvider>
  );
}
