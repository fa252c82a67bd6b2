/** Runs: the recordings that stand in a series, and planned runs that go without one. */
import { sql, type Selectable } from "kysely";
import { AppError } from "../../lib/errors/app-error";
import type { ArrivalReport, RunState } from "../../lib/runs/arrival-schema";
import type { RecordingRole } from "../../lib/series/planned-runs";
import type { ColumnChoice } from "../../lib/series/table-columns";
import type { Db, Trx } from "../client";
import type { RunsTable } from "../schema/runs";
import type { SlotExcusesTable } from "../schema/slot-excuses";

export type RunRow = Selectable<RunsTable> & {
  bytes: number;
  /** When its bytes were removed for good. */
  removed_at: Date | null;
  uploadedByName: string | null;
  reasonByName: string | null;
};

/** A run that is neither replaced nor excluded holds its slot. */
const GONE = ["replaced", "excluded"] as const;

/** In the order of upload. */
export async function listRuns(trx: Trx, labId: string, seriesId: string): Promise<RunRow[]> {
  return runsOf(trx, labId)
    .where("r.series_id", "=", seriesId)
    .orderBy("r.uploaded_at")
    .orderBy("r.id")
    .execute();
}

/** @throws AppError "not-found" */
export async function getRun(trx: Trx, labId: string, runId: string): Promise<RunRow> {
  const row = await runsOf(trx, labId).where("r.id", "=", runId).executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such recording.");
  return row;
}

export interface NewRun {
  seriesId: string;
  slot: string | null;
  role: RecordingRole | null;
  levelDb: number | null;
  variant: string | null;
  fileName: string;
  digest: string;
  channel: number;
  columns?: ColumnChoice | null;
  uploadedBy: string;
  uploadedByToken: string | null;
}

/** A new take: one that held the slot before becomes `replaced`. */
export async function createRun(trx: Trx, labId: string, run: NewRun): Promise<string> {
  const take = run.slot === null ? 1 : await clearSlot(trx, labId, run.seriesId, run.slot);
  const row = await trx
    .insertInto("runs")
    .values({
      lab_id: labId,
      series_id: run.seriesId,
      slot: run.slot,
      take,
      role: run.role,
      level_db: run.levelDb,
      variant: run.variant,
      file_name: run.fileName,
      digest: run.digest,
      channel: run.channel,
      columns: run.columns == null ? null : JSON.stringify(run.columns),
      uploaded_by: run.uploadedBy,
      uploaded_by_token: run.uploadedByToken,
    })
    .returning("id")
    .executeTakeFirstOrThrow();
  return row.id;
}

/** Moves a run to a slot as its newest take, or to none. */
export async function assignRun(
  trx: Trx,
  labId: string,
  run: { id: string; seriesId: string },
  place: {
    slot: string;
    role: RecordingRole;
    levelDb: number | null;
    variant: string | null;
  } | null,
): Promise<void> {
  const take = place === null ? 1 : await clearSlot(trx, labId, run.seriesId, place.slot, run.id);
  await updateRun(trx, labId, run.id, {
    slot: place?.slot ?? null,
    role: place?.role ?? null,
    level_db: place?.levelDb ?? null,
    variant: place?.variant ?? null,
    take,
  });
}

export type RunChange = Partial<{
  slot: string | null;
  role: RecordingRole | null;
  level_db: number | null;
  variant: string | null;
  take: number;
  wanted_slot: string | null;
  channel: number;
  state: RunState;
  reason: string | null;
  reason_by: string | null;
  reason_at: Date | null;
}>;

/** @throws AppError "not-found" */
export async function updateRun(
  trx: Trx,
  labId: string,
  runId: string,
  change: RunChange,
): Promise<void> {
  const row = await trx
    .updateTable("runs")
    .set({ ...change, changed_at: new Date() })
    .where("lab_id", "=", labId)
    .where("id", "=", runId)
    .returning("id")
    .executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such recording.");
}

/**
 * Writes what the arrival checks found, unless somebody acted meanwhile.
 *
 * @param checked what the check read: another channel or place since then wants another check.
 * @returns whether the run was still being checked.
 */
