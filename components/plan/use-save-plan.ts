"use client";

import type { LoudspeakerInput } from "@/lib/api/loudspeakers";
import type { SeriesView } from "@/lib/api/series";
import { useCreateLoudspeaker, usePutPhoto, useUpdateLoudspeaker } from "../queries/loudspeakers";
import { useCreateSeries, useUpdatePlan } from "../queries/series";
import { NEW_LOUDSPEAKER, type PlanFormOutput } from "./plan-form-schema";

export interface SaveInput {
  /** What the form was filled from; null for a series that does not exist yet. */
  base: SeriesView | null;
  values: PlanFormOutput;
  loudspeakerChanged: boolean;
  photo: File | null;
}

interface SavePlan {
  /** Everything in order; what was done stays done when a later step is refused. */
  save: (input: SaveInput) => Promise<SeriesView>;
}

/** Called after each step, so that a second try does not do it twice. */
export interface SaveSteps {
  onLoudspeaker: (loudspeakerId: string) => void;
  onPhoto: () => void;
  onSeries: (series: SeriesView) => void;
}

/** Loudspeaker, photo, plan: three writes behind one button. */
export function useSavePlan(steps: SaveSteps): SavePlan {
  const createLoudspeaker = useCreateLoudspeaker();
  const updateLoudspeaker = useUpdateLoudspeaker();
  const putPhoto = usePutPhoto();
  const createSeries = useCreateSeries();
  const updatePlan = useUpdatePlan();

  const toLoudspeakerId = async (input: SaveInput): Promise<string> => {
    const { loudspeakerId, loudspeaker } = input.values;
    if (loudspeakerId === NEW_LOUDSPEAKER) {
      const created = await createLoudspeaker.mutateAsync(loudspeaker);
      steps.onLoudspeaker(created.id);
      return created.id;
    }
    if (input.loudspeakerChanged) {
      await updateLoudspeaker.mutateAsync({
        loudspeakerId,
        change: loudspeaker satisfies LoudspeakerInput,
      });
    }
    return loudspeakerId;
  };

  return {
    save: async (input) => {
      const loudspeakerId = await toLoudspeakerId(input);
      if (input.photo !== null) {
        await putPhoto.mutateAsync({ loudspeakerId, photo: input.photo });
        steps.onPhoto();
      }
      const saved =
        input.base === null
          ? await createSeries.mutateAsync({ loudspeakerId, plan: input.values.plan })
          : await updatePlan.mutateAsync({
              seriesId: input.base.id,
              plan: input.values.plan,
              planVersion: input.base.plan_version,
            });
      steps.onSeries(saved);
      return saved;
    },
  };
}
