import { spawn } from "node:child_process";
import path from "node:path";
import { fileURLToPath } from "node:url";
import { INSTANCE_LOCK } from "./lib/instance.mjs";
import { lockNote } from "./lib/locks.mjs";
import { PlainError } from "./lib/plain-error.mjs";
import { dataDirectoryOf } from "./lib/settings.mjs";
import { ensureBuild, ensureNodePackages } from "./lib/source.mjs";
import { taskEnvironment } from "./lib/tasks.mjs";

/*
 * `npm run serve`, `worker`, `migrate`, `seed`, `bench` and `build`: one process, on real services or on those of a
 * running instance.
 */

const PROJECT = path.dirname(path.dirname(fileURLToPath(import.meta.url)));
const say = (/** @type {string} */ line) => console.error(line);

try {
  process.exitCode = await main(process.argv.slice(2));
} catch (error) {
  console.error(error instanceof PlainError ? error.message : error);
  process.exitCode = 1;
}

/** @param {string[]} args */
async function main([task, ...rest]) {
  await ensureNodePackages(PROJECT, { say, run: runOrThrow });
  const script = (/** @type {string} */ name) => ["--import", "tsx", path.join("scripts", `${name}.ts`)];
  switch (task) {
    case "build":
      say(path.relative(process.cwd(), await ensureBuild(PROJECT, { say, run: runOrThrow })));
      return 0;
    case "serve": {
      const environment = await taskEnvironment(process.env, PROJECT);
      const build = await ensureBuild(PROJECT, { say, run: runOrThrow });
      return runHere([...script("serve"), build], { NODE_ENV: "production", ...environment });
    }
    case "worker":
    case "migrate":
    case "seed":
      return runHere([...script(task), ...rest], {
        NODE_ENV: "production",
        ...(await taskEnvironment(process.env, PROJECT)),
      });
    case "bench":
      return runHere([...script("bench/main"), ...(await runningShop())], {});
    default:
      throw new PlainError(`There is no task "${task}".`);
  }
}

/** @returns {Promise<string[]>} the address of the shop on this data folder, if it runs. */
async function runningShop() {
  const address = await lockNote(INSTANCE_LOCK, dataDirectoryOf(process.env, PROJECT));
  return address ? [address] : [];
}

/**
 * Runs Node on the terminal of this process, which waits and passes signals on.
 *
 * @param {string[]} args
 * @param {Record<string, string | undefined>} environment
 * @returns {Promise<number>} its exit code.
 */
function runHere(args, environment) {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, args, {
      cwd: PROJECT,
      stdio: "inherit",
      env: { ...process.env, ...environment },
    });
    // Ctrl-C in a terminal reaches the child by itself.
    process.on("SIGINT", () => {});
    for (const signal of /** @type {const} */ (["SIGTERM", "SIGHUP"])) {
      process.on(signal, () => child.kill(signal));
    }
    child.on("error", reject);
    child.on("exit", (code) => resolve(code ?? 1));
  });
}

/**
 * @param {string} name
 * @param {string[]} command
 * @param {{ environment?: Record<string, string> }} [options]
 */
async function runOrThrow(name, [program = "", ...args], { environment = {} } = {}) {
  const code = await new Promise((resolve, reject) => {
    const child = spawn(program, args, {
      cwd: PROJECT,
      // Standard output belongs to the task itself.
      stdio: ["ignore", 2, 2],
      env: { ...process.env, ...environment },
    });
    child.on("error", reject);
    child.on("exit", resolve);
  });
  if (code !== 0) throw new PlainError(`${name} failed`);
}
