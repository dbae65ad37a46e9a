import { z } from "zod";

const flag = z
  .enum(["0", "1", "true", "false", ""])
  .default("")
  .transform((v) => v === "1" || v === "true");

/** Everything the web and worker processes are configured by. `npm start` derives all of it for one machine. */
const schema = z.object({
  NODE_ENV: z.enum(["development", "production", "test"]).default("production"),
  /** demo: fakes and demo data; studio: fakes, no demo data; test: under test; production: real services only. */
  NUMBERLEAF_MODE: z.enum(["demo", "studio", "test", "production"]).default("production"),
  HOST: z.string().default("127.0.0.1"),
  PORT: z.coerce.number().int().default(3000),
  /** The address that buyers use; links in e-mails and redirects from the payment page begin with it. */
  BASE_URL: z.url(),
  DATABASE_URL: z.string().min(1),
  DATABASE_POOL: z.coerce.number().int().min(2).default(12),
  /** At least 32 characters; signs cookies and derives order links. */
  SESSION_SECRET: z.string().min(32),
  S3_ENDPOINT: z.string().default(""),
  /** Base address under which the public bucket is read by browsers. */
  S3_PUBLIC_URL: z.url(),
  S3_REGION: z.string().default("eu-west-1"),
  S3_ACCESS_KEY_ID: z.string().min(1),
  S3_SECRET_ACCESS_KEY: z.string().min(1),
  S3_BUCKET_PRIVATE: z.string().min(1),
  S3_BUCKET_PUBLIC: z.string().min(1),
  STRIPE_SECRET_KEY: z.string().min(1),
  STRIPE_WEBHOOK_SECRET: z.string().min(1),
  /** Empty for Stripe itself; the address of the local stand-in otherwise. */
  STRIPE_API_URL: z.string().default(""),
  /** Origin of the hosted payment page, allowed as a target of forms. */
  STRIPE_PUBLIC_URL: z.string().default("https://checkout.stripe.com"),
  SMTP_URL: z.string().min(1),
  MAIL_FROM: z.string().min(3),
  /** The one-time code for /setup of a new studio; empty once it has been set up. */
  SETUP_CODE: z.string().default(""),
  LOG_LEVEL: z.enum(["trace", "debug", "info", "warn", "error", "silent"]).default("info"),
  TRUST_PROXY: z.string().default(""),
  /** Set where the shop is reached over TLS; makes cookies Secure and sends HSTS. Derived from BASE_URL if unset. */
  SECURE_COOKIES: flag,
});

export type Env = z.infer<typeof schema> & { secure: boolean; cookiePrefix: string };

function read(): Env {
  const parsed = schema.safeParse(process.env);
  if (!parsed.success) {
    const lines = parsed.error.issues.map((i) => `  ${i.path.join(".")}: ${i.message}`);
    throw new Error(
      `The environment is not complete:\n${lines.join("\n")}\nSee "Configuration" in README.md.`,
    );
  }
  const base = new URL(parsed.data.BASE_URL);
  return {
    ...parsed.data,
    secure: parsed.data.SECURE_COOKIES || base.protocol === "https:",
    // Cookies ignore ports: two instances on one host must not sign each other out.
    cookiePrefix: `nl${base.port || (base.protocol === "https:" ? "443" : "80")}`,
  };
}

/** The environment, read and checked once. */
export const env: Env = read();
