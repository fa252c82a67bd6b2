/** Progress of an analysis by run and stage, as the page draws it. */
import type { OnProgress } from "../analysis/types";
import type { Progress } from "../api/series";

/** Stages that each run goes through, in order; reading counts to the first. */
const RUN_STAGES = ["aligned", "harmonics", "floor"] as const;
/** Stages of the whole series that follow, in order. */
const SERIES_STAGES = ["levels", "onset"] as const;

type StageState = Progress["runs"][number]["stages"][number]["state"];

/** @param runs in the order of the series. */
export function startProgress(runs: readonly { file: string; label: string }[]): Progress {
  return {
    done: 0,
    total: runs.length * RUN_STAGES.length + SERIES_STAGES.length,
    runs: runs.map(({ file, label }) => ({
      file,
      label,
      stages: RUN_STAGES.map((stage) => ({ stage, state: "waiting" })),
    })),
  };
}

/**
 * Takes one event of the engine in. A stage that is reported is going until done reaches total;
 * every stage before it in the same run is done, and a stage of the series means that all runs are.
 */
export function advanceProgress(progress: Progress, event: Parameters<OnProgress>[0]): Progress {
  const seriesStage = SERIES_STAGES.findIndex((stage) => stage === event.stage);
  const runs = progress.runs.map((run) => {
    if (seriesStage >= 0) return withStates(run, () => "done");
    if (run.file !== event.file) return run;
    const at = Math.max(
      0,
      RUN_STAGES.findIndex((stage) => stage === event.stage),
    );
    const ended = event.stage !== "read" && event.done >= event.total;
    return withStates(run, (index, before) =>
      index < at || before === "done" || (index === at && ended)
        ? "done"
        : index === at
          ? "going"
          : before,
    );
  });
  const ofRuns = runs.flatMap((run) => run.stages).filter((s) => s.state === "done").length;
  const ofSeries = seriesStage < 0 ? 0 : seriesStage + (event.done >= event.total ? 1 : 0);
  return { ...progress, done: Math.max(progress.done, ofRuns + ofSeries), runs };
}

function withStates(
  run: Progress["runs"][number],
  to: (index: number, before: StageState) => StageState,
): Progress["runs"][number] {
  return {
    ...run,
    stages: run.stages.map((stage, index) => ({ ...stage, state: to(index, stage.state) })),
  };
}
