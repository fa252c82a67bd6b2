/** The only place that makes a connection pool. */
import { Kysely, PostgresDialect, type Transaction } from "kysely";
import pg from "pg";
import type { Database } from "./schema/database";

export type Db = Kysely<Database>;
export type Trx = Transaction<Database>;

export interface DatabaseOptions {
  connectionString: string;
  /** Connections at most. */
  max?: number;
  /** Shown in pg_stat_activity. */
  applicationName?: string;
  /** Role to take right after connecting, for migrations. */
  role?: string;
  /** Told when a connection breaks; the pool replaces it by itself. */
  onIdleError?: (error: Error) => void;
}

/** Every bigint of ours (bytes, event numbers) lies under 2^53. */
const parseInt8 = (text: string): number => Number(text);

/** A pool of its own; the caller ends it with destroy(). */
export function createDatabase(options: DatabaseOptions): Db {
  return createDatabaseOn(createPool(options));
}

/** For whoever needs the pool besides: the rate limiter and listeners. */
export function createDatabaseOn(pool: pg.Pool): Db {
  return new Kysely<Database>({ dialect: new PostgresDialect({ pool }) });
}

export function createPool(options: DatabaseOptions): pg.Pool {
  const types = new pg.TypeOverrides();
  types.setTypeParser(pg.types.builtins.INT8, parseInt8);
  const pool = new pg.Pool({
    connectionString: options.connectionString,
    max: options.max ?? 8,
    application_name: options.applicationName ?? "tidemark",
    connectionTimeoutMillis: 10_000,
    ...(options.role === undefined ? {} : { options: `-c role=${options.role}` }),
    types,
  });
  const onError = options.onIdleError ?? (() => undefined);
  // Without listeners a restart of PostgreSQL would end the process: the pool's hears of idle
  // connections, the client's of those between two statements of a transaction.
  pool.on("error", onError);
  pool.on("connect", (client) => client.on("error", onError));
  return pool;
}
