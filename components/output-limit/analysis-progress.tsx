import type { AnalysisView } from "@/lib/api/analyses";
import { ProgressBar } from "../parts/progress-bar";
import { VerdictMark } from "../parts/verdict";

const MARKS = { done: "ok", going: "going" } as const;

/** Progress by run and stage; the wall appears whole, when every run is in. */
export function AnalysisProgress({ analysis }: { analysis: AnalysisView }) {
  const { progress } = analysis;
  const share = progress === null || progress.total === 0 ? 0 : progress.done / progress.total;
  const say =
    progress === null ? "waiting for a worker" : `${progress.done} of ${progress.total} stages`;
  return (
    <section aria-label="Progress of the analysis">
      {progress !== null && progress.runs.length > 0 && (
        <table className="figures w-full max-w-[720px] text-figure">
          <caption className="sr-only">Stages by run</caption>
          <tbody>
            {progress.runs.map((run) => (
              <tr key={run.file} className="border-b border-rule">
                <th scope="row" className="py-1.5 pr-4 text-left font-semibold">
                  {run.label}
                </th>
                {run.stages.map(({ stage, state }) => (
                  <td key={stage} className="py-1.5 pr-4 text-ink-2">
                    <span className="inline-flex items-center gap-1.5">
                      {state === "waiting" ? (
                        <span aria-hidden="true" className="w-[13px] text-center">
                          ·
                        </span>
                      ) : (
                        <VerdictMark kind={MARKS[state]} size={13} />
                      )}
                      {stage}
                      <span className="sr-only">, {state}</span>
                    </span>
                  </td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      )}
      <p className="mt-3 flex flex-wrap items-center gap-3" aria-live="polite">
        <b>Analysing</b>
        <ProgressBar label="Analysis" done={share} say={say} className="block w-[240px]" />
        <span className="figures text-figure">{say}</span>
      </p>
    </section>
  );
}
