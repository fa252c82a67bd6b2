/** Serves an installation until somebody asks for the end: the same for `start` and `dev`. */
import { setTimeout as sleep } from "node:timers/promises";
import { type Environment, toLocalUrl } from "../../lib/config/environment";
import { cloneDir } from "./bootstrap.mjs";
import { type Cluster } from "./cluster";
import { describeSignIns } from "./demo-sign-ins";
import { planMailbox, type MailboxPlan } from "./local-mailbox";
import { holdInstallation, openDatabase, openInstallation } from "./installation";
import { assertPortFree } from "./ports";
import { runCommand } from "./run-command";
import { listenForStop, type StopRequest } from "./stop-request";
import { type ChildPlan, supervise, type Supervised } from "./supervisor";

export interface ServePlan {
  /** Makes whatever must stand before the processes start. */
  prepare: (signal: AbortSignal) => Promise<void>;
  web: (environment: Environment) => ChildPlan;
  /** Null while the product has no worker. */
  worker: (environment: Environment) => ChildPlan | null;
  /** Arguments to Node that run the local mailbox; its own follow. */
  mailbox: readonly string[];
  /** Arguments to Node that fill an empty database; null where there is no demo. */
  seed: readonly string[] | null;
  env: (environment: Environment) => NodeJS.ProcessEnv;
}

const DATABASE_LOOK_MS = 2000;
const READY_WITHIN_MS = 60_000;

const say = (line: string): void => console.log(line);

/** @returns exit code: 0 after a wished end, at whatever moment it came */
export async function serve(plan: ServePlan): Promise<number> {
  const stop = listenForStop();
  const environment = openInstallation();
  const release = holdInstallation(environment);
  try {
    await assertPortFree(environment.webPort, environment.webHost, "TIDEMARK_WEB_PORT");
    await plan.prepare(stop.signal);
    const mailbox = environment.smtpUrl === null ? await planMailbox(environment) : null;
    const served =
      mailbox === null
        ? environment
        : { ...environment, smtpUrl: mailbox.smtpUrl, mailboxUrl: mailbox.pageUrl };
    await serveWithDatabase(plan, served, mailbox, stop);
    return 0;
  } catch (error) {
    if (stop.signal.aborted) return 0;
    throw error;
  } finally {
    release();
  }
}

async function serveWithDatabase(
  plan: ServePlan,
  environment: Environment,
  mailbox: MailboxPlan | null,
  stop: StopRequest,
): Promise<void> {
  stop.signal.throwIfAborted();
  let cluster = await openDatabase(environment);
  const children: Supervised[] = [];
  try {
    sayPlaces(environment, cluster);
    stop.signal.throwIfAborted();
    const worker = plan.worker(environment);
    if (mailbox !== null) {
      children.push(supervise(mailbox.toChild(plan.mailbox, plan.env(environment)), say));
    }
    children.push(supervise(plan.web(environment), say));
    if (worker !== null) children.push(supervise(worker, say));
    await becomeReady(plan, environment, mailbox, stop);
    while (!stop.signal.aborted) {
      await Promise.race([sleep(DATABASE_LOOK_MS, undefined, { ref: false }), stop.requested]);
      if (!stop.signal.aborted && !cluster.isRunning()) {
        say("database | ended by itself; starting again");
        cluster = await openDatabase(environment);
      }
    }
  } finally {
    say("Stopping ...");
    await Promise.all(children.map((child) => child.stop()));
    await cluster.stop();
    say("Stopped.");
  }
}

async function becomeReady(
  plan: ServePlan,
  environment: Environment,
  mailbox: MailboxPlan | null,
  stop: StopRequest,
): Promise<void> {
  await waitForWeb(toLocalUrl(environment), stop.signal);
  if (stop.signal.aborted) return;
  if (environment.demo && plan.seed !== null) {
    const { code, output } = await runCommand(process.execPath, plan.seed, {
      cwd: cloneDir,
      env: plan.env(environment),
      signal: stop.signal,
      onLine: (line) => say(`demo | ${line}`),
    });
    if (code !== 0) say(`The demo lab could not be filled: ${output.trim().split("\n").at(-1)}`);
  }
  say(`\nTidemark is ready: ${environment.publicUrl}   (Ctrl-C ends it)`);
  if (mailbox !== null) {
    say(
      `Mail: ${mailbox.pageUrl}   (read here: none leaves this machine without TIDEMARK_SMTP_URL)`,
    );
  }
  for (const line of describeSignIns(environment.dataDir)) say(line);
}

function sayPlaces(environment: Environment, cluster: Cluster): void {
  say(`Data: ${environment.dataDir}`);
  say(
    `Database: ${cluster.place.folder}, port ${cluster.port}` +
      (cluster.place.outsideClone
        ? ' (outside the clone: the user "postgres" cannot reach it there)'
        : ""),
  );
}

/** Any answer will do: a page that fails has its own words for it. */
async function waitForWeb(url: string, signal: AbortSignal): Promise<void> {
  const until = Date.now() + READY_WITHIN_MS;
  while (!signal.aborted) {
    try {
      await fetch(`${url}/api/health`, { redirect: "manual", signal });
      return;
    } catch {
      if (Date.now() > until) {
        say(`The web server has not answered on ${url} for ${READY_WITHIN_MS / 1000} s.`);
        return;
      }
      await sleep(100);
    }
  }
}
