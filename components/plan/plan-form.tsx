"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { FormProvider, useForm, useWatch, type FieldPath } from "react-hook-form";
import { ApiProblem } from "@/lib/api/client";
import type { Loudspeaker } from "@/lib/api/loudspeakers";
import type { SeriesView } from "@/lib/api/series";
import type { DayRuleName } from "@/lib/exposure/rules";
import { planSchema, type Plan } from "@/lib/series/plan-schema";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { seriesQuery } from "../queries/series";
import { CriteriaSection } from "./criteria-section";
import { LevelsSection } from "./levels-section";
import { LoudspeakerSection, toLoudspeakerValues } from "./loudspeaker-section";
import { PlanAside } from "./plan-aside";
import { PlanConflict } from "./plan-conflict";
import {
  NEW_LOUDSPEAKER,
  planFormSchema,
  sayPlanFault,
  type PlanFormInput,
  type PlanFormOutput,
} from "./plan-form-schema";
import {
  CalibrationSection,
  ConditioningSection,
  PlaceSection,
  StateSection,
  SweepSection,
} from "./plan-sections";
import { useSavePlan } from "./use-save-plan";
import { useUnsavedGuard } from "./use-unsaved-guard";

interface PlanFormProps {
  /** Null for a new series. */
  series: SeriesView | null;
  /** Chosen beforehand, from the loudspeaker's own page. */
  loudspeaker?: Loudspeaker | null;
  rule: DayRuleName;
}

function toValues(series: SeriesView | null, picked: Loudspeaker | null = null): PlanFormInput {
  const loudspeaker = series?.loudspeaker ?? picked;
  return {
    loudspeakerId: loudspeaker?.id ?? NEW_LOUDSPEAKER,
    loudspeaker: toLoudspeakerValues(loudspeaker ?? undefined),
    plan: toPlanValues(series?.plan ?? planSchema.parse({})),
  };
}

/** Both fields of a criterion, and those of the uncertainty, are always there, filled or not: else a fresh form counts as changed. */
const toPlanValues = (plan: Plan): PlanFormInput["plan"] => ({
  ...plan,
  uncertainty: { calibrator_dB: null, microphone_dB: null, distance_m: null, ...plan.uncertainty },
  criteria: plan.criteria.map(({ thd_percent, compression_dB }) => ({
    thd_percent,
    compression_dB,
  })),
});

type Refusal =
  | { kind: "conflict"; theirs: SeriesView; values: PlanFormOutput; toRuns: boolean }
  | { kind: "problem"; problem: ApiProblem };

