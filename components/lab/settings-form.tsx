"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useState } from "react";
import { FormProvider, useForm } from "react-hook-form";
import { z } from "zod";
import { ApiProblem } from "@/lib/api/client";
import { timeZoneSchema, type Lab } from "@/lib/api/labs";
import { EXPOSURE_RULES, labSettingsSchema } from "@/lib/labs/settings-schema";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { FormSection } from "../parts/section";
import { sayPlanFault } from "../plan/plan-form-schema";
import { useUnsavedGuard } from "../plan/use-unsaved-guard";
import { useUpdateLab } from "../queries/people";
import { SettingsConflict } from "./settings-conflict";
import { NameSetting, NumberSetting, TimeZoneSetting, TwoPersonSetting } from "./settings-fields";
import {
  EXPOSURE_WORDS,
  mergeStates,
  toLabChange,
  toSettingDifferences,
  type LabState,
} from "./settings-words";

const formSchema = z.object({
  name: z.string().trim().min(1, "Enter a name.").max(120),
  time_zone: timeZoneSchema,
  settings: labSettingsSchema,
});

const toState = ({ name, time_zone, settings }: Lab): LabState => ({ name, time_zone, settings });

interface SettingsFormProps {
  lab: Lab;
  /** Limit of the installation, MB. */
  mostUploadMb: number;
  /** Reads what another admin saved. */
  onReread: () => Promise<Lab | null>;
}

export function SettingsForm({ lab, mostUploadMb, onReread }: SettingsFormProps) {
  const update = useUpdateLab();
  const [before, setBefore] = useState(() => toState(lab));
  const [conflict, setConflict] = useState<{ theirs: LabState; mine: LabState } | null>(null);
  const [saved, setSaved] = useState(false);
  const form = useForm<z.input<typeof formSchema>, unknown, LabState>({
    mode: "onTouched",
    defaultValues: before,
    resolver: zodResolver(formSchema, { error: sayPlanFault }),
  });
  const { isDirty } = form.formState;
  useUnsavedGuard(isDirty && !update.isPending);

  const takeOver = (state: LabState): void => {
    setBefore(state);
    setConflict(null);
    form.reset(state);
  };
  const save = async (mine: LabState, was: LabState): Promise<void> => {
    setSaved(false);
    try {
      takeOver(toState(await update.mutateAsync({ ...toLabChange(was, mine), was })));
      setSaved(true);
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
      const theirs = error.code === "conflict.changed" ? await onReread() : null;
      if (theirs === null) return;
      setConflict({ theirs: toState(theirs), mine: mergeStates(was, mine, toState(theirs)) });
    }
  };
  const fault = conflict === null ? update.error : null;

  return (
    <FormProvider {...form}>
      <form
        aria-label="Settings of the lab"
        noValidate
        className="max-w-[860px]"
        onChange={() => setSaved(false)}
        onSubmit={(event) => void form.handleSubmit((mine) => save(mine, before))(event)}
      >
        <FormSection title="The lab">
          <div className="grid gap-x-3.5 gap-y-3 sm:grid-cols-2">
            <NameSetting />
            <TimeZoneSetting />
          </div>
        </FormSection>
        <FormSection title="Sign-off">
          <TwoPersonSetting />
        </FormSection>
        <FormSection title="Hearing">
          <fieldset>
            <legend className="figures mb-1 text-label font-medium text-ink-2">
              rule of the daily dose
            </legend>
            {EXPOSURE_RULES.map((rule) => (
              <label key={rule} className="flex items-center gap-2 py-1 max-md:min-h-11">
                <input
                  type="radio"
                  value={rule}
                  className="size-[17px] flex-none accent-ink"
                  {...form.register("settings.exposure_rule")}
                />
                {EXPOSURE_WORDS[rule]}
              </label>
            ))}
          </fieldset>
        </FormSection>
        <FormSection title="Recordings">
          <div className="sm:max-w-[50%]">
            <NumberSetting
              name="settings.max_upload_mb"
              label="largest recording, MB"
              hint={`Empty: as much as this installation takes, ${mostUploadMb} MB. More than that is never taken.`}
            />
            <div className="mt-3">
              <NumberSetting
                name="settings.retention_days"
                label="recordings of archived series stay, days"
                hint="At least 30; empty: for good. What a publication cites always stays."
              />
            </div>
          </div>
        </FormSection>
        <FormSection title="Checks at arrival">
          <div className="grid gap-x-3.5 gap-y-3 sm:grid-cols-2">
            <NumberSetting
              name="settings.arrival.level_warn_dB"
              label="level off the plan, warn beyond, dB"
            />
            <NumberSetting
              name="settings.arrival.level_fail_dB"
              label="level off the plan, fail beyond, dB"
            />
            <NumberSetting
              name="settings.arrival.step_warn_dB"
              label="step to the other runs, warn beyond, dB"
            />
            <NumberSetting
              name="settings.arrival.step_fail_dB"
              label="step to the other runs, fail beyond, dB"
            />
            <NumberSetting
              name="settings.arrival.snr_warn_dB"
              label="signal-to-noise, warn under, dB"
            />
            <NumberSetting
              name="settings.arrival.snr_fail_dB"
              label="signal-to-noise, fail under, dB"
            />
          </div>
          <p className="mt-2.5 text-small text-ink-2">
            For recordings that arrive from now on. What was checked keeps its verdict.
          </p>
        </FormSection>
        {conflict !== null && (
          <SettingsConflict
            differences={toSettingDifferences(conflict.theirs, conflict.mine)}
            busy={update.isPending}
            onTakeTheirs={() => takeOver(conflict.theirs)}
            onKeepMine={() => void save(conflict.mine, conflict.theirs)}
          />
        )}
        {fault !== null && (
          <FaultBar className="mt-2" title="The settings were not saved">
            {fault.message}
          </FaultBar>
        )}
        <div className="flex flex-wrap items-center gap-4 border-t border-rule pt-4">
          <Button type="submit" tone="main" busy={update.isPending}>
            Save
          </Button>
          <output className="text-ink-2">{saved && !isDirty ? "Saved." : ""}</output>
        </div>
      </form>
    </FormProvider>
  );
}
