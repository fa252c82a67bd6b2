import pino, { type Logger } from "pino";

/** JSON lines on standard output, as the web server writes them. */
export const createLog = (level: string): Logger => pino({ name: "worker", level });
