import type { Logger } from "pino";

/**
 * Runs an act at once and then again and again, never twice at a time. A fault is said and the next
 * round tries again.
 *
 * @returns ends it.
 */
export function repeat(everyMs: number, act: () => Promise<unknown>, log: Logger): () => void {
  let timer: NodeJS.Timeout | undefined;
  let stopped = false;
  const round = async (): Promise<void> => {
    try {
      await act();
    } catch (error) {
      log.warn({ err: error }, "a sweep failed; the next one follows");
    }
    if (!stopped) timer = setTimeout(() => void round(), everyMs);
  };
  void round();
  return () => {
    stopped = true;
    clearTimeout(timer);
  };
}