export async function saveReport(
  trx: Trx,
  labId: string,
  checked: { runId: string; channel: number; slot: string | null },
  outcome: { state: "passed" | "warned" | "failed"; report: ArrivalReport },
): Promise<boolean> {
  const row = await trx
    .updateTable("runs")
    .set({
      state: outcome.state,
      report: JSON.stringify(outcome.report),
      changed_at: new Date(),
    })
    .where("lab_id", "=", labId)
    .where("id", "=", checked.runId)
    .where("state", "=", "checking")
    .where("channel", "=", checked.channel)
    .where("slot", "is not distinct from", checked.slot)
    .returning("id")
    .executeTakeFirst();
  return row !== undefined;
}

/** For a run that was never in the plan. The recording's row stays for the sweep to look at. */
export async function deleteRun(trx: Trx, labId: string, runId: string): Promise<void> {
  await trx.deleteFrom("runs").where("lab_id", "=", labId).where("id", "=", runId).execute();
}

/** Other runs of the series with the same bytes: the duplicate check. */
export async function findDuplicates(
  trx: Trx,
  labId: string,
  run: { id: string; seriesId: string; digest: string },
): Promise<{ id: string; slot: string | null; fileName: string }[]> {
  return trx
    .selectFrom("runs")
    .select(["id", "slot", "file_name as fileName"])
    .where("lab_id", "=", labId)
    .where("series_id", "=", run.seriesId)
    .where("digest", "=", run.digest)
    .where("id", "!=", run.id)
    .where("state", "not in", GONE)
    .orderBy("uploaded_at")
    .execute();
}

/** Checks that nobody finished, over all labs: for the sweep. */
export async function findForgottenChecks(
  db: Db,
  olderThanS: number,
): Promise<{ labId: string; runId: string }[]> {
  const { rows } = await sql<{ lab_id: string; run_id: string }>`
    select lab_id, run_id from find_forgotten_checks(make_interval(secs => ${olderThanS}))`.execute(
    db,
  );
  return rows.map((row) => ({ labId: row.lab_id, runId: row.run_id }));
}

export async function listExcuses(
  trx: Trx,
  labId: string,
  seriesId: string,
): Promise<Selectable<SlotExcusesTable>[]> {
  return trx
    .selectFrom("slot_excuses")
    .selectAll()
    .where("lab_id", "=", labId)
    .where("series_id", "=", seriesId)
    .execute();
}

/** @param reason null withdraws the excuse. */
export async function setExcuse(
  trx: Trx,
  labId: string,
  accountId: string,
  excuse: { seriesId: string; slot: string; reason: string | null },
): Promise<void> {
  const { seriesId, slot, reason } = excuse;
  if (reason === null) {
    await trx
      .deleteFrom("slot_excuses")
      .where("lab_id", "=", labId)
      .where("series_id", "=", seriesId)
      .where("slot", "=", slot)
      .execute();
    return;
  }
  await trx
    .insertInto("slot_excuses")
    .values({ lab_id: labId, series_id: seriesId, slot, reason, excused_by: accountId })
    .onConflict((conflict) =>
      conflict
        .columns(["series_id", "slot"])
        .doUpdateSet({ reason, excused_by: accountId, excused_at: new Date() }),
    )
    .execute();
}

/** @returns the number of the next take. */
async function clearSlot(
  trx: Trx,
  labId: string,
  seriesId: string,
  slot: string,
  exceptRunId?: string,
): Promise<number> {
  const takes = await trx
    .selectFrom("runs")
    .select(["id", "take", "state"])
    .where("lab_id", "=", labId)
    .where("series_id", "=", seriesId)
    .where("slot", "=", slot)
    .execute();
  const others = takes.filter((run) => run.id !== exceptRunId);
  for (const run of others) {
    if (run.state === "replaced" || run.state === "excluded") continue;
    await updateRun(trx, labId, run.id, { state: "replaced" });
  }
  return others.reduce((last, run) => Math.max(last, run.take), 0) + 1;
}

function runsOf(trx: Trx, labId: string) {
  return trx
    .selectFrom("runs as r")
    .innerJoin("recordings as f", (join) =>
      join.onRef("f.lab_id", "=", "r.lab_id").onRef("f.digest", "=", "r.digest"),
    )
    .leftJoin("accounts as u", "u.id", "r.uploaded_by")
    .leftJoin("accounts as w", "w.id", "r.reason_by")
    .selectAll("r")
    .select(["f.bytes", "f.removed_at", "u.name as uploadedByName", "w.name as reasonByName"])
    .where("r.lab_id", "=", labId);
}