/** What to enter at left; at right, live, what it implies. */
export function PlanForm({ series, loudspeaker = null, rule }: PlanFormProps) {
  const router = useRouter();
  const client = useQueryClient();
  const [base, setBase] = useState(series);
  const [photo, setPhoto] = useState<File | null>(null);
  const [refusal, setRefusal] = useState<Refusal | null>(null);
  const [savedAt, setSavedAt] = useState<Date | null>(null);
  const form = useForm<PlanFormInput, unknown, PlanFormOutput>({
    mode: "onTouched",
    defaultValues: toValues(series, loudspeaker),
    resolver: zodResolver(planFormSchema, { error: sayPlanFault }),
  });
  const { isDirty, isSubmitting, dirtyFields, isSubmitted, isValid } = form.formState;
  const unsaved = isDirty || photo !== null;
  useUnsavedGuard(unsaved && !isSubmitting);
  const { save } = useSavePlan({
    onLoudspeaker: (id) => form.setValue("loudspeakerId", id),
    onPhoto: () => setPhoto(null),
    onSeries: setBase,
  });

  const write = async (
    values: PlanFormOutput,
    from: SeriesView | null,
    toRuns: boolean,
  ): Promise<void> => {
    setRefusal(null);
    try {
      const saved = await save({
        base: from,
        values,
        loudspeakerChanged: dirtyFields.loudspeaker !== undefined,
        photo,
      });
      form.reset(toValues(saved));
      setSavedAt(new Date());
      if (toRuns) router.push(`/series/${saved.id}/runs`);
      else if (series === null) router.replace(`/series/${saved.id}/plan`);
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
      if (error.code === "conflict.changed" && from !== null) {
        const theirs = await client.fetchQuery({ ...seriesQuery(from.id), staleTime: 0 });
        setRefusal({ kind: "conflict", theirs, values, toRuns });
        return;
      }
      for (const fault of error.problem.errors ?? []) {
        const path = fault.path.startsWith("plan") ? fault.path : `loudspeaker.${fault.path}`;
        form.setError(path as FieldPath<PlanFormInput>, { message: fault.message });
      }
      setRefusal({ kind: "problem", problem: error });
    }
  };
  const submit = (toRuns: boolean) => form.handleSubmit((values) => write(values, base, toRuns));

  return (
    <FormProvider {...form}>
      <div className="grid gap-x-10 gap-y-6 px-gutter pb-9 max-md:px-phone lg:grid-cols-[minmax(0,1fr)_440px]">
        <form
          aria-label="Plan"
          noValidate
          className="min-w-0"
          onSubmit={(event) => {
            event.preventDefault();
            void submit(false)();
          }}
        >
          <LoudspeakerSection mayPick={base === null} photo={photo} onPhoto={setPhoto} />
          <StateSection />
          <PlaceSection />
          <CalibrationSection />
          <LevelsSection />
          <SweepSection />
          <ConditioningSection />
          <CriteriaSection />
          {refusal?.kind === "problem" && (
            <FaultBar title="The plan was not saved" report={toReport(refusal.problem)}>
              {refusal.problem.message}
            </FaultBar>
          )}
          {refusal?.kind === "conflict" && (
            <PlanConflict
              theirs={refusal.theirs}
              mine={refusal.values.plan}
              onTakeTheirs={() => {
                form.reset(toValues(refusal.theirs));
                setBase(refusal.theirs);
                setRefusal(null);
              }}
              onKeepMine={() => write(refusal.values, refusal.theirs, refusal.toRuns)}
            />
          )}
          <div className="sticky bottom-0 mt-1 flex flex-wrap items-center gap-x-4 gap-y-2 border-t border-rule bg-page py-4">
            <output className="mr-auto text-ink-2">
              {isSubmitted && !isValid
                ? "Some fields are not right yet."
                : unsaved || savedAt === null
                  ? "You can change the plan until the first recording is in."
                  : "Saved."}
            </output>
            <Button type="submit" busy={isSubmitting}>
              Save
            </Button>
            <Button tone="main" busy={isSubmitting} onClick={() => void submit(true)()}>
              Save and go to runs
            </Button>
          </div>
        </form>
        <LiveAside
          first={base?.plan ?? planSchema.parse({})}
          rule={rule}
          seriesId={base?.id ?? null}
          unsaved={unsaved}
        />
      </div>
    </FormProvider>
  );
}

const toReport = (problem: ApiProblem): string | undefined =>
  problem.problem.requestId === "" ? undefined : `report ${problem.problem.requestId}`;

interface LiveAsideProps {
  first: Plan;
  rule: DayRuleName;
  seriesId: string | null;
  unsaved: boolean;
}

/** Follows the fields; while one of them is not right, the last whole plan stands. */
function LiveAside({ first, rule, seriesId, unsaved }: LiveAsideProps) {
  const [plan, loudspeaker] = useWatch<PlanFormInput, ["plan", "loudspeaker"]>({
    name: ["plan", "loudspeaker"],
  });
  const [last, setLast] = useState(first);
  const parsed = planSchema.safeParse(plan);
  const whole = parsed.success ? parsed.data : last;
  if (parsed.success && JSON.stringify(last) !== JSON.stringify(parsed.data)) setLast(parsed.data);
  return (
    <PlanAside
      plan={whole}
      model={loudspeaker?.model ?? ""}
      kind={loudspeaker?.kind ?? "other"}
      rule={rule}
      seriesId={seriesId}
      unsaved={unsaved}
    />
  );
}
