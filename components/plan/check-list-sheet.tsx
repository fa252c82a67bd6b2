import type { ReactNode } from "react";
import type { SeriesView } from "@/lib/api/series";
import { formatNumber, formatPlain, NBSP } from "@/lib/charts/format";
import { toTesterNotice } from "@/lib/exposure/notices";
import type { DayRuleName } from "@/lib/exposure/rules";
import { computeSessionDose } from "@/lib/exposure/session-dose";
import { toWholeDoseText } from "@/lib/exposure/words";
import { toCheckList } from "@/lib/series/check-list";
import { LinkButton } from "../parts/button";
import { BlockNotice } from "../parts/notice";
import { ENVIRONMENT_WORDS, TESTER_PLACE_WORDS, toPlanLine } from "./plan-words";
import { PrintButton } from "./print-button";

interface CheckListSheetProps {
  series: SeriesView;
  rule: DayRuleName;
}

/** What the tester takes to the loudspeaker: notice, steps to tick, runs to note. */
export function CheckListSheet({ series, rule }: CheckListSheetProps) {
  const { loudspeaker, plan } = series;
  const session = computeSessionDose(plan, rule);
  const stage = loudspeaker.kind.includes("stage");
  const notice = toTesterNotice(session, { where: "plan", stage });
  return (
    <main className="mx-auto max-w-[820px] bg-sheet px-10 py-8 max-md:px-phone print:max-w-none print:p-0">
      <div className="mb-5 flex flex-wrap gap-2.5 print:hidden">
        <PrintButton />
        <LinkButton tone="quiet" href={`/series/${series.id}/plan`}>
          Back to the plan
        </LinkButton>
      </div>
      <h1>
        {series.number} {loudspeaker.model}
      </h1>
      <p className="mt-1 text-ink-2">
        {loudspeaker.maker}, {loudspeaker.kind}
        {loudspeaker.serial !== "" && `, unit ${loudspeaker.serial}`};{" "}
        {ENVIRONMENT_WORDS[plan.place.environment]}, {formatPlain(plan.place.distance_m)}
        {NBSP}m; {toPlanLine(plan)}. Tester {TESTER_PLACE_WORDS[plan.place.tester]};{" "}
        {toWholeDoseText(session.dose)} of a day’s dose by {session.ruleName}.
      </p>
      {notice !== null && (
        <div className="mt-4">
          <BlockNotice notice={notice} />
        </div>
      )}
      <h2 className="mt-6">Capture check-list</h2>
      <ul className="mt-2">
        {toCheckList(plan).map((line) => (
          <TickLine key={line}>{line}</TickLine>
        ))}
      </ul>
      <h2 className="mt-6">Recordings</h2>
      <table className="mt-2 w-full border-collapse text-left">
        <thead>
          <tr className="figures text-label text-ink-2">
            <Head>done</Head>
            <Head>run</Head>
            <Head>file</Head>
            <Head right>peak, dBFS</Head>
            <Head>note</Head>
          </tr>
        </thead>
        <tbody>
          {series.planned_runs.map((run) => (
            <tr key={run.slot} className="break-inside-avoid">
              <td className="border-t border-rule py-1.5 pr-3">
                <Box />
              </td>
              <td className="border-t border-rule py-1.5 pr-3">{run.label}</td>
              <td className="figures border-t border-rule py-1.5 pr-3 text-[13px] break-all">
                {run.fileName}
              </td>
              <td className="figures border-t border-rule py-1.5 pr-3 text-right text-[13px]">
                {run.stimulusPeakDbfs === null ? "" : formatNumber(run.stimulusPeakDbfs)}
              </td>
              <td className="w-1/4 border-t border-rule py-1.5">
                <span className="sr-only">to be written</span>
              </td>
            </tr>
          ))}
        </tbody>
      </table>
      <p className="figures mt-8 text-label text-ink-2">date, tester:</p>
    </main>
  );
}

function Head({ children, right = false }: { children: ReactNode; right?: boolean }) {
  return (
    <th
      scope="col"
      className={`border-b border-ink py-1.5 pr-3 font-medium ${right ? "text-right" : ""}`}
    >
      {children}
    </th>
  );
}

function Box() {
  return (
    <svg width="15" height="15" viewBox="0 0 15 15" role="img" aria-label="to be ticked">
      <rect x="0.75" y="0.75" width="13.5" height="13.5" className="fill-none stroke-ink" />
    </svg>
  );
}

function TickLine({ children }: { children: ReactNode }) {
  return (
    <li className="grid grid-cols-[17px_1fr] items-start gap-2.5 border-t border-rule py-1.5">
      <span className="pt-1">
        <Box />
      </span>
      {children}
    </li>
  );
}
