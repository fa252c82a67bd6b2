/** The list of series: filter, search, sort, page; quick at ten thousand. */
import { sql, type SqlBool, type ExpressionBuilder, type Expression } from "kysely";
import type { SERIES_SORTS } from "../../lib/api/series";
import type { RunState } from "../../lib/runs/arrival-schema";
import type { Plan } from "../../lib/series/plan-schema";
import type { SeriesState } from "../../lib/series/vocabulary";
import type { Trx } from "../client";
import type { Database } from "../schema/database";
import type { ListSummary } from "../schema/series";
import { countDecided } from "./decisions";
import { toWords } from "./loudspeakers";

export interface SeriesFilter {
  search: string;
  state?: SeriesState | undefined;
  loudspeakerId?: string | undefined;
  archived: boolean;
}

export interface SeriesOrder {
  sort: (typeof SERIES_SORTS)[number];
  direction: "up" | "down";
}

export interface SeriesListRow {
  id: string;
  number: number;
  loudspeaker: { id: string; maker: string; model: string; kind: string; serial: string };
  state: SeriesState;
  plan: Plan;
  listSummary: ListSummary | null;
  /** Slots with a live recording, and how it stands. */
  liveRuns: { slot: string; state: RunState; levelDb: number | null }[];
  excusedSlots: string[];
  /** Places that runs asked for hold open. */
  requestedSlots: string[];
  /** Bands of the analysis that the list shows, and those with a decision. */
  bands: { total: number; decided: number };
  /** A publication is live. */
  published: boolean;
  /** Who changed it last. */
  changedBy: { id: string; name: string } | null;
  changedAt: Date;
}

export interface SeriesPage {
  rows: SeriesListRow[];
  /** Match search, loudspeaker and state. */
  found: number;
  /** In the lab, archived ones left out. */
  total: number;
  /** By state: the search counts, the state filter does not. */
  byState: Partial<Record<SeriesState, number>>;
}

/** @param page from 1. */
export async function listSeries(
  trx: Trx,
  labId: string,
  filter: SeriesFilter,
  order: SeriesOrder,
  page: { page: number; pageSize: number },
): Promise<SeriesPage> {
  const byState = await countByState(trx, labId, filter);
  const all = Object.values(byState).reduce((sum, count) => sum + count, 0);
  const narrowed =
    filter.archived || filter.loudspeakerId !== undefined || toWords(filter.search).length > 0;
  return {
    rows: await pageOfSeries(trx, labId, filter, order, page),
    found: filter.state === undefined ? all : (byState[filter.state] ?? 0),
    total: narrowed ? await countSeries(trx, labId) : all,
    byState,
  };
}

async function pageOfSeries(
  trx: Trx,
  labId: string,
  filter: SeriesFilter,
  order: SeriesOrder,
  { page, pageSize }: { page: number; pageSize: number },
): Promise<SeriesListRow[]> {
  // The page first, by index alone; what it shows is joined to its few rows.
  const found = trx
    .selectFrom("series as s")
    .select(["s.id", sql<number>`row_number() over (order by ${orderSql(order)})`.as("place")])
    .where((eb) => matches(eb, labId, filter))
    .orderBy(orderSql(order))
    .limit(pageSize)
    .offset((page - 1) * pageSize);
  const rows = await trx
    .with("found", () => found)
    .selectFrom("found")
    .innerJoin("series as s", "s.id", "found.id")
    .innerJoin("loudspeakers as l", "l.id", "s.loudspeaker_id")
    .leftJoin("accounts as a", "a.id", "s.changed_by")
    .select([
      "s.id",
      "s.number",
      "s.state",
      "s.plan",
      "s.list_summary as listSummary",
      "s.changed_at as changedAt",
      "l.id as loudspeakerId",
      "l.maker",
      "l.model",
      "l.kind",
      "l.serial",
      "a.id as changerId",
      "a.name as changerName",
      sql<SeriesListRow["liveRuns"]>`coalesce((select json_agg(json_build_object(
        'slot', r.slot, 'state', r.state, 'levelDb', r.level_db)) from runs r
        where r.lab_id = s.lab_id and r.series_id = s.id and r.slot is not null
          and r.state not in ('replaced', 'excluded')), '[]')`.as("liveRuns"),
      sql<string[]>`array(select e.slot from slot_excuses e where e.series_id = s.id)`.as(
        "excusedSlots",
      ),
      sql<string[]>`array(select q.slot from run_requests q
        where q.lab_id = s.lab_id and q.series_id = s.id and q.withdrawn_at is null)`.as(
        "requestedSlots",
      ),
      sql<boolean>`exists (select from publications p where p.lab_id = s.lab_id
        and p.series_id = s.id and p.state = 'live')`.as("published"),
    ])
    .orderBy("found.place")
    .execute();
  const shown = rows.flatMap((row) => row.listSummary?.analysis_id ?? []);
  const decided = await countDecided(trx, labId, shown);
  return rows.map((row) => ({
    id: row.id,
    number: row.number,
    loudspeaker: {
      id: row.loudspeakerId,
      maker: row.maker,
      model: row.model,
      kind: row.kind,
      serial: row.serial,
    },
    state: row.state,
    plan: row.plan,
    listSummary: row.listSummary,
    liveRuns: row.liveRuns,
    excusedSlots: row.excusedSlots,
    requestedSlots: row.requestedSlots,
    bands: decided.get(row.listSummary?.analysis_id ?? "") ?? { total: 0, decided: 0 },
    published: row.published,
    changedBy:
      row.changerId === null || row.changerName === null
        ? null
        : { id: row.changerId, name: row.changerName },
    changedAt: row.changedAt,
  }));
}

