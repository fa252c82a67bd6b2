/** Brings the database up to date, or back: `migrate`, `migrate --down 1`. */
import { parseArgs } from "node:util";
import { migrateDown, migrateToLatest } from "../../db/migrate";
import { migrateQueue } from "../../db/migrate-queue";
import { getEnvironment, toConnectionString } from "../../lib/config/environment";
import { AppError } from "../../lib/errors/app-error";

async function main(): Promise<void> {
  const { values } = parseArgs({ options: { down: { type: "string" } } });
  const environment = getEnvironment();
  const migrator = toConnectionString(environment, "migrator");
  if (values.down === undefined) {
    const names = await migrateToLatest(migrator);
    await migrateQueue({ migrator, queue: toConnectionString(environment, "queue") });
    say("done", names);
    return;
  }
  const steps = Number(values.down);
  if (!Number.isInteger(steps) || steps < 1) {
    throw new AppError("request.invalid", "--down takes the number of migrations to undo.");
  }
  say("undone", await migrateDown(migrator, steps));
}

function say(what: string, names: readonly string[]): void {
  const text = names.length === 0 ? `Nothing to be ${what}.` : `${what}: ${names.join(", ")}`;
  process.stdout.write(`${text}\n`);
}

main().catch((error: unknown) => {
  process.stderr.write(`${error instanceof AppError ? error.message : String(error)}\n`);
  process.exitCode = 1;
});
