/** The local mailbox as a process of an installation: mailbox <folder> <SMTP port> <page's port> */
import { openMailbox } from "../mailbox/open-mailbox";

async function main([folder = "", smtpPort, pagePort]: string[]): Promise<void> {
  const mailbox = await openMailbox({
    folder,
    smtpPort: Number(smtpPort),
    pagePort: Number(pagePort),
  });
  await new Promise<void>((resolve) => {
    for (const name of ["SIGTERM", "SIGINT"] as const) process.once(name, () => resolve());
  });
  await mailbox.close();
}

main(process.argv.slice(2)).catch((error: unknown) => {
  process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
  process.exitCode = 1;
});
