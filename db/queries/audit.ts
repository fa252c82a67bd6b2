/** The audit trail: written in the transaction of the act, never changed. */
import { sql } from "kysely";
import type { TrailRooms } from "../../lib/labs/trail-about";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";

export interface AuditEvent {
  /** Dotted kebab-case, past tense: "run.uploaded", "member.roles-changed". */
  act: string;
  subjectType: string;
  subjectId: string;
  seriesId?: string;
  /** Figures, names, reason; JSON-safe. */
  details?: Record<string, unknown>;
}

export interface AuditRow {
  id: number;
  at: Date;
  accountId: string | null;
  /** Name of the person; null where a worker or the command line acted. */
  name: string | null;
  tokenId: string | null;
  tokenName: string | null;
  act: string;
  subjectType: string;
  subjectId: string;
  seriesId: string | null;
  details: Record<string, unknown>;
}

/** @param by the scope of the transaction: lab, account and token behind the act. */
export async function recordEvent(trx: Trx, by: LabScope, event: AuditEvent): Promise<void> {
  await trx
    .insertInto("audit_events")
    .values({
      lab_id: by.labId,
      account_id: by.accountId,
      token_id: by.tokenId ?? null,
      act: event.act,
      subject_type: event.subjectType,
      subject_id: event.subjectId,
      series_id: event.seriesId ?? null,
      details: JSON.stringify(event.details ?? {}),
    })
    .execute();
}

/** Newest first. */
export async function listSeriesEvents(
  trx: Trx,
  labId: string,
  seriesId: string,
): Promise<AuditRow[]> {
  return eventsOf(trx, labId).where("e.series_id", "=", seriesId).limit(2000).execute();
}

/** The lab-wide trail, newest first. @param before id of the oldest event already seen. */
export async function listLabEvents(
  trx: Trx,
  labId: string,
  page: { before?: number | undefined; limit: number; about?: TrailRooms | undefined },
): Promise<AuditRow[]> {
  const { before, about } = page;
  const room = sql<string>`split_part(e.act, '.', 1)`;
  return eventsOf(trx, labId)
    .limit(page.limit)
    .$if(before !== undefined, (events) => events.where("e.id", "<", before ?? 0))
    .$if(about !== undefined, (events) =>
      events.where(room, about?.only === false ? "not in" : "in", about?.rooms ?? []),
    )
    .execute();
}

function eventsOf(trx: Trx, labId: string) {
  return trx
    .selectFrom("audit_events as e")
    .leftJoin("accounts as a", "a.id", "e.account_id")
    .leftJoin("api_tokens as t", "t.id", "e.token_id")
    .select([
      "e.id",
      "e.at",
      "e.account_id as accountId",
      "a.name",
      "e.token_id as tokenId",
      "t.name as tokenName",
      "e.act",
      "e.subject_type as subjectType",
      "e.subject_id as subjectId",
      "e.series_id as seriesId",
      "e.details",
    ])
    .where("e.lab_id", "=", labId)
    .orderBy("e.id", "desc");
}
