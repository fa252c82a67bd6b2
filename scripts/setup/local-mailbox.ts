/** The mailbox of an installation that has no mail server: where it listens, how it is started. */
import { join } from "node:path";
import type { Environment } from "../../lib/config/environment";
import { cloneDir } from "./bootstrap.mjs";
import { assertPortFree, findFreePort, isPortFree } from "./ports";
import type { ChildPlan } from "./supervisor";

export interface MailboxPlan {
  /** Where the worker hands mail over. */
  smtpUrl: string;
  /** Where people read it. */
  pageUrl: string;
  toChild: (args: readonly string[], env: NodeJS.ProcessEnv) => ChildPlan;
}

const HOST = "127.0.0.1";
const GRACE_MS = 5000;

/**
 * Its page stands above the web server's port, or on any where that is taken; a port that was asked
 * for is not given up.
 *
 * @throws SetUpError where the port that TIDEMARK_MAILBOX_PORT names is in use
 */
export async function planMailbox({
  dataDir,
  mailboxPort,
  webPort,
}: Pick<Environment, "dataDir" | "mailboxPort" | "webPort">): Promise<MailboxPlan> {
  if (mailboxPort !== null) await assertPortFree(mailboxPort, HOST, "TIDEMARK_MAILBOX_PORT");
  const pagePort = mailboxPort ?? (await choosePort(webPort + 1));
  const smtpPort = await findFreePort();
  const folder = join(dataDir, "mailbox");
  return {
    smtpUrl: `smtp://${HOST}:${smtpPort}`,
    pageUrl: `http://${HOST}:${pagePort}`,
    toChild: (args, env) => ({
      name: "mailbox",
      args: [...args, folder, String(smtpPort), String(pagePort)],
      env,
      cwd: cloneDir,
      graceMs: GRACE_MS,
    }),
  };
}

const choosePort = async (wanted: number): Promise<number> =>
  wanted <= 65_535 && (await isPortFree(wanted, HOST)) ? wanted : findFreePort();
