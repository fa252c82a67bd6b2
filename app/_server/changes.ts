/**
 * Word of changes from other processes: one listening connection per web process, however many
 * pages are open. While it is down, listeners are told to look for themselves when it is back.
 */
import { setTimeout as sleep } from "node:timers/promises";
import pg from "pg";
import { changeSchema, CHANGES_CHANNEL, type Change } from "../../db/queries/changes";
import { getEnvironment, toConnectionString } from "../../lib/config/environment";
import { getShutdownSignal } from "../../lib/config/shutdown";
import { log } from "./log";

/** null: changes may have been missed; look again. */
export type ChangeListener = (change: Change | null) => void;

interface Hub {
  listeners: Set<ChangeListener>;
}

const holder = globalThis as typeof globalThis & { tidemarkChanges?: Hub };
const LONGEST_PAUSE_MS = 10_000;

/** @returns ends the listening. */
export function listenToChanges(listener: ChangeListener): () => void {
  const hub = (holder.tidemarkChanges ??= startHub());
  hub.listeners.add(listener);
  return () => hub.listeners.delete(listener);
}

function startHub(): Hub {
  const hub: Hub = { listeners: new Set() };
  void keepListening(hub);
  return hub;
}

async function keepListening(hub: Hub): Promise<void> {
  const shutdown = getShutdownSignal();
  let pauseMs = 250;
  while (!shutdown.aborted) {
    try {
      await listenUntilBroken(hub, shutdown, () => {
        pauseMs = 250;
      });
    } catch (error) {
      log().warn({ err: error }, "changes cannot be heard at the moment");
    }
    if (shutdown.aborted) return;
    await sleep(pauseMs, undefined, { signal: shutdown }).catch(() => undefined);
    pauseMs = Math.min(2 * pauseMs, LONGEST_PAUSE_MS);
  }
}

async function listenUntilBroken(
  hub: Hub,
  shutdown: AbortSignal,
  onReady: () => void,
): Promise<void> {
  const client = new pg.Client({
    connectionString: toConnectionString(getEnvironment(), "app"),
    application_name: "tidemark web, changes",
    keepAlive: true,
  });
  const broken = new Promise<void>((resolve) => {
    client.on("error", () => resolve());
    client.on("end", () => resolve());
  });
  client.on("notification", ({ payload }) => {
    const change = parseChange(payload ?? "");
    if (change !== null) for (const listener of hub.listeners) listener(change);
  });
  const end = (): void => void client.end().catch(() => undefined);
  shutdown.addEventListener("abort", end, { once: true });
  try {
    await client.connect();
    await client.query(`listen ${CHANGES_CHANNEL}`);
    onReady();
    for (const listener of hub.listeners) listener(null);
    await broken;
  } finally {
    shutdown.removeEventListener("abort", end);
    end();
  }
}

function parseChange(payload: string): Change | null {
  try {
    return changeSchema.parse(JSON.parse(payload));
  } catch (error) {
    log().warn({ err: error, payload }, "word of a change that cannot be read");
    return null;
  }
}
