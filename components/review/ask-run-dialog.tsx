"use client";

import { useState } from "react";
import { ApiProblem } from "@/lib/api/client";
import type { SeriesView } from "@/lib/api/series";
import { computeRunCost, toRunCostSentence } from "@/lib/exposure/session-dose";
import { toNextRunSentence, toWidthSentence } from "@/lib/result/finding";
import type { Band } from "@/lib/result/result-schema";
import { SHORTEST_REASON } from "@/lib/review/decide";
import { toLevelText } from "@/lib/series/planned-runs";
import { useLabSession } from "../frame/lab-session";
import { Button } from "../parts/button";
import { Dialog } from "../parts/dialog";
import { Field, Select, TextArea, TextInput } from "../parts/field";
import { useRequestRun } from "../queries/review";

interface AskRunDialogProps {
  series: Pick<SeriesView, "id" | "plan">;
  band: Band;
  onClose: () => void;
}

const LOWEST_DB = 40;
const HIGHEST_DB = 130;
const NOTHING: Readonly<Record<string, string>> = {};

/** The tester sees it among the runs while the loudspeaker still stands there. */
export function AskRunDialog({ series, band, onClose }: AskRunDialogProps) {
  const rule = useLabSession().lab?.settings.exposure_rule ?? "niosh";
  const suggestion = band.evidence.next_run;
  const [level, setLevel] = useState(suggestion === null ? "" : toLevelText(suggestion.level_dB));
  const [kind, setKind] = useState<"short-term" | "long-term">("short-term");
  const [variant, setVariant] = useState("");
  const [reason, setReason] = useState("");
  const [faults, setFaults] = useState(NOTHING);
  const request = useRequestRun(series.id);
  const levelDb = level.trim() === "" ? Number.NaN : Number(level.replace(",", "."));
  const playable = levelDb >= LOWEST_DB && levelDb <= HIGHEST_DB;
  const ask = async (): Promise<void> => {
    const found = {
      ...(playable ? {} : { level_dB: `Level must be from ${LOWEST_DB} to ${HIGHEST_DB} dB.` }),
      ...(reason.trim().length < SHORTEST_REASON ? { reason: "Give a reason." } : {}),
    };
    setFaults(found);
    if (Object.keys(found).length > 0) return;
    try {
      const words = variant.trim();
      await request.mutateAsync({
        level_dB: levelDb,
        kind,
        variant: words === "" ? null : words,
        reason: reason.trim(),
      });
      onClose();
    } catch (error) {
      const field =
        error instanceof ApiProblem
          ? ["level_dB", "kind", "variant", "reason"].find((one) => error.fieldMessage(one))
          : undefined;
      const message = error instanceof Error ? error.message : "It was not taken. Try again.";
      setFaults({ [field ?? "level_dB"]: message });
    }
  };
  return (
    <Dialog
      open
      onClose={onClose}
      title="Ask for a run"
      actions={
        <Button tone="decision" busy={request.isPending} onClick={() => void ask()}>
          Ask the tester
        </Button>
      }
    >
      <p className="mb-3 text-ink-2">
        It appears in the tester’s series at once.{" "}
        {toNextRunSentence(band) ?? "The analysis suggests no level for this band."}
      </p>
      {playable && (
        <output className="mb-3 block text-small">
          {kind === "short-term" && levelDb !== suggestion?.level_dB
            ? `${toWidthSentence(band, levelDb) ?? ""} `
            : ""}
          {toRunCostSentence(computeRunCost(series.plan, { levelDb, kind }, rule), rule)}
        </output>
      )}
      <div className="grid gap-3 sm:grid-cols-2">
        <Field label="level, dB" error={faults["level_dB"]}>
          {(control) => (
            <TextInput
              {...control}
              figures
              inputMode="decimal"
              value={level}
              onChange={(event) => setLevel(event.target.value)}
            />
          )}
        </Field>
        <Field label="kind" error={faults["kind"]}>
          {(control) => (
            <Select
              {...control}
              value={kind}
              onChange={(event) =>
                setKind(event.target.value === "long-term" ? "long-term" : "short-term")
              }
            >
              <option value="short-term">short-term</option>
              <option value="long-term">long-term</option>
            </Select>
          )}
        </Field>
        <Field
          className="sm:col-span-2"
          label="other setting, for a variant run"
          hint="Left empty: as the other runs. “Port blocked” shows whether the port holds it back."
          error={faults["variant"]}
        >
          {(control) => (
            <TextInput
              {...control}
              maxLength={120}
              value={variant}
              onChange={(event) => setVariant(event.target.value)}
            />
          )}
        </Field>
        <Field className="sm:col-span-2" label="reason" error={faults["reason"]}>
          {(control) => (
            <TextArea
              {...control}
              rows={2}
              maxLength={500}
              value={reason}
              onChange={(event) => setReason(event.target.value)}
            />
          )}
        </Field>
      </div>
    </Dialog>
  );
}
