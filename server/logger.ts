import pino from "pino";

export type Logger = pino.Logger;

/** JSON lines, on standard output unless told otherwise; what could sign someone in never reaches them. */
export function createLogger(level: string, destination?: pino.DestinationStream): Logger {
  const options = { level, redact: ["*.headers.authorization", "*.headers.cookie", '*.headers["set-cookie"]', "*.password", "*.token"] };
  return destination ? pino(options, destination) : pino(options);
}
