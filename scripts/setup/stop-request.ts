/** The wish to stop, from the terminal (SIGINT) or from a manager of services (SIGTERM). */
export interface StopRequest {
  /** Aborted at the first signal; hand it to what can be cut short. */
  signal: AbortSignal;
  /** Resolves at the first signal. */
  requested: Promise<void>;
}

/**
 * From here on signals no longer end this process by themselves. A terminal and npm may each
 * deliver the same signal: only the first counts.
 */
export function listenForStop(): StopRequest {
  const controller = new AbortController();
  const requested = new Promise<void>((resolve) => {
    for (const name of ["SIGINT", "SIGTERM", "SIGHUP"] as const) {
      process.removeAllListeners(name);
      process.on(name, () => {
        controller.abort();
        resolve();
      });
    }
  });
  return { signal: controller.signal, requested };
}
