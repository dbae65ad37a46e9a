import { mkdtempSync, rmSync, statSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterEach, expect, test } from "vitest";
import {
  dataDirectoryOf,
  localServices,
  newSecrets,
  openSecrets,
  readSecrets,
  settings,
} from "./settings.mjs";

const made: string[] = [];
afterEach(() => {
  for (const directory of made.splice(0)) rmSync(directory, { recursive: true });
});

function scratch(): string {
  const directory = mkdtempSync(path.join(tmpdir(), "numberleaf-settings-"));
  made.push(directory);
  return directory;
}

const secrets = newSecrets("demo");
const derive = (environment: Record<string, string>) =>
  settings({ environment, dataDirectory: "/srv/data", mode: "demo", secrets });

test("everything follows from PORT and the data folder", () => {
  const derived = derive({ PORT: "4000" });
  expect(derived).toMatchObject({
    PORT: "4000",
    POSTGRES_PORT: "4005",
    HOST: "127.0.0.1",
    BASE_URL: "http://127.0.0.1:4000",
    S3_ENDPOINT: "http://127.0.0.1:4001",
    S3_PUBLIC_URL: "http://127.0.0.1:4001/numberleaf-public",
    STRIPE_API_URL: "http://127.0.0.1:4002",
    STRIPE_PUBLIC_URL: "http://127.0.0.1:4002",
    STRIPE_WEBHOOK_URL: "http://127.0.0.1:4000/hooks/stripe",
    SMTP_URL: "smtp://127.0.0.1:4004",
    DATA_DIR: "/srv/data",
    NUMBERLEAF_INSTANCE: "/srv/data",
  });
  expect(new URL(derived.DATABASE_URL ?? "").username).toBe("numberleaf_app");
  expect(new URL(derived.DATABASE_OWNER_URL ?? "").username).toBe("numberleaf_owner");
});

test("two instances share no address and no secret", () => {
  const one = derive({ PORT: "4000" });
  const other = settings({
    environment: { PORT: "4010" },
    dataDirectory: "/srv/other",
    mode: "demo",
    secrets: newSecrets("demo"),
  });
  const shared = Object.keys(one).filter((name) => one[name] === other[name] && one[name] !== "");
  expect(shared.sort()).toEqual([
    "AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED",
    "HOST",
    "LOG_LEVEL",
    "MAIL_FROM",
    "NUMBERLEAF_MODE",
    "S3_BUCKET_PRIVATE",
    "S3_BUCKET_PUBLIC",
    "S3_REGION",
  ]);
});

test("opened to a network, what browsers visit is named by the shop's address and the rest stays here", () => {
  expect(derive({ HOST: "0.0.0.0", BASE_URL: "http://studio.example:3000/" })).toMatchObject({
    BASE_URL: "http://studio.example:3000",
    S3_ENDPOINT: "http://studio.example:3001",
    STRIPE_PUBLIC_URL: "http://studio.example:3002",
    STRIPE_API_URL: "http://127.0.0.1:3002",
    SMTP_URL: "smtp://127.0.0.1:3004",
    STORAGE_CORS_ORIGINS: "http://studio.example:3000,http://127.0.0.1:3000,http://localhost:3000",
  });
});

test("a real service takes the place of the local one, with all it needs", () => {
  const stripe = { STRIPE_SECRET_KEY: "sk_live_x", STRIPE_WEBHOOK_SECRET: "whsec_x" };
  expect(localServices(stripe)).toEqual({ postgres: true, storage: true, stripe: false, mail: true });
  expect(derive(stripe)).toMatchObject({
    ...stripe,
    STRIPE_API_URL: "",
    STRIPE_PUBLIC_URL: "https://checkout.stripe.com",
  });
  expect(() => derive({ SMTP_URL: "smtp://mail.example" })).toThrow(
    "SMTP_URL is set, so MAIL_FROM must be set too.",
  );
});

test("neither mode nor identity is taken over from the environment of another instance", () => {
  const derived = derive({
    NUMBERLEAF_MODE: "production",
    NUMBERLEAF_INSTANCE: "/srv/other",
    DATA_DIR: "/srv/other",
  });
  expect(derived).toMatchObject({
    NUMBERLEAF_MODE: "demo",
    NUMBERLEAF_INSTANCE: "/srv/data",
    DATA_DIR: "/srv/data",
  });
});

test("a data folder is counted from the project", () => {
  expect(dataDirectoryOf({}, "/project")).toBe("/project/.data");
  expect(dataDirectoryOf({ DATA_DIR: ".data-second" }, "/project")).toBe("/project/.data-second");
  expect(dataDirectoryOf({ DATA_DIR: "/srv/shop" }, "/project")).toBe("/srv/shop");
});

test("secrets are made once, for their owner alone, and the folder keeps its kind", () => {
  const directory = path.join(scratch(), "data");
  const first = openSecrets(directory, "studio");
  expect(first.setupCode).toMatch(/^([2-9a-z]{5}-){3}[2-9a-z]{5}$/);
  expect(statSync(path.join(directory, "secrets.json")).mode & 0o777).toBe(0o600);
  expect(openSecrets(directory, undefined)).toEqual(first);
  expect(readSecrets(directory)).toEqual(first);
  expect(() => openSecrets(directory, "demo")).toThrow("already holds a studio of its own");
});

test("a folder is a demo unless something else is asked for", () => {
  const secrets = openSecrets(path.join(scratch(), "data"), undefined);
  expect(secrets).toMatchObject({ mode: "demo", setupCode: null });
});
