"use client";

import { toApiPath } from "@/lib/api/client";
import { getStimulus, getStimulusZip } from "@/lib/api/series";
import { formatPlain, NBSP } from "@/lib/charts/format";
import { toTesterNotice } from "@/lib/exposure/notices";
import { DAY_RULES, type DayRuleName } from "@/lib/exposure/rules";
import { computeSessionDose } from "@/lib/exposure/session-dose";
import { toDoseText, toLevelText, toWholeDoseText } from "@/lib/exposure/words";
import { toCheckList } from "@/lib/series/check-list";
import type { Plan } from "@/lib/series/plan-schema";
import { listStimulusFiles } from "./stimulus-list";
import { LinkButton } from "../parts/button";
import { BlockNotice } from "../parts/notice";

interface PlanAsideProps {
  plan: Plan;
  model: string;
  kind: string;
  rule: DayRuleName;
  /** Null while nothing is saved: then there is nothing to download. */
  seriesId: string | null;
  /** The fields hold something else than what is saved. */
  unsaved: boolean;
}

/** What the plan implies: level and dose for the tester, the files, the check-list. */
export function PlanAside(props: PlanAsideProps) {
  return (
    <aside
      aria-label="What the plan implies"
      className="self-start border border-rule bg-sheet px-[22px] pt-[18px] pb-[22px] max-md:px-phone"
    >
      <h2 className="mb-2.5">What this plan implies</h2>
      <DoseOf {...props} />
      <StimulusFiles {...props} />
      <CheckList plan={props.plan} seriesId={props.seriesId} unsaved={props.unsaved} />
    </aside>
  );
}

const PLACE_NOTE = {
  "in-room": "at your place; indoors no reduction with distance",
  "next-room": "at your place, a closed door away",
  "outdoors-10m": "at your place, 10\u00a0m away",
} as const satisfies Record<Plan["place"]["tester"], string>;

function DoseOf({ plan, kind, rule }: PlanAsideProps) {
  const session = computeSessionDose(plan, rule);
  const notice = toTesterNotice(session, { where: "plan", stage: kind.includes("stage") });
  const day = DAY_RULES[rule];
  return (
    <>
      <div className="mb-3.5 grid grid-cols-2 gap-3.5">
        <p className="text-[14px]/[18px] text-ink-2">
          <b className="figures block text-[26px]/8 font-semibold tracking-[-0.02em] text-ink">
            {toLevelText(session.levelAtTesterDbA, "dB(A)")}
          </b>
          {PLACE_NOTE[session.tester]}
        </p>
        <p className="text-[14px]/[18px] text-ink-2">
          <b className="figures block text-[26px]/8 font-semibold tracking-[-0.02em] text-ink">
            {toWholeDoseText(session.dose)}
          </b>
          of a day’s dose by {session.ruleName}, conditioning counted
        </p>
      </div>
      <div aria-live="polite">{notice !== null && <BlockNotice notice={notice} stacked />}</div>
      <AsideHead title="Dose" id="dose">
        <span className="figures text-label text-ink-2">
          allowed: {day.criterionDbA}
          {NBSP}dB(A), {formatPlain(day.periodS / 3600)}
          {NBSP}h, {formatPlain(Math.round(day.exchangeDb * 10) / 10)}
          {NBSP}dB
        </span>
      </AsideHead>
      <table className="w-full border-collapse text-[14px]/[19px]" aria-labelledby="dose">
        <tbody>
          {session.lines.map((line) => (
            <tr key={`${line.kind} ${line.label}`}>
              <th scope="row" className="border-t border-rule py-1 pr-3 text-left font-normal">
                {line.label}
              </th>
              <td className="figures border-t border-rule py-1 text-right text-figure whitespace-nowrap">
                {toDoseText(line.dose)}
              </td>
            </tr>
          ))}
        </tbody>
        <tfoot>
          <tr className="font-semibold">
            <th scope="row" className="border-t border-ink py-1 pr-3 text-left font-semibold">
              planned session
            </th>
            <td className="figures border-t border-ink py-1 text-right text-figure whitespace-nowrap">
              {toDoseText(session.dose)}
            </td>
          </tr>
        </tfoot>
      </table>
    </>
  );
}

function AsideHead({
  title,
  id,
  children,
}: {
  title: string;
  id: string;
  children?: React.ReactNode;
}) {
  return (
    <div className="mt-5 mb-1.5 flex flex-wrap items-baseline justify-between gap-x-3 gap-y-1">
      <h3 id={id}>{title}</h3>
      {children}
    </div>
  );
}

function StimulusFiles({ plan, model, seriesId, unsaved }: PlanAsideProps) {
  const files = listStimulusFiles(plan, model);
  const ready = seriesId !== null && !unsaved;
  return (
    <>
      <AsideHead title="Stimulus files" id="stimulus-files">
        {ready && (
          <LinkButton size="small" href={toApiPath(getStimulusZip, { seriesId })} download>
            Download all, ZIP
          </LinkButton>
        )}
      </AsideHead>
      {!ready && (
        <p className="mb-1 text-small text-ink-2">
          {seriesId === null
            ? "Save the plan to download them."
            : "Save the changes to download them."}
        </p>
      )}
      <ul aria-labelledby="stimulus-files">
        {files.map((file) => (
          <li
            key={file.slot}
            className="figures flex justify-between gap-3 py-[3px] text-[13px]/[19px] max-md:min-h-8"
          >
            {ready ? (
              <a
                className="min-w-0 break-all"
                href={toApiPath(getStimulus, { seriesId, slot: file.slot })}
                download={file.name}
              >
                {file.name}
              </a>
            ) : (
              <span className="min-w-0 break-all">{file.name}</span>
            )}
            <span className="text-right whitespace-nowrap text-ink-2">{file.note}</span>
          </li>
        ))}
      </ul>
    </>
  );
}

function CheckList({
  plan,
  seriesId,
  unsaved,
}: Pick<PlanAsideProps, "plan" | "seriesId" | "unsaved">) {
  return (
    <>
      <AsideHead title="Capture check-list" id="check-list">
        {seriesId !== null && !unsaved && (
          <LinkButton size="small" href={`/series/${seriesId}/check-list`}>
            Print
          </LinkButton>
        )}
      </AsideHead>
      <ul aria-labelledby="check-list" className="text-[15px]/[21px]">
        {toCheckList(plan).map((line) => (
          <li key={line} className="grid grid-cols-[17px_1fr] gap-[9px] py-[3px]">
            <span
              aria-hidden="true"
              className="mt-[3px] size-[15px] rounded-control border-[1.5px] border-edge bg-sheet"
            />
            {line}
          </li>
        ))}
      </ul>
    </>
  );
}
