/** Labs from the terminal: the one way to found a lab, and back into one that lost its admins. */
import { parseArgs } from "node:util";
import { createDatabase } from "../../db/client";
import { getEnvironment, toConnectionString } from "../../lib/config/environment";
import { AppError } from "../../lib/errors/app-error";
import { createLab, inviteToLab, type LabDatabases } from "../labs/labs";
import { listAllLabs } from "../../db/queries/labs";

const USAGE = `Usage:
  npm run lab -- create --slug fen --name "Fen Acoustics" --admin-email a@fen.example
                        [--admin-name "Ada Fen"] [--time-zone Europe/Helsinki]
  npm run lab -- invite --slug fen --email b@fen.example [--name "Bo Fen"] --roles tester,analyst
  npm run lab -- list
`;

const OPTIONS = {
  slug: { type: "string" },
  name: { type: "string" },
  email: { type: "string" },
  roles: { type: "string" },
  "admin-email": { type: "string" },
  "admin-name": { type: "string" },
  "time-zone": { type: "string" },
} as const;

async function main(args: string[]): Promise<void> {
  const { positionals, values } = parse(args);
  const environment = getEnvironment();
  const databases: LabDatabases = {
    owner: createDatabase({
      connectionString: toConnectionString(environment, "migrator"),
      max: 1,
      role: "tidemark_owner",
    }),
    app: createDatabase({ connectionString: toConnectionString(environment, "app"), max: 1 }),
    publicUrl: environment.publicUrl,
  };
  try {
    if (positionals[0] === "create") {
      const link = await createLab(databases, {
        slug: values.slug,
        name: values.name,
        adminEmail: values["admin-email"],
        adminName: values["admin-name"],
        timeZone: values["time-zone"],
      });
      say(`The lab "${values.slug ?? ""}" stands. Its first admin joins by this link, once:`, link);
    } else if (positionals[0] === "invite") {
      const link = await inviteToLab(databases, {
        slug: values.slug,
        email: values.email,
        name: values.name,
        roles: values.roles?.split(","),
      });
      say(`${values.email ?? ""} joins by this link, once:`, link);
    } else {
      const labs = await listAllLabs(databases.owner);
      say(...labs.map((lab) => `${lab.slug}  ${lab.name}`), `${labs.length} labs`);
    }
  } finally {
    await databases.owner.destroy();
    await databases.app.destroy();
  }
}

function parse(args: string[]) {
  try {
    const parsed = parseArgs({ args, options: OPTIONS, allowPositionals: true });
    const [command, ...more] = parsed.positionals;
    if (more.length === 0 && ["create", "invite", "list"].includes(command ?? "")) return parsed;
    throw new Error("the first word is create, invite or list");
  } catch (error) {
    const why = error instanceof Error ? error.message : String(error);
    throw new AppError("request.invalid", `${why}\n${USAGE}`, { cause: error });
  }
}

function say(...lines: string[]): void {
  process.stdout.write(`${lines.join("\n")}\n`);
}

main(process.argv.slice(2)).catch((error: unknown) => {
  process.stderr.write(`${error instanceof AppError ? error.message : String(error)}\n`);
  process.exitCode = 1;
});
