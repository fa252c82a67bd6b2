/** The audit trail: what was written stays. */
import { sql, type Kysely } from "kysely";
import { protectByLab } from "./row-security";

export async function up(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `create table audit_events (
         id bigint generated always as identity primary key,
         lab_id uuid not null references labs (id),
         at timestamptz not null default now(),
         account_id uuid,
         token_id uuid,
         act text not null check (act ~ '^[a-z]+([.-][a-z]+)*$'),
         subject_type text not null,
         subject_id text not null,
         -- No foreign key: the trail outlives an empty series that was deleted.
         series_id uuid,
         details jsonb not null default '{}',
         foreign key (lab_id, account_id) references memberships (lab_id, account_id),
         foreign key (lab_id, token_id) references api_tokens (lab_id, id)
       );
       create index audit_events_by_lab on audit_events (lab_id, id desc);
       create index audit_events_by_series on audit_events (lab_id, series_id, id desc);

       create function refuse_change() returns trigger language plpgsql as $$
       begin
         raise exception 'the audit trail is append only' using errcode = '42501', table = tg_table_name;
       end $$;
       create trigger append_only before update or delete on audit_events
         for each row execute function refuse_change();
       create trigger append_only_whole before truncate on audit_events
         for each statement execute function refuse_change();`,
    )
    .execute(db);
  await protectByLab(db, "audit_events", ["select", "insert"]);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql.raw(`drop table audit_events; drop function refuse_change();`).execute(db);
}
