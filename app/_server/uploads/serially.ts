const holder = globalThis as typeof globalThis & {
  tidemarkSerial?: Map<string, Promise<unknown>>;
};

/** Runs acts of one key one after the other; other keys go on beside them. */
export function serially<T>(key: string, act: () => Promise<T>): Promise<T> {
  holder.tidemarkSerial ??= new Map<string, Promise<unknown>>();
  const running = holder.tidemarkSerial;
  const before = running.get(key) ?? Promise.resolve();
  const mine = before.then(act, act);
  const settled = mine.catch(() => undefined);
  running.set(key, settled);
  void settled.then(() => {
    if (running.get(key) === settled) running.delete(key);
  });
  return mine;
}
