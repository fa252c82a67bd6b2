/**
 * Roles and databases of the cluster. The superuser makes them and is used for nothing else;
 * everything can be run again.
 */
import pg from "pg";
import { type DatabaseRole } from "../../lib/config/secrets";
import { type Environment, toConnectionString } from "../../lib/config/environment";

const { escapeIdentifier, escapeLiteral } = pg;

export type ClusterAccess = Pick<Environment, "databasePort" | "databaseName" | "secrets">;

const LOGIN_ROLES: readonly DatabaseRole[] = ["owner", "migrator", "app", "queue"];
const ROLE_LIMITS = "login nosuperuser nocreatedb nocreaterole noreplication nobypassrls";

/** Roles with their passwords, SCRAM-hashed by the server; the migrator may act as the owner. */
export async function ensureRoles(access: ClusterAccess): Promise<void> {
  await asSuperuser(access, async (client) => {
    for (const role of LOGIN_ROLES) {
      const name = `tidemark_${role}`;
      const found = await client.query("select 1 from pg_roles where rolname = $1", [name]);
      const verb = found.rowCount === 0 ? "create" : "alter";
      const password = escapeLiteral(access.secrets.database[role]);
      await client.query(`${verb} role ${name} with ${ROLE_LIMITS} password ${password}`);
    }
    await client.query("grant tidemark_owner to tidemark_migrator");
  });
}

/**
 * A database that belongs to tidemark_owner and that only our roles may enter.
 *
 * @param template database to copy; nobody may be connected to it
 */
export async function ensureDatabase(
  access: ClusterAccess,
  databaseName: string,
  template = "template0",
): Promise<void> {
  const name = escapeIdentifier(databaseName);
  await asSuperuser(access, async (client) => {
    const found = await client.query("select 1 from pg_database where datname = $1", [
      databaseName,
    ]);
    if (found.rowCount === 0) {
      await client.query(
        `create database ${name} owner tidemark_owner template ${escapeIdentifier(template)}`,
      );
    }
    await client.query(`revoke all on database ${name} from public`);
    await client.query(
      `grant connect on database ${name} to tidemark_migrator, tidemark_app, tidemark_queue`,
    );
  });
}

/** Ends whatever is connected to the database and drops it. */
export async function dropDatabase(access: ClusterAccess, databaseName: string): Promise<void> {
  await asSuperuser(access, (client) =>
    client.query(`drop database if exists ${escapeIdentifier(databaseName)} with (force)`),
  );
}

/** Whether the superuser's password is the one in the secrets. */
export async function superuserCanSignIn(access: ClusterAccess): Promise<boolean> {
  try {
    await asSuperuser(access, (client) => client.query("select 1"));
    return true;
  } catch (error) {
    if (error instanceof pg.DatabaseError && error.code === "28P01") return false;
    throw error;
  }
}

async function asSuperuser<T>(
  access: ClusterAccess,
  act: (client: pg.Client) => Promise<T>,
): Promise<T> {
  const client = new pg.Client({
    connectionString: toConnectionString(access, "superuser", "postgres"),
    application_name: "tidemark set-up",
  });
  await client.connect();
  try {
    return await act(client);
  } finally {
    await client.end();
  }
}
