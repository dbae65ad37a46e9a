import { createHash } from "node:crypto";
import {
  existsSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  rmSync,
  statSync,
  utimesSync,
  writeFileSync,
} from "node:fs";
import path from "node:path";
import { withLock } from "./locks.mjs";
import { isSomeonesArgument } from "./processes.mjs";

/*
 * Keeps node_modules and the build in step with the source. Each state of the source is built into a folder of its own,
 * so that a shop that is running keeps its files while another one is built beside it.
 */

/** Everything a build depends on. */
const SOURCES = [
  "app",
  "db",
  "public",
  "package-lock.json",
  "react-router.config.ts",
  "tsconfig.json",
  "vite.config.ts",
];

/** How many builds are kept, the newest ones; those that a web process serves are kept besides. */
const KEPT_BUILDS = 4;

/**
 * Installs the npm packages unless exactly those of package-lock.json are there. npm writes down what it has installed,
 * as its last step, so an interrupted installation is noticed as well.
 *
 * @param {string} projectDirectory
 * @param {{
 *   say: (line: string) => void,
 *   run: (name: string, command: string[]) => Promise<void>,
 * }} tools
 */
export async function ensureNodePackages(projectDirectory, { say, run }) {
  if (nodePackagesMatch(projectDirectory)) return;
  await withLock("packages", projectDirectory, async () => {
    if (nodePackagesMatch(projectDirectory)) return;
    say("installing the npm packages, once");
    const npm = process.env.npm_execpath ? [process.execPath, process.env.npm_execpath] : ["npm"];
    await run("npm", [...npm, "ci", "--include=dev", "--no-audit", "--no-fund", "--loglevel=error"]);
  });
}

/** @param {string} projectDirectory */
export function nodePackagesMatch(projectDirectory) {
  const installed = readPackages(path.join(projectDirectory, "node_modules", ".package-lock.json"));
  const wanted = readPackages(path.join(projectDirectory, "package-lock.json"));
  if (installed === undefined || wanted === undefined) return false;
  return Object.entries(wanted).every(([name, entry]) => {
    if (name === "") return true;
    const there = installed[name];
    // Binaries for other systems are in the lock but are not installed.
    if (there === undefined) return entry.optional === true || entry.devOptional === true;
    return there.version === entry.version && there.integrity === entry.integrity;
  });
}

/**
 * @param {string} file
 * @returns {Record<string, { version?: string, integrity?: string, optional?: boolean, devOptional?: boolean }> | undefined}
 */
function readPackages(file) {
  try {
    return JSON.parse(readFileSync(file, "utf8")).packages;
  } catch {
    return undefined;
  }
}

/**
 * A digest of everything a build depends on.
 *
 * @param {string} projectDirectory
 */
export function sourceDigest(projectDirectory) {
  const digest = createHash("sha256");
  const add = (/** @type {string} */ relative) => {
    const file = path.join(projectDirectory, relative);
    if (!existsSync(file)) return;
    if (statSync(file).isDirectory()) {
      for (const name of readdirSync(file).sort()) add(path.join(relative, name));
    } else if (!/\.test\.tsx?$/.test(relative)) {
      digest.update(`${relative}\0`).update(readFileSync(file)).update("\0");
    }
  };
  for (const source of SOURCES) add(source);
  return digest.digest("hex").slice(0, 16);
}

/**
 * The folder of the build for the source as it is now, built if need be.
 *
 * @param {string} projectDirectory
 * @param {{
 *   say: (line: string) => void,
 *   run: (name: string, command: string[], options: { environment: Record<string, string> }) => Promise<void>,
 * }} tools
 * @returns {Promise<string>} absolute
 */
export async function ensureBuild(projectDirectory, { say, run }) {
  const builds = path.join(projectDirectory, "build");
  return withLock("build", builds, async () => {
    const directory = path.join(builds, sourceDigest(projectDirectory));
    const complete = path.join(directory, "complete");
    if (existsSync(complete)) {
      const now = new Date();
      utimesSync(complete, now, now);
      return directory;
    }
    say("building the shop");
    rmSync(directory, { recursive: true, force: true });
    mkdirSync(directory, { recursive: true });
    await run(
      "build",
      [process.execPath, path.join("node_modules", "@react-router", "dev", "bin.js"), "build"],
      {
        environment: {
          NODE_ENV: "production",
          BUILD_DIRECTORY: path.relative(projectDirectory, directory),
        },
      },
    );
    writeFileSync(complete, "");
    removeOldBuilds(builds);
    return directory;
  });
}

/** @param {string} builds */
function removeOldBuilds(builds) {
  const age = (/** @type {string} */ name) => {
    const complete = path.join(builds, name, "complete");
    return existsSync(complete) ? statSync(complete).mtimeMs : 0;
  };
  const old = readdirSync(builds)
    .filter((name) => /^[0-9a-f]{16}$/.test(name))
    .sort((a, b) => age(b) - age(a))
    .slice(KEPT_BUILDS);
  for (const name of old) {
    const directory = path.join(builds, name);
    if (!isSomeonesArgument(directory)) rmSync(directory, { recursive: true, force: true });
  }
}