async function countByState(
  trx: Trx,
  labId: string,
  filter: SeriesFilter,
): Promise<Partial<Record<SeriesState, number>>> {
  const rows = await trx
    .selectFrom("series as s")
    .select((eb) => ["s.state", eb.fn.countAll<number>().as("n")])
    .where((eb) => matches(eb, labId, { ...filter, state: undefined }))
    .groupBy("s.state")
    .execute();
  return Object.fromEntries(rows.map((row) => [row.state, row.n]));
}

async function countSeries(trx: Trx, labId: string): Promise<number> {
  const row = await trx
    .selectFrom("series as s")
    .select((eb) => eb.fn.countAll<number>().as("n"))
    .where("s.lab_id", "=", labId)
    .where("s.archived_at", "is", null)
    .executeTakeFirstOrThrow();
  return row.n;
}

function matches(
  eb: ExpressionBuilder<Database & { s: Database["series"] }, "s">,
  labId: string,
  filter: SeriesFilter,
): Expression<SqlBool> {
  const conditions = [
    eb("s.lab_id", "=", labId),
    eb("s.archived_at", filter.archived ? "is not" : "is", null),
  ];
  if (filter.state !== undefined) conditions.push(eb("s.state", "=", filter.state));
  if (filter.loudspeakerId !== undefined) {
    conditions.push(eb("s.loudspeaker_id", "=", filter.loudspeakerId));
  }
  const words = toWords(filter.search).map(
    (word) => sql<SqlBool>`position(${word} in lower(s.loudspeaker_name || ' s-'
      || lpad(s.number::text, greatest(4, length(s.number::text)), '0'))) > 0`,
  );
  return eb.and([...conditions, ...words]);
}

const COLUMNS = {
  changed: sql.raw("s.changed_at"),
  name: sql.raw("lower(s.loudspeaker_name)"),
  number: sql.raw("s.number"),
  state: sql.raw("s.state_order"),
  reached: sql.raw("s.reached_db"),
} as const;

/** Ends in the number, so that pages never overlap; each order has its index. */
function orderSql({ sort, direction }: SeriesOrder) {
  const way = sql.raw(direction === "up" ? "asc" : "desc");
  if (sort === "number") return sql`${COLUMNS.number} ${way}`;
  if (sort === "reached") return sql`${COLUMNS.reached} ${way} nulls last, ${COLUMNS.number} desc`;
  // By name, the newest of a loudspeaker stands first.
  const then =
    sort === "name" ? (direction === "up" ? "desc" : "asc") : direction === "up" ? "asc" : "desc";
  return sql`${COLUMNS[sort]} ${way}, ${COLUMNS.number} ${sql.raw(then)}`;
}
