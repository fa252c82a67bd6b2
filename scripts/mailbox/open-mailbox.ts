/** A mailbox for an installation without a mail server: takes mail by SMTP, shows it on a page. */
import { createServer, type IncomingMessage, type ServerResponse } from "node:http";
import { buffer } from "node:stream/consumers";
import { callbackify } from "node:util";
import { SMTPServer } from "smtp-server";
import { openKeptMails, type KeptMails } from "./kept-mails";
import { toFramed, toListPage, toMailPage, toMissingPage } from "./pages";

/** Both ends listen here alone: who reads the mail can open accounts. */
const HOST = "127.0.0.1";

export interface Mailbox {
  close: () => Promise<void>;
}

/** @param place.folder where mails are kept */
export async function openMailbox(place: {
  folder: string;
  smtpPort: number;
  pagePort: number;
}): Promise<Mailbox> {
  const kept = await openKeptMails(place.folder);
  const post = new SMTPServer({
    authOptional: true,
    disabledCommands: ["STARTTLS"],
    logger: false,
    onData: (stream, _session, done) => {
      callbackify(async () => kept.keep(await buffer(stream)))(done);
    },
  });
  // A sender that hangs up in the middle is its own trouble.
  post.on("error", () => undefined);
  const pages = createServer((request, response) => {
    void answer(kept, request, response);
  });
  await new Promise<void>((resolve, reject) => {
    pages.once("error", reject);
    pages.listen(place.pagePort, HOST, resolve);
  });
  await new Promise<void>((resolve) => post.listen(place.smtpPort, HOST, resolve));
  return {
    close: async () => {
      pages.closeAllConnections();
      await Promise.all([
        new Promise((resolve) => pages.close(resolve)),
        new Promise<void>((resolve) => post.close(resolve)),
      ]);
    },
  };
}

async function answer(
  kept: KeptMails,
  request: IncomingMessage,
  response: ServerResponse,
): Promise<void> {
  const policy = "default-src 'none'; style-src 'unsafe-inline'";
  const send = (status: number, body: string, more = "frame-src 'self'"): void => {
    response.writeHead(status, {
      "content-type": "text/html; charset=utf-8",
      "content-security-policy": `${policy}; ${more}`,
      "cache-control": "no-store",
      "referrer-policy": "no-referrer",
      "x-content-type-options": "nosniff",
    });
    response.end(request.method === "HEAD" ? undefined : body);
  };
  try {
    // A page elsewhere whose name was made to lead here must not read it.
    if (!isOfThisMachine(request.headers.host)) return send(403, "This mailbox is local.");
    if (request.method !== "GET" && request.method !== "HEAD") return send(405, "Read only.");
    const path = (request.url ?? "/").split("?")[0] ?? "/";
    if (path === "/") return send(200, toListPage(await kept.list()));
    const [, id = "", part] = /^\/mail\/([\w-]+)(\/html)?$/.exec(path) ?? [];
    const mail = await kept.find(id);
    if (mail === null) return send(404, toMissingPage());
    if (part === undefined) return send(200, toMailPage(mail));
    return send(200, toFramed(mail), "sandbox allow-popups allow-popups-to-escape-sandbox");
  } catch (error) {
    process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
    return send(500, "The mailbox cannot be read.");
  }
}

const isOfThisMachine = (host: string | undefined): boolean =>
  /^(127\.0\.0\.1|localhost)(:\d+)?$/.test(host ?? "");
