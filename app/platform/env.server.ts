import { z } from "zod";

const base64Key = z
  .string()
  .refine((text) => Buffer.from(text, "base64").length === 32, "must be 32 bytes in base64");

const schema = z.object({
  NODE_ENV: z.enum(["production", "development", "test"]).default("production"),
  HOST: z.string().default("127.0.0.1"),
  PORT: z.coerce.number().int().min(1).max(65535).default(3000),
  /** Where people reach the application: scheme, host and port, no path. */
  APP_ORIGIN: z.url().transform((text) => new URL(text).origin),
  /** Addresses of the reverse proxies whose forwarding headers are believed, as Express reads "trust proxy". */
  TRUSTED_PROXIES: z.string().default(""),
  DATABASE_URL: z.string().startsWith("postgres"),
  DATABASE_AUTH_URL: z.string().startsWith("postgres"),
  HALESIDE_MASTER_KEY: base64Key,
  BETTER_AUTH_SECRET: z.string().min(32, "must be at least 32 characters"),
  RESEND_API_KEY: z.string().min(1),
  RESEND_BASE_URL: z.url().optional(),
  RESEND_WEBHOOK_SECRET: z.string().min(1),
  MAIL_FROM: z.string().default("Haleside <notices@example.org>"),
  /** Set: a local mail service that speaks the same protocol runs in this process, with an inbox to look at. */
  MAIL_FAKE_PORT: z.coerce.number().int().optional(),
  DATABASE_POOL: z.coerce.number().int().min(1).max(100).default(8),
  /** Seconds a request waits for a database connection before it is answered 503. */
  DATABASE_WAIT_SECONDS: z.coerce.number().min(0.1).max(60).default(5),
  LOG_LEVEL: z.enum(["debug", "info", "warn", "error", "silent"]).default("info"),
  /** Sign-in attempts per account and per address in 15 minutes. */
  SIGN_IN_ATTEMPTS: z.coerce.number().int().min(1).default(10),
});

export type Env = z.output<typeof schema>;

let cached: Env | undefined;

/**
 * The validated environment.
 * @throws Error that names each bad variable and what it must be.
 */
export function env(): Env {
  if (cached) return cached;
  const parsed = schema.safeParse(process.env);
  if (!parsed.success) {
    const lines = parsed.error.issues.map((issue) => `  ${issue.path.join(".")}: ${issue.message}`);
    throw new Error(`The environment is not complete:\n${lines.join("\n")}`);
  }
  cached = parsed.data;
  return cached;
}
