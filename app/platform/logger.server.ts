import { pino } from "pino";
import { env } from "./env.server";

/** Structured logs on standard output. No personal data: ids, codes and figures only. */
export const logger = pino({
  level: env.LOG_LEVEL,
  base: { service: "numberleaf" },
  timestamp: pino.stdTimeFunctions.isoTime,
  redact: {
    paths: ["email", "name", "address", "token", "password", "*.email", "*.token", "*.password"],
    remove: true,
  },
});
