import { z } from "zod";

const schema = z.object({
  NODE_ENV: z.enum(["development", "test", "production"]).default("development"),
  HOST: z.string().default("127.0.0.1"),
  PORT: z.coerce.number().int().min(0).max(65_535).default(4310),
  /** Address that people type; e-mails link to it. */
  PUBLIC_URL: z.url().optional(),
  DATABASE_URL: z.string().startsWith("postgres"),
  DATABASE_POOL_SIZE: z.coerce.number().int().min(2).max(200).default(10),
  SESSION_SECRET: z.string().min(32, "at least 32 characters"),
  /** Behind a proxy that ends TLS: number of hops to trust, and cookies only over https. */
  TRUST_PROXY: z.coerce.number().int().min(0).max(10).default(0),
  SECURE_COOKIES: z.stringbool().default(false),
  S3_ENDPOINT: z.url().optional(),
  S3_REGION: z.string().default("us-east-1"),
  S3_BUCKET: z.string().min(3),
  S3_ACCESS_KEY_ID: z.string().min(1),
  S3_SECRET_ACCESS_KEY: z.string().min(1),
  SMTP_URL: z.string().regex(/^smtps?:\/\//, "an address that begins with smtp:// or smtps://"),
  MAIL_FROM: z.string().default("Shelftide <no-reply@shelftide.example>"),
  LOG_LEVEL: z.enum(["trace", "debug", "info", "warn", "error", "silent"]).default("info"),
  /** Set by the start command: everything runs embedded on this machine, so demo accounts may exist. */
  SHELFTIDE_EMBEDDED: z.stringbool().default(false),
});

export type Environment = z.infer<typeof schema>;

/**
 * Reads and checks the environment once, at the start of a process.
 *
 * @throws Error whose message lists every variable that is wrong and why.
 */
export function readEnvironment(variables: NodeJS.ProcessEnv = process.env): Environment {
  const filled = Object.fromEntries(Object.entries(variables).filter(([, value]) => value !== ""));
  const result = schema.safeParse(filled);
  if (result.success) return result.data;
  const lines = result.error.issues.map((issue) => `  ${issue.path.join(".")}: ${issue.message}`);
  throw new Error(`The environment is not complete:\n${lines.join("\n")}`);
}
