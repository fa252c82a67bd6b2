/** The web server's one pool, kept over hot reloads. */
import type { Pool } from "pg";
import { createDatabaseOn, createPool, type Db } from "../../db/client";
import { getEnvironment, toConnectionString } from "../../lib/config/environment";
import { log } from "./log";

interface Held {
  pool: Pool;
  db: Db;
}

const holder = globalThis as typeof globalThis & { tidemarkDatabase?: Held };

function hold(): Held {
  holder.tidemarkDatabase ??= connect();
  return holder.tidemarkDatabase;
}

function connect(): Held {
  const pool = createPool({
    connectionString: toConnectionString(getEnvironment(), "app"),
    max: 12,
    applicationName: "tidemark web",
    onIdleError: (error) => log().warn({ err: error }, "a database connection broke"),
  });
  return { pool, db: createDatabaseOn(pool) };
}

/** Connects as tidemark_app: sees nothing until inLab or asAccount says who acts. */
export function getDatabase(): Db {
  return hold().db;
}

export function getPool(): Pool {
  return hold().pool;
}
