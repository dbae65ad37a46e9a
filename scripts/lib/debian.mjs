import { spawn } from "node:child_process";
import { closeSync, existsSync, mkdtempSync, openSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { findPostgres } from "./cluster.mjs";
import { PlainError } from "./plain-error.mjs";

/*
 * What comes from Debian's packages. Nothing that is there already is upgraded, and nothing is asked.
 */

export const CHROMIUM = "/usr/bin/chromium";
const FONTS = "/usr/share/fonts/truetype/liberation";
const CLUSTER_CONFIGURATION = "/etc/postgresql-common/createcluster.conf";

/**
 * Installs what is missing.
 *
 * @param {{ browser?: boolean, say: (line: string) => void }} options `browser`: also what the end-to-end tests need.
 * @throws {PlainError} with the commands for a person who may, where this process may not.
 */
export async function ensureDebianPackages({ browser = false, say }) {
  const postgres = findPostgres() === undefined;
  const forBrowser = browser
    ? [...(existsSync(CHROMIUM) ? [] : ["chromium"]), ...(existsSync(FONTS) ? [] : ["fonts-liberation"])]
    : [];
  const missing = [...(postgres ? ["postgresql"] : []), ...forBrowser];
  if (missing.length === 0) return;
  if (!existsSync("/usr/bin/apt-get")) {
    throw new PlainError(
      `Missing: ${missing.join(", ")}. This system has no apt-get, so they cannot be installed from here: install them in its own way. PostgreSQL is looked for in /usr/lib/postgresql.`,
    );
  }
  if (process.getuid?.() !== 0) {
    throw new PlainError(
      `Missing: ${missing.join(", ")}. Only root may install them. As root, once:\n  apt-get update && apt-get install --no-install-recommends --no-upgrade ${missing.join(" ")}`,
    );
  }
  say(`installing from Debian's packages, once: ${missing.join(", ")}`);
  await apt(["update"]);
  if (postgres) {
    // Debian would start a cluster of its own on PostgreSQL's usual port; the shop has a private one.
    await install(["postgresql-common"]);
    forbidMainCluster();
    await install(["postgresql"]);
  }
  if (forBrowser.length > 0) await install(forBrowser);
}

/** @param {string[]} names */
function install(names) {
  return apt(["install", "--yes", "--no-install-recommends", "--no-upgrade", ...names]);
}

/**
 * Runs in a session of its own: interrupting the start command must not leave a package half installed.
 *
 * @param {string[]} args
 * @returns {Promise<void>}
 */
function apt(args) {
  return new Promise((resolve, reject) => {
    const directory = mkdtempSync(path.join(tmpdir(), "numberleaf-apt-"));
    const log = path.join(directory, "log");
    const output = openSync(log, "w");
    const child = spawn(
      "apt-get",
      ["--quiet=2", "-o", "DPkg::Lock::Timeout=300", "-o", "Acquire::Retries=3", ...args],
      {
        detached: true,
        // A file, not a pipe: it has to be able to write on when this process is gone.
        stdio: ["ignore", output, output],
        env: { ...process.env, DEBIAN_FRONTEND: "noninteractive", LC_ALL: "C.UTF-8" },
      },
    );
    closeSync(output);
    child.on("error", reject);
    child.on("close", (code) => {
      const told = readFileSync(log, "utf8").slice(-4_000).trim();
      rmSync(directory, { recursive: true });
      if (code === 0) resolve();
      else reject(new PlainError(`apt-get ${args.join(" ")} failed:\n${told}`));
    });
  });
}

function forbidMainCluster() {
  const before = existsSync(CLUSTER_CONFIGURATION) ? readFileSync(CLUSTER_CONFIGURATION, "utf8") : "";
  const others = before.split("\n").filter((line) => !/^\s*#?\s*create_main_cluster\s*=/.test(line));
  writeFileSync(CLUSTER_CONFIGURATION, `${others.join("\n").trimEnd()}\ncreate_main_cluster = false\n`);
}
