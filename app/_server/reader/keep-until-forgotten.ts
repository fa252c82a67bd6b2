/**
 * Keeps what a look has found for a moment, so that a crowd does not ask the database one by one.
 * Whoever changes something says so: from then on nothing counts that was looked up before.
 */
export interface Kept<T> {
  ask: (key: string) => Promise<T | null>;
  forget: () => void;
}

interface KeepOptions {
  keptMs: number;
  /** Keys that are kept at most; past it all begin anew. */
  most: number;
  now?: () => number;
}

/** @param look null is never kept: what is not there yet may come at any moment. */
export function keepUntilForgotten<T extends object>(
  look: (key: string) => Promise<T | null>,
  { keptMs, most, now = () => performance.now() }: KeepOptions,
): Kept<T> {
  const kept = new Map<string, { value: T; untilMs: number }>();
  let generation = 0;
  return {
    ask: async (key) => {
      const known = kept.get(key);
      if (known !== undefined && now() < known.untilMs) return known.value;
      const began = generation;
      const untilMs = now() + keptMs;
      const value = await look(key);
      // Forgotten while it was looked up: it may be from before the change.
      if (value !== null && began === generation) {
        if (kept.size >= most) kept.clear();
        kept.set(key, { value, untilMs });
      }
      return value;
    },
    forget: () => {
      generation += 1;
      kept.clear();
    },
  };
}
