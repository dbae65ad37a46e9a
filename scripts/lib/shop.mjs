import { spawn } from "node:child_process";
import path from "node:path";
import { createInterface } from "node:readline";
import { fileURLToPath } from "node:url";
import { PORT_NAMES } from "./ports.mjs";

const PROJECT = path.dirname(path.dirname(path.dirname(fileURLToPath(import.meta.url))));

/** Names that would carry one instance's identity or services into another one. */
const NOT_INHERITED = new Set([
  ...PORT_NAMES,
  "HOST",
  "DATA_DIR",
  "BASE_URL",
  "NODE_ENV",
  "NUMBERLEAF_MODE",
  "NUMBERLEAF_INSTANCE",
  "DATABASE_URL",
  "DATABASE_OWNER_URL",
  "SESSION_SECRET",
  "S3_ENDPOINT",
  "S3_PUBLIC_URL",
  "S3_REGION",
  "S3_ACCESS_KEY_ID",
  "S3_SECRET_ACCESS_KEY",
  "S3_BUCKET_PRIVATE",
  "S3_BUCKET_PUBLIC",
  "STORAGE_CORS_ORIGINS",
  "STRIPE_SECRET_KEY",
  "STRIPE_WEBHOOK_SECRET",
  "STRIPE_WEBHOOK_URL",
  "STRIPE_PUBLIC_URL",
  "STRIPE_API_URL",
  "SMTP_URL",
  "MAIL_FROM",
  "SETUP_CODE",
  "TRUST_PROXY",
  "LOG_LEVEL",
  "DEMO_SCANS",
]);

/**
 * @typedef {{
 *   pid: number,
 *   output: () => string,
 *   ready: Promise<string>,
 *   ended: Promise<number | NodeJS.Signals>,
 *   stop: (signal?: NodeJS.Signals) => Promise<{ code: number | NodeJS.Signals, milliseconds: number }>,
 * }} Shop `ready` is the address, when the shop answers there; it rejects if the command ends before.
 */

/**
 * Runs the start command for a whole instance of its own, as a person would.
 *
 * @param {{
 *   environment: Record<string, string>,
 *   args?: string[],
 *   onLine?: (line: string) => void,
 * }} options `environment` names at least its ports and DATA_DIR; nothing of that kind is taken from this process.
 * @returns {Shop}
 */
export function startShop({ environment, args = [], onLine = () => {} }) {
  const inherited = Object.fromEntries(
    Object.entries(process.env).filter(([name]) => !NOT_INHERITED.has(name) && !/^(npm|VITEST)_/i.test(name)),
  );
  const child = spawn(process.execPath, [path.join("scripts", "start.mjs"), ...args], {
    cwd: PROJECT,
    stdio: ["ignore", "pipe", "pipe"],
    env: { ...inherited, ...environment },
  });
  let output = "";
  /** @type {(address: string) => void} */
  let announce = () => {};
  for (const stream of [child.stdout, child.stderr]) {
    createInterface({ input: stream }).on("line", (line) => {
      output += `${line}\n`;
      onLine(line);
      const address = /^ready (http:\S+)$/.exec(line)?.[1];
      if (address !== undefined) announce(address);
    });
  }
  /** @type {Promise<number | NodeJS.Signals>} */
  const ended = new Promise((resolve) => {
    child.on("error", () => resolve(1));
    child.on("close", (code, signal) => resolve(code ?? signal ?? 1));
  });
  /** @type {Promise<string>} */
  const ready = new Promise((resolve, reject) => {
    announce = resolve;
    ended.then((code) => reject(new Error(`the start command ended (${code}):\n${output}`)));
  });
  // Whoever does not wait for it learns of the end from `ended`.
  ready.catch(() => {});
  return {
    pid: child.pid ?? 0,
    output: () => output,
    ready,
    ended,
    stop: async (signal = "SIGTERM") => {
      const asked = Date.now();
      child.kill(signal);
      const code = await ended;
      return { code, milliseconds: Date.now() - asked };
    },
  };
}
