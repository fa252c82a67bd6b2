/**
 * Files on their way to a series: a few at once, each can be stopped and gone on with. Knows nothing
 * of the page nor of the protocol: who draws subscribes, and how bytes travel is handed in.
 */
import type { ColumnChoice } from "@/lib/series/table-columns";
import type { UploadItem, UploadState } from "./upload-item";

export interface ChosenFile {
  file: File;
  /** The place that a person chose; null leaves it to the name. */
  slot: string | null;
  /** Where the page shows it meanwhile. */
  shownSlot: string | null;
  /** Of a table: its columns as a person mapped them; absent where its head tells. */
  columns?: ColumnChoice;
  /** Microphone channel, from 1; absent: the first. */
  channel?: number;
}

export interface TransferEvents {
  onProgress: (sentBytes: number) => void;
  /** The connection was lost; the transfer tries again by itself. */
  onRetrying: () => void;
  /** @param runId the recording that the file became. */
  onDone: (runId: string | null) => void;
  onFault: (fault: string) => void;
}

export interface Transfer {
  /** Stops sending; what arrived stays at the server. */
  stop: () => Promise<void>;
  /** Stops, and has the server forget what arrived. */
  discard: () => Promise<void>;
}

export type StartTransfer = (chosen: ChosenFile, events: TransferEvents) => Transfer;

interface UploadControllerOptions {
  startTransfer: StartTransfer;
  /** Called when a file has become a recording; the item stays until this is settled. */
  onReceived: (runId: string | null) => Promise<void>;
  now?: () => number;
  newId?: () => string;
}

const AT_ONCE = 2;
/** Weight of the latest interval in the speed shown. */
const FRESH = 0.3;

interface Entry {
  item: UploadItem;
  chosen: ChosenFile;
  transfer: Transfer | null;
  lastAt: number;
}

export interface UploadController {
  add: (files: readonly ChosenFile[]) => void;
  stop: (id: string) => Promise<void>;
  /** Goes on with what was stopped or has failed. */
  goOn: (id: string) => void;
  /** Takes a file off the page; bytes at the server are given up. */
  discard: (id: string) => Promise<void>;
  subscribe: (listener: () => void) => () => void;
  /** The same array until something changes. */
  getItems: () => readonly UploadItem[];
}

export function createUploadController(options: UploadControllerOptions): UploadController {
  const now = options.now ?? Date.now;
  const newId = options.newId ?? (() => crypto.randomUUID());
  const listeners = new Set<() => void>();
  let entries: Entry[] = [];
  let items: readonly UploadItem[] = [];

  const tell = (): void => {
    items = entries.map((entry) => entry.item);
    for (const listener of listeners) listener();
  };
  const change = (entry: Entry, next: Partial<UploadItem>): void => {
    entry.item = { ...entry.item, ...next };
    tell();
  };
  const find = (id: string): Entry | undefined => entries.find((entry) => entry.item.id === id);
  const drop = (entry: Entry): void => {
    entries = entries.filter((other) => other !== entry);
    tell();
  };

  const begin = (entry: Entry): void => {
    entry.lastAt = now();
    change(entry, { state: "sending", fault: null, bytesPerS: null });
    // Whatever an earlier transfer of this file still says is of the past.
    const current = (): boolean => entry.transfer === transfer && isGoing(entry.item.state);
    const transfer: Transfer = options.startTransfer(entry.chosen, {
      onProgress: (sentBytes) => {
        if (!current()) return;
        change(entry, { state: "sending", ...toProgress(entry, sentBytes, now()) });
        entry.lastAt = now();
      },
      onRetrying: () => {
        if (current()) change(entry, { state: "retrying", bytesPerS: null });
      },
      onDone: (runId) => {
        if (!current()) return;
        change(entry, { state: "done", sentBytes: entry.item.bytes });
        beginNext();
        void options.onReceived(runId).finally(() => drop(entry));
      },
      onFault: (fault) => {
        if (!current()) return;
        change(entry, { state: "failed", fault });
        beginNext();
      },
    });
    entry.transfer = transfer;
  };

  const beginNext = (): void => {
    const going = entries.filter((entry) => isGoing(entry.item.state)).length;
    const waiting = entries.filter((entry) => entry.item.state === "waiting");
    for (const entry of waiting.slice(0, Math.max(0, AT_ONCE - going))) begin(entry);
  };

  return {
    add: (files) => {
      entries = [
        ...entries,
        ...files.map((chosen) => ({
          chosen,
          transfer: null,
          lastAt: now(),
          item: toItem(newId(), chosen),
        })),
      ];
      tell();
      beginNext();
    },
    stop: async (id) => {
      const entry = find(id);
      if (entry === undefined) return;
      change(entry, { state: "stopped", bytesPerS: null });
      beginNext();
      await entry.transfer?.stop();
    },
    goOn: (id) => {
      const entry = find(id);
      if (entry === undefined || isGoing(entry.item.state)) return;
      change(entry, { state: "waiting", fault: null });
      beginNext();
    },
    discard: async (id) => {
      const entry = find(id);
      if (entry === undefined) return;
      drop(entry);
      beginNext();
      await entry.transfer?.discard();
    },
    subscribe: (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    getItems: () => items,
  };
}

const isGoing = (state: UploadState): boolean => state === "sending" || state === "retrying";

function toItem(id: string, { file, shownSlot }: ChosenFile): UploadItem {
  return {
    id,
    fileName: file.name,
    bytes: file.size,
    sentBytes: 0,
    bytesPerS: null,
    slot: shownSlot,
    state: "waiting",
    fault: null,
  };
}

function toProgress(
  entry: Entry,
  sentBytes: number,
  at: number,
): Pick<UploadItem, "sentBytes" | "bytesPerS"> {
  const elapsedS = (at - entry.lastAt) / 1000;
  const gained = sentBytes - entry.item.sentBytes;
  const before = entry.item.bytesPerS;
  if (elapsedS <= 0 || gained < 0) return { sentBytes, bytesPerS: before };
  const speed = gained / elapsedS;
  return { sentBytes, bytesPerS: before === null ? speed : before + FRESH * (speed - before) };
}
