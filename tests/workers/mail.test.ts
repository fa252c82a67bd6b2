/** From an act to what a mail server receives: who hears of what, and what a server's refusal does. */
import pino from "pino";
import { sql } from "kysely";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { invite, toInvitationLink } from "../../app/_server/invitations";
import type { AnalysisWork } from "../../db/acts/analysis-work";
import { decideBands } from "../../db/acts/decide-bands";
import { endAsDone, endAsFailed } from "../../db/acts/end-analysis";
import { commentAsMaker, createPreview } from "../../db/acts/previews";
import { publishSeries } from "../../db/acts/publish";
import { requestRun } from "../../db/acts/request-run";
import { reopenSeries, signOffAnalysis } from "../../db/acts/sign-off";
import { inLab } from "../../db/in-lab";
import { claimAnalysis, createAnalysis } from "../../db/queries/analyses";
import { listDecisions } from "../../db/queries/decisions";
import { removeMember } from "../../db/queries/members";
import { chooseNotice } from "../../db/queries/notice-choices";
import { readEnvironment } from "../../lib/config/environment";
import { AnalysisError } from "../../lib/errors/app-error";
import { digestDecisions, toSignedDecisions } from "../../lib/review/digest-decisions";
import { openPost, type Post } from "../../workers/post";
import { createTestDatabase } from "../support/database";
import { type LabBench, makeTestLab, makeTestMember, openLabBench } from "../support/lab-bench";
import { type MailCatcher, openMailCatcher } from "../support/mail-catcher";
import { makeReviewableSeries, type ReviewableSeries } from "../support/reviewable";

const PUBLIC_URL = "https://bench.example";
const CRITERION = { compression_dB: 3 } as const;

let bench: LabBench;
let catcher: MailCatcher;
let post: Post | null;
let labId: string;
let series: ReviewableSeries;
type Member = Awaited<ReturnType<typeof makeTestMember>> & { email: string };
const people = {} as Record<"admin" | "tester" | "analyst" | "reviewer" | "quiet" | "both", Member>;

const addressOf = (name: string, { accountId }: { accountId: string }): string =>
  `${name}.${accountId.slice(0, 8)}@lab.test`;

beforeAll(async () => {
  const database = await createTestDatabase();
  bench = openLabBench(database);
  catcher = await openMailCatcher();
  const { labId: id, all } = await makeTestLab(bench, "post");
  labId = id;
  people.admin = { ...all, email: addressOf("all", all.scope) };
  await inLab(bench.app, all.scope, (trx) =>
    trx
      .updateTable("memberships")
      .set({ roles: ["admin"] })
      .where("account_id", "=", all.scope.accountId)
      .execute(),
  );
  const add = async (name: string, roles: ("tester" | "analyst" | "reviewer")[]) => {
    const member = await makeTestMember(bench, labId, name, roles);
    return { ...member, email: addressOf(name, member.scope) };
  };
  people.tester = await add("tester", ["tester"]);
  people.analyst = await add("analyst", ["analyst"]);
  people.reviewer = await add("reviewer", ["reviewer"]);
  people.quiet = await add("quiet", ["tester", "analyst", "reviewer"]);
  people.both = await add("both", ["analyst", "reviewer"]);
  series = await makeReviewableSeries(bench, people.tester.scope);
  const environment = readEnvironment(
    { TIDEMARK_SMTP_URL: catcher.url, TIDEMARK_PUBLIC_URL: PUBLIC_URL },
    {
      cloneDir: "/nowhere",
      processors: 1,
      readText: () => JSON.stringify(database.secrets),
    },
  );
  const { databaseName, databasePort } = database;
  post = await openPost(
    { ...environment, databaseName, databasePort },
    bench.app,
    pino({ level: "silent" }),
    100,
  );
});
afterAll(async () => {
  post?.stop();
  await post?.close();
  await catcher.close();
  await bench.close();
  await bench.database.drop();
});

const rows = (kind: string) =>
  inLab(bench.app, people.admin.scope, (trx) =>
    trx.selectFrom("mails").selectAll().where("kind", "=", kind).orderBy("created_at").execute(),
  );

