import pino from "pino";

export type Logger = pino.Logger;

/** JSON lines on standard output; what could sign someone in never reaches them. */
export function createLogger(level: string): Logger {
  return pino({
    level,
    redact: ["req.headers.authorization", "req.headers.cookie", 'res.headers["set-cookie"]', "*.password", "*.token"],
  });
}
