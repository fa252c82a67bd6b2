/** All tables, by their names in PostgreSQL. */
import type { AccountPasswordsTable } from "./account-passwords";
import type { AccountsTable } from "./accounts";
import type { AnalysesTable, AnalysisBandsTable, AnalysisRunsTable } from "./analyses";
import type { ApiTokensTable } from "./api-tokens";
import type { AuditEventsTable } from "./audit-events";
import type { InvitationsTable } from "./invitations";
import type { LabsTable } from "./labs";
import type { AccountLinksTable, MailsTable, NoticeChoicesTable } from "./mails";
import type { LoudspeakersTable } from "./loudspeakers";
import type { MembershipsTable } from "./memberships";
import type { MakerCommentsTable, PreviewsTable, PublicationsTable } from "./publications";
import type { RateLimitsTable } from "./rate-limits";
import type { RecordingsTable } from "./recordings";
import type {
  BandCommentsTable,
  BandDecisionsTable,
  RunRequestsTable,
  SignOffsTable,
} from "./review";
import type { RunsTable } from "./runs";
import type { SeriesCountersTable, SeriesTable } from "./series";
import type { SessionsTable } from "./sessions";
import type { SlotExcusesTable } from "./slot-excuses";
import type { UploadsTable } from "./uploads";

export interface Database {
  labs: LabsTable;
  accounts: AccountsTable;
  account_passwords: AccountPasswordsTable;
  memberships: MembershipsTable;
  sessions: SessionsTable;
  invitations: InvitationsTable;
  api_tokens: ApiTokensTable;
  rate_limits: RateLimitsTable;
  loudspeakers: LoudspeakersTable;
  series_counters: SeriesCountersTable;
  series: SeriesTable;
  recordings: RecordingsTable;
  uploads: UploadsTable;
  runs: RunsTable;
  slot_excuses: SlotExcusesTable;
  analyses: AnalysesTable;
  analysis_runs: AnalysisRunsTable;
  analysis_bands: AnalysisBandsTable;
  audit_events: AuditEventsTable;
  band_decisions: BandDecisionsTable;
  band_comments: BandCommentsTable;
  run_requests: RunRequestsTable;
  sign_offs: SignOffsTable;
  publications: PublicationsTable;
  previews: PreviewsTable;
  maker_comments: MakerCommentsTable;
  mails: MailsTable;
  notice_choices: NoticeChoicesTable;
  account_links: AccountLinksTable;
}
