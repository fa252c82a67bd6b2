"use client";

import { useMutation } from "@tanstack/react-query";
import { useFormContext, useWatch } from "react-hook-form";
import { callApi } from "@/lib/api/client";
import { sendMicrophoneFile } from "@/lib/api/microphones";
import { formatFrequency, formatSignedDb } from "@/lib/charts/format";
import { Button } from "../parts/button";
import { Select } from "../parts/field";
import { FileChoice } from "./file-choice";
import type { PlanFormInput } from "./plan-form-schema";

/** The microphone's own file: its response, or the correction of it. Sent at once; the plan names it. */
export function MicrophoneField() {
  const { control, setValue } = useFormContext<PlanFormInput>();
  const microphone = useWatch({ control, name: "plan.microphone" }) ?? null;
  const setMicrophone = (next: PlanFormInput["plan"]["microphone"]): void =>
    setValue("plan.microphone", next, { shouldDirty: true });
  const send = useMutation({
    mutationFn: (file: File) =>
      callApi(sendMicrophoneFile, { query: { file_name: file.name }, body: file }),
    onSuccess: ({ file_name, digest }) =>
      setMicrophone({ file_name, digest, kind: microphone?.kind ?? "response" }),
  });
  return (
    <div className="mt-3">
      <p className="figures mb-[5px] text-label font-medium text-ink-2">microphone file</p>
      <FileChoice
        words={microphone === null ? "Choose a microphone file" : "Choose another"}
        accept=".txt,.csv,.tsv,.frd,.cal,text/plain"
        busy={send.isPending}
        onChoose={(file) => send.mutate(file)}
      >
        {microphone === null ? (
          <span className="text-small text-ink-2">
            None: the microphone counts as flat, and the result says so.
          </span>
        ) : (
          <>
            <span className="figures text-figure break-all">{microphone.file_name}</span>
            <Select
              aria-label="The file holds"
              size="normal"
              value={microphone.kind}
              onChange={(event) =>
                setMicrophone({
                  ...microphone,
                  kind: event.target.value === "correction" ? "correction" : "response",
                })
              }
            >
              <option value="response">its response</option>
              <option value="correction">a correction</option>
            </Select>
            <Button tone="quiet" size="small" onClick={() => setMicrophone(null)}>
              Take it out
            </Button>
          </>
        )}
      </FileChoice>
      {send.isError && (
        <p role="alert" className="mt-1 text-small text-fault">
          {send.error.message}
        </p>
      )}
      {send.isSuccess && microphone !== null && (
        <p className="mt-1 text-hint text-ink-2">
          {send.data.points} points from {formatFrequency(send.data.from_Hz)} to{" "}
          {formatFrequency(send.data.to_Hz)}, {formatSignedDb(send.data.lowest_dB)} to{" "}
          {formatSignedDb(send.data.highest_dB)}.
        </p>
      )}
    </div>
  );
}
