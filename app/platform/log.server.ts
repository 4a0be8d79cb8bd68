import pino from "pino";

/**
 * Logs hold ids, codes, route patterns and durations: never names, addresses, notes, tokens or paths.
 * The level comes straight from the environment, since logging must work before the environment is validated.
 */
export const log = pino({
  level: process.env.LOG_LEVEL ?? "info",
  base: undefined,
  timestamp: pino.stdTimeFunctions.isoTime,
});