async function rowOnce(
  kind: string,
  wanted: (row: Awaited<ReturnType<typeof rows>>[0]) => boolean,
) {
  for (const until = Date.now() + 20_000; ;) {
    const row = (await rows(kind)).at(-1);
    if (row !== undefined && wanted(row)) return row;
    if (Date.now() > until) throw new Error(`never came: ${JSON.stringify(row)}`);
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
}

const inviteTo = (email: string) =>
  inLab(bench.app, people.admin.scope, (trx) =>
    invite(trx, people.admin.scope, { email, name: "Nell New", roles: ["tester"] }),
  );

describe("an invitation", () => {
  it("reaches its address as text and HTML, and leaves no secret behind", async () => {
    const { secret } = await inviteTo("nell@else.test");
    const mail = await catcher.waitFor("nell@else.test");
    const link = toInvitationLink(PUBLIC_URL, secret);
    expect(mail).toMatchObject({
      subject: "Lab post invites you to Tidemark",
      from: '"Tidemark" <tidemark@bench.example>',
    });
    expect(mail.text).toContain(link);
    expect(mail.html).toContain(`href="${link}"`);
    const row = await rowOnce("invitation", ({ sent_at }) => sent_at !== null);
    expect(row).toMatchObject({ attempts: 1, given_up_at: null, last_error: null });
    expect(JSON.stringify(row)).not.toContain(secret);
    expect(mail.messageId).toBe(`<${row.id}@bench.example>`);
  });

  it("is not written where the act is not", async () => {
    const before = (await rows("invitation")).length;
    await expect(inviteTo(people.tester.email)).rejects.toThrow("is a member of this lab already");
    expect(await rows("invitation")).toHaveLength(before);
  });
});

describe("a mail server that refuses", () => {
  const dueNow = () =>
    inLab(bench.app, people.admin.scope, (trx) =>
      trx
        .updateTable("mails")
        .set({ next_attempt_at: new Date() })
        .where("sent_at", "is", null)
        .execute(),
    );

  it("for now is asked again later, until it takes the mail", async () => {
    catcher.refusals.set("busy@else.test", 451);
    await inviteTo("busy@else.test");
    const put = await rowOnce("invitation", ({ last_error }) => last_error !== null);
    expect(put).toMatchObject({ attempts: 1, sent_at: null, given_up_at: null });
    expect(put.last_error).toContain("451");
    expect(put.next_attempt_at.getTime() - Date.now()).toBeGreaterThan(30_000);
    catcher.refusals.delete("busy@else.test");
    await dueNow();
    const mail = await catcher.waitFor("busy@else.test");
    expect(mail.messageId).toBe(`<${put.id}@bench.example>`);
    const sent = await rowOnce("invitation", ({ sent_at }) => sent_at !== null);
    expect(sent).toMatchObject({ id: put.id, attempts: 2, last_error: null });
  });

  it("for good is not asked again", async () => {
    catcher.refusals.set("nobody@else.test", 550);
    const { secret } = await inviteTo("nobody@else.test");
    const row = await rowOnce("invitation", ({ given_up_at }) => given_up_at !== null);
    expect(row).toMatchObject({ attempts: 1, sent_at: null });
    expect(row.last_error).toContain("550");
    expect(JSON.stringify(row)).not.toContain(secret);
  });

  it("a link for too long gets nothing more", async () => {
    catcher.refusals.set("late@else.test", 451);
    await inviteTo("late@else.test");
    const put = await rowOnce("invitation", ({ last_error }) => last_error !== null);
    catcher.refusals.delete("late@else.test");
    await inLab(bench.app, people.admin.scope, (trx) =>
      sql`update mails set payload = (payload::jsonb || '{"expires_at": "2026-01-01T00:00:00.000Z"}')::json
        where id = ${put.id}`.execute(trx),
    );
    await dueNow();
    const row = await rowOnce("invitation", ({ given_up_at }) => given_up_at !== null);
    expect(row).toMatchObject({ id: put.id, last_error: "its link has expired" });
    expect(catcher.mails.some((mail) => mail.to === "late@else.test")).toBe(false);
  });
});

describe("a notice", () => {
  /** Addresses of every mail of the kind, once they are sent. */
  async function readers(kind: string): Promise<string[]> {
    await rowOnce(kind, ({ sent_at }) => sent_at !== null);
    const all = await rows(kind);
    return all.map((row) => row.to_address.split(".")[0] ?? "").toSorted();
  }
  const act = <T>(
    member: Member,
    run: (trx: Parameters<Parameters<typeof inLab>[2]>[0]) => Promise<T>,
  ) => inLab(bench.app, member.scope, run);

  beforeAll(async () => {
    const { scope } = people.quiet;
    await act(people.quiet, async (trx) => {
      for (const kind of ["analysis-failed", "published", "signed-off"] as const) {
        await chooseNotice(trx, { labId, accountId: scope.accountId, kind, wanted: false });
      }
    });
  });

  const work = async (seriesId: string, digest: string): Promise<AnalysisWork> =>
    act(people.tester, async (trx) => {
      const analysisId = await createAnalysis(trx, labId, {
        seriesId,
        inputs: { series: {}, files: [] },
        inputsDigest: digest.repeat(64),
        settings: series.result.settings,
        engineVersion: "1.0.0",
        requestedBy: null,
      });
      await claimAnalysis(trx, labId, analysisId, 0);
      const { version } = await trx
        .selectFrom("analyses")
        .select("version")
        .where("id", "=", analysisId)
        .executeTakeFirstOrThrow();
      return {
        analysisId,
        seriesId,
        version,
        attempt: 1,
        series: {} as AnalysisWork["series"],
        files: [],
        runs: [],
        slotByFile: new Map(),
        runIdByFile: new Map(),
      };
    });

  it("of a failed analysis says what is wrong and what helps", async () => {
    const failed = await work(series.seriesId, "a");
    const by = { labId, accountId: null };
    const error = new AnalysisError("run.no-sweep", "No sweep was found.", { file: "osier.wav" });
    await inLab(bench.app, by, (trx) => endAsFailed(trx, by, failed, error, new Date()));
    expect(await readers("analysis-failed")).toEqual(["analyst", "both", "tester"]);
    const mail = await catcher.waitFor(people.tester.email);
    expect(mail.subject).toBe("S-0001 Withy Lane Osier 8A: the analysis failed");
    expect(mail.text).toContain("No sweep was found.");
    expect(mail.text).toContain("Listen to the recording");
    expect(mail.text).toContain(`${PUBLIC_URL}/series/${series.seriesId}/runs`);
  });

  it("of a finished one goes to analysts", async () => {
    const done = await work(series.seriesId, "b");
    const by = { labId, accountId: null };
    await inLab(bench.app, by, (trx) => endAsDone(trx, by, done, series.result, null));
    expect(await readers("ready-for-review")).toEqual(["analyst", "both", "quiet"]);
    const subject = "S-0001 Withy Lane Osier 8A is ready for review";
    const mail = await catcher.waitFor(people.analyst.email, subject);
    expect(mail.text).toContain(`${PUBLIC_URL}/series/${series.seriesId}/output-limit`);
  });

  it("of a run that is asked for goes to testers, with the reason", async () => {
    await act(people.analyst, (trx) =>
      requestRun(trx, people.analyst.scope, {
        seriesId: series.seriesId,
        levelDb: 91,
        kind: "short-term",
        variant: null,
        reason: "The onset lies between two levels.",
      }),
    );
    expect(await readers("run-asked")).toEqual(["quiet", "tester"]);
    const mail = await catcher.waitFor(
      people.tester.email,
      "S-0001 Withy Lane Osier 8A: a run is asked for",
    );
    expect(mail.text).toContain("analyst asks for a run");
    expect(mail.text).toContain("> The onset lies between two levels.");
    expect(mail.text).toContain("91 dB SPL at 1 m");
    expect(mail.text).toContain("CAUTION: such a level can harm hearing.");
  });

  it("is not sent where the act is refused", async () => {
    const { scope } = people.analyst;
    await expect(
      act(people.analyst, (trx) =>
        signOffAnalysis(trx, scope, series.analysisId, {
          criterion: CRITERION,
          decisionsDigest: "0".repeat(64),
        }),
      ),
    ).rejects.toThrow("was replaced by version");
    expect(await rows("signed-off")).toEqual([]);
  });

  it("of sign-off, publication, comment and reopening goes to whose work it is, but not to who acts", async () => {
    const signed = await makeReviewableSeries(bench, people.tester.scope);
    const { seriesId, analysisId } = signed;
    const words = {
      words: "",
      supplied_by: "bought by the lab",
      maker_statement: null,
      answer_to_maker: null,
      evidence_public: false,
    };
    await act(people.both, async (trx) => {
      const { scope } = people.both;
      const bands = signed.result.bands;
      await decideBands(
        trx,
        scope,
        analysisId,
        bands.map(({ nominal_Hz, cause }) => ({
          nominal_Hz,
          cause,
          reason: null,
          seen_version: 0,
        })),
      );
      const decisions = toSignedDecisions(
        await listDecisions(trx, labId, analysisId),
        bands.map((band) => band.nominal_Hz),
      );
      await signOffAnalysis(trx, scope, analysisId, {
        criterion: CRITERION,
        decisionsDigest: digestDecisions(decisions ?? []),
      });
    });
    await act(people.both, async (trx) => {
      await publishSeries(trx, people.both.scope, seriesId, {
        words,
        slug: null,
        embargoUntil: null,
        changeNote: null,
      });
      const { id } = await createPreview(trx, people.both.scope, seriesId, {
        words,
        forWhom: "the maker",
        days: 14,
      });
      await commentAsMaker(trx, labId, id, {
        name: "Mara Maker",
        email: "m@maker.test",
        words: "The limiter is meant to.",
      });
      await reopenSeries(trx, people.both.scope, seriesId, "Wrong port tuning.");
    });
    expect(await readers("signed-off")).toEqual(["reviewer"]);
    expect(await readers("published")).toEqual(["analyst", "reviewer", "tester"]);
    expect(await readers("maker-comment")).toEqual(["both", "quiet", "reviewer"]);
    expect(await readers("reopened")).toEqual(["quiet", "reviewer"]);
    const page = await catcher.waitFor(
      people.reviewer.email,
      "S-0002 Withy Lane Osier 8A is published",
    );
    expect(page.text).toContain(`${PUBLIC_URL}/t/post/osier-8a\n`);
    const comment = await catcher.waitFor(
      people.quiet.email,
      "S-0002 Withy Lane Osier 8A: a comment from the maker",
    );
    expect(comment.text).toContain("> The limiter is meant to.");
  });

  it("does not follow somebody out of the lab", async () => {
    const { scope, email } = people.tester;
    catcher.refusals.set(email, 451);
    await act(people.analyst, (trx) =>
      requestRun(trx, people.analyst.scope, {
        seriesId: series.seriesId,
        levelDb: 93,
        kind: "short-term",
        variant: null,
        reason: "One more.",
      }),
    );
    const mine = () =>
      rows("run-asked").then((all) => all.findLast((row) => row.to_address === email));
    for (const until = Date.now() + 20_000; (await mine())?.last_error === null;) {
      if (Date.now() > until) throw new Error("it was never tried");
      await new Promise((resolve) => setTimeout(resolve, 50));
    }
    catcher.refusals.delete(email);
    await act(people.admin, (trx) => removeMember(trx, labId, scope.accountId));
    await act(people.admin, (trx) =>
      trx
        .updateTable("mails")
        .set({ next_attempt_at: new Date() })
        .where("sent_at", "is", null)
        .execute(),
    );
    for (const until = Date.now() + 20_000; (await mine())?.given_up_at === null;) {
      if (Date.now() > until) throw new Error("it was never given up");
      await new Promise((resolve) => setTimeout(resolve, 50));
    }
    expect((await mine())?.last_error).toBe("its reader is no member of the lab any more");
  });
});
