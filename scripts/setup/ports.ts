/** Ports of this machine. */
import { createServer } from "node:net";
import { hasErrorCode } from "../../lib/errors/has-error-code";
import { SetUpError } from "./set-up-error";

/**
 * @param variable setting that moves us to another port
 * @throws SetUpError where somebody else listens there, or the address is not of this machine
 */
export async function assertPortFree(port: number, host: string, variable: string): Promise<void> {
  const error = await tryToListen(port, host);
  if (error === null) return;
  if (hasErrorCode(error, "EADDRINUSE")) {
    throw new SetUpError(
      `Port ${port} on ${host} is in use by another program: stop that one, or set ${variable} to a free port.`,
    );
  }
  if (hasErrorCode(error, "EACCES")) {
    throw new SetUpError(
      `Port ${port} on ${host} may not be used by this user: set ${variable} to a port above 1023.`,
    );
  }
  throw new SetUpError(
    `Nothing can listen on ${host}:${port} (${error.message}): set TIDEMARK_WEB_HOST to an address of this machine, such as 127.0.0.1.`,
  );
}

export const isPortFree = async (port: number, host: string): Promise<boolean> =>
  (await tryToListen(port, host)) === null;

/** A port on loopback that nobody uses at this moment. */
export async function findFreePort(): Promise<number> {
  const server = createServer();
  await new Promise<void>((resolve, reject) => {
    server.once("error", reject);
    server.listen(0, "127.0.0.1", resolve);
  });
  const address = server.address();
  await new Promise((resolve) => server.close(resolve));
  if (address === null || typeof address === "string") throw new Error("no port was given");
  return address.port;
}

function tryToListen(port: number, host: string): Promise<Error | null> {
  return new Promise((resolve) => {
    const server = createServer();
    server.once("error", resolve);
    server.listen(port, host, () => server.close(() => resolve(null)));
  });
}
