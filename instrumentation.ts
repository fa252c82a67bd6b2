/** Runs once when the web server starts, before it takes a request. */
export async function register(): Promise<void> {
  if (process.env["NEXT_RUNTIME"] !== "nodejs") return;
  const { getEnvironment } = await import("./lib/config/environment");
  const { armShutdown } = await import("./lib/config/shutdown");
  const { armClientAddress } = await import("./app/_server/client-address");
  armClientAddress(getEnvironment().behindProxy);
  armShutdown();
}
