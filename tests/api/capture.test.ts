import { execFileSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { inLab } from "../../db/in-lab";
import { getAnalysis as getAnalysisRow } from "../../db/queries/analyses";
import { getResult, listAnalyses, startAnalysis } from "../../lib/api/analyses";
import { requestApi } from "../../lib/api/client";
import { downloadRun, listRuns } from "../../lib/api/runs";
import { getSeriesHistory, listSeries } from "../../lib/api/series";
import { bundlePath } from "../../scripts/setup/bundles.mjs";
import { getTestSeries } from "../support/test-series";
import { uploadWhole } from "../support/tus";
import {
  call,
  openApiBench,
  planTestSeries,
  seriesInState,
  target,
  type ApiBench,
} from "./support";

let bench: ApiBench;
beforeAll(async () => {
  bench = await openApiBench();
});
afterAll(() => bench.stop());

describe("from plan to result by script", () => {
  it("takes a whole ladder at once, analyses by itself and answers the command's own bytes", async () => {
    const series = await planTestSeries(bench);
    const params = { seriesId: series.id };
    expect(series.state).toBe("planned");
    const { files } = getTestSeries();
    // Loudest first: files for locked levels wait and move up by themselves.
    await Promise.all(
      [...files]
        .reverse()
        .map((file) =>
          uploadWhole(target(bench), file.bytes, { seriesId: series.id, fileName: file.name }),
        ),
    );
    const reviewed = await seriesInState(bench, series.id, "in review", "analysis failed");
    expect(reviewed.failure).toBeNull();
    expect(reviewed.state).toBe("in review");

    const { runs, captured, planned, slots } = await call(bench, listRuns, { params });
    expect(captured).toBe(planned);
    expect(new Set(runs.map((run) => run.slot))).toEqual(new Set(files.map((file) => file.slot)));
    expect(runs).toHaveLength(files.length);
    expect(new Set(runs.map((run) => run.state))).toEqual(new Set(["passed"]));
    expect(slots.every((slot) => slot.open)).toBe(true);

    const analysisId = reviewed.latest_done_analysis?.id ?? "";
    const text = await (
      await requestApi(
        getResult,
        { params: { analysisId } },
        { baseUrl: bench.product.url, token: bench.all.token },
      )
    ).text();
    expect(text).toBe(await analyseByCommand(analysisId));
    const result = await call(bench, getResult, { params: { analysisId } });
    expect(result.bands.length).toBeGreaterThan(20);

    const list = await call(bench, listSeries, { query: {} });
    expect(list.series[0]).toMatchObject({ id: series.id, state: "in review", captured: planned });
    expect(list.series[0]?.limits.map((limit) => limit.criterion)).toEqual(
      result.settings.criteria,
    );

    const { events } = await call(bench, getSeriesHistory, { params });
    expect(events[0]?.words).toBe("analysis version 1 is done");
    expect(events.at(-1)?.act).toBe("series.created");

    // The same recordings, settings and engine make no new version.
    const again = await call(bench, startAnalysis, { params });
    expect([again.id, again.state]).toEqual([analysisId, "done"]);
    expect((await call(bench, listAnalyses, { params })).analyses).toHaveLength(1);

    const run = runs[0];
    const bytes = await (
      await requestApi(
        downloadRun,
        { params: { runId: run?.id ?? "" } },
        { baseUrl: bench.product.url, token: bench.all.token },
      )
    ).bytes();
    expect(
      Buffer.from(bytes).equals(
        files.find((file) => file.slot === run?.slot)?.bytes ?? bytes.subarray(1),
      ),
    ).toBe(true);
  });
});

/** The same series and files as a folder, through the built command. */
async function analyseByCommand(analysisId: string): Promise<string> {
  const { inputs } = await inLab(bench.app, bench.all.scope, (trx) =>
    getAnalysisRow(trx, bench.labId, analysisId),
  );
  const folder = mkdtempSync(join(tmpdir(), "tidemark-folder-"));
  try {
    writeFileSync(join(folder, "series.json"), JSON.stringify(inputs.series));
    const { files } = getTestSeries();
    for (const { file } of inputs.files) {
      const found = files.find((one) => one.name === file);
      if (found !== undefined) writeFileSync(join(folder, file), found.bytes);
    }
    return execFileSync(process.execPath, [bundlePath("analyse"), folder], {
      encoding: "utf8",
      maxBuffer: 1 << 28,
      stdio: ["ignore", "pipe", "ignore"],
    });
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
