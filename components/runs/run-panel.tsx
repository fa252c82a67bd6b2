"use client";

import { useState } from "react";
import { toApiPath } from "@/lib/api/client";
import { downloadRun, type RunView } from "@/lib/api/runs";
import { formatNumber, NBSP } from "@/lib/charts/format";
import type { LevelPaint } from "@/lib/charts/tokens";
import type { ArrivalCheck, ArrivalReport } from "@/lib/runs/arrival-schema";
import { Moment } from "../frame/moment";
import { Button, LinkButton } from "../parts/button";
import { Select } from "../parts/field";
import { joinClasses } from "../parts/join-classes";
import { FileChoice } from "../plan/file-choice";
import { RECORDING_TYPES } from "./drop-zone";
import { EnvelopeFigure } from "./envelope-figure";
import { ReasonDialog } from "./reason-dialog";
import type { RunActs } from "./run-acts";
import type { RunRow } from "./run-rows";
import { toSpeakingChecks } from "./verdict-words";

interface RunPanelProps {
  row: RunRow;
  run: RunView;
  paint: LevelPaint | undefined;
  mayCapture: boolean;
  acts: RunActs;
}

type Question = "keep" | "exclude" | null;

/** The row below a recording: fault, what it spoils, the remedy, and the place in the sweep. */
export function RunPanel({ row, run, paint, mayCapture, acts }: RunPanelProps) {
  const [question, setQuestion] = useState<Question>(null);
  const checks = toSpeakingChecks(run);
  const [first, ...others] = checks;
  const fault = run.state === "failed";
  return (
    <div
      className={joinClasses(
        "grid gap-x-7 gap-y-4 border-l-4 bg-page py-3 pr-4 pl-3.5 lg:grid-cols-[minmax(0,1fr)_minmax(0,560px)] lg:items-center",
        fault ? "border-fault" : "border-edge",
      )}
    >
      <div className="min-w-0">
        {first === undefined ? (
          <h3>{run.report === null ? "Being checked." : "Every check passed."}</h3>
        ) : (
          <CheckWords check={first} main />
        )}
        {run.reason !== null && (
          <p className="mt-1 text-small">
            {run.state === "excluded" ? "Excluded" : "Kept"}: “{run.reason}”
          </p>
        )}
        {others.length > 0 && (
          <ul className="mt-2">
            {others.map((check) => (
              <li key={check.code} className="mt-1.5">
                <CheckWords check={check} />
              </li>
            ))}
          </ul>
        )}
        {run.report !== null && <FileFacts report={run.report} run={run} />}
        <div className="mt-2.5 flex flex-wrap items-center gap-2">
          {mayCapture && (
            <RunButtons
              row={row}
              run={run}
              acts={acts}
              onQuestion={(asked) => setQuestion(asked)}
            />
          )}
          {run.removed_at === null ? (
            <LinkButton
              tone="quiet"
              size="small"
              href={toApiPath(downloadRun, { runId: run.id })}
              download={run.file_name}
            >
              Download
            </LinkButton>
          ) : (
            <p className="text-small text-ink-2">
              Its bytes were removed for good, <Moment at={run.removed_at} as="day" />.
            </p>
          )}
        </div>
      </div>
      {run.report !== null && run.report.envelope.low.length > 0 && (
        <EnvelopeFigure
          report={run.report}
          check={checks.find((check) => check.where !== null) ?? null}
          paint={paint}
        />
      )}
      {question === "keep" && (
        <ReasonDialog
          title={`Keep ${row.planned.label}, with a reason`}
          words="The recording enters the analysis with its fault. The reason stands beside it wherever its figures are used."
          act="Keep it"
          onGive={(reason) => acts.act(run, { act: "keep", reason })}
          onClose={() => setQuestion(null)}
        />
      )}
      {question === "exclude" && (
        <ReasonDialog
          title={`Exclude ${row.planned.label}, with a reason`}
          words="The recording stays with the series but enters no analysis. It can be brought back."
          act="Exclude it"
          onGive={(reason) => acts.act(run, { act: "exclude", reason })}
          onClose={() => setQuestion(null)}
        />
      )}
    </div>
  );
}

