import pino, { type Logger } from "pino";
import { getEnvironment } from "../../lib/config/environment";

let logger: Logger | undefined;

/** The log of the web server: JSON lines on standard output. */
export function log(): Logger {
  logger ??= pino({
    name: "web",
    level: getEnvironment().logLevel,
    redact: ["password", "secret", "token", "*.password", "*.secret", "*.token"],
  });
  return logger;
}
