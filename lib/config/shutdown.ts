/**
 * The end of the web server, as a signal that open streams can listen to: the server waits for
 * every open request before it ends, and an event stream would keep it up for half a minute.
 */
declare global {
  var tidemarkShutdown: AbortController | undefined;
}

const getController = (): AbortController =>
  (globalThis.tidemarkShutdown ??= new AbortController());

/** Aborted once the process was asked to end. The same for every bundle of the server. */
export const getShutdownSignal = (): AbortSignal => getController().signal;

/** Ties the signal to SIGTERM and SIGINT; called once, when the server starts. */
export function armShutdown(): void {
  const controller = getController();
  for (const name of ["SIGTERM", "SIGINT"] as const) process.once(name, () => controller.abort());
}