function CheckWords({ check, main = false }: { check: ArrivalCheck; main?: boolean }) {
  return (
    <>
      {main ? (
        <h3>{check.finding}</h3>
      ) : (
        <p className="text-small font-semibold">{check.finding}</p>
      )}
      {(check.spoils !== "" || check.remedy !== "") && (
        <p className="mt-0.5 text-small">
          {check.spoils} {check.remedy}
        </p>
      )}
    </>
  );
}

function FileFacts({ report, run }: { report: ArrivalReport; run: RunView }) {
  const facts = [
    report.format,
    // A table has neither rate nor channels.
    ...(report.rate_Hz === 0
      ? []
      : [
          `${formatNumber(report.rate_Hz / 1000, report.rate_Hz % 1000 === 0 ? 0 : 1)}${NBSP}kHz`,
          report.channels === 1 ? "1 channel" : `channel ${report.channel} of ${report.channels}`,
        ]),
    ...(report.latency_s === null
      ? []
      : [`latency ${formatNumber(report.latency_s * 1000, 0)}${NBSP}ms`]),
    ...(report.drift_ppm === null ? [] : [`drift ${formatNumber(report.drift_ppm)}${NBSP}ppm`]),
    ...(run.uploaded_by === null ? [] : [`sent by ${run.uploaded_by.name}`]),
  ];
  return <p className="figures mt-1.5 text-label text-ink-2">{facts.join(" · ")}</p>;
}

interface RunButtonsProps {
  row: RunRow;
  run: RunView;
  acts: RunActs;
  onQuestion: (question: Question) => void;
}

function RunButtons({ row, run, acts, onQuestion }: RunButtonsProps) {
  const [fault, setFault] = useState<string | null>(null);
  const act = (what: Parameters<RunActs["act"]>[1]): void => {
    setFault(null);
    acts.act(run, what).catch((error: unknown) => {
      setFault(error instanceof Error ? error.message : "It was not taken. Try again.");
    });
  };
  const channels = run.report?.channels ?? 1;
  const { state } = run;
  return (
    <>
      {state !== "excluded" && state !== "replaced" && (
        <FileChoice
          words="Replace file"
          accept={RECORDING_TYPES}
          onChoose={(file) => acts.replace(row, [file])}
        />
      )}
      {state === "failed" && (
        <Button tone="quiet" size="small" onClick={() => onQuestion("keep")}>
          Keep it, with a reason
        </Button>
      )}
      {state === "kept" && (
        <Button tone="quiet" size="small" onClick={() => act({ act: "withdraw-keep" })}>
          Withdraw the reason
        </Button>
      )}
      {state !== "excluded" && state !== "replaced" && state !== "checking" && (
        <Button tone="quiet" size="small" onClick={() => onQuestion("exclude")}>
          Exclude, with a reason
        </Button>
      )}
      {state === "excluded" && (
        <Button size="small" onClick={() => act({ act: "bring-back" })}>
          Bring it back
        </Button>
      )}
      {channels > 1 && state !== "replaced" && (
        <label className="inline-flex items-center gap-2 text-small text-ink-2">
          channel
          <Select
            size="normal"
            figures
            value={String(run.channel)}
            onChange={(event) =>
              act({ act: "choose-channel", channel: Number(event.target.value) })
            }
          >
            {Array.from({ length: channels }, (_, at) => (
              <option key={at} value={at + 1}>
                {at + 1}
              </option>
            ))}
          </Select>
        </label>
      )}
      {fault !== null && (
        <p role="alert" className="w-full text-small text-fault">
          {fault}
        </p>
      )}
    </>
  );
}
