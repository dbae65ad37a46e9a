import { readdirSync, readFileSync, readlinkSync, statSync } from "node:fs";
import { setTimeout as delay } from "node:timers/promises";

/*
 * Finds the processes of an instance through /proc: a bare Debian has no ps, and a number in a file says nothing about
 * who has that number now.
 */

/** Every process of an instance carries this variable, with its data folder as the value. */
export const INSTANCE_VARIABLE = "NUMBERLEAF_INSTANCE";

/** @returns {number[]} none where /proc is not mounted, as in some containers. */
function processIds() {
  try {
    return readdirSync("/proc")
      .filter((name) => /^\d+$/.test(name))
      .map(Number);
  } catch {
    return [];
  }
}

/**
 * @param {number} pid
 * @returns {{ state: string, parent: number } | undefined}
 */
function statusOf(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, "utf8");
    // The name in parentheses may itself contain parentheses and blanks.
    const [state = "", parent = "0"] = stat.slice(stat.lastIndexOf(")") + 2).split(" ");
    return { state, parent: Number(parent) };
  } catch {
    return undefined;
  }
}

/** @param {number} pid */
function programOf(pid) {
  return readlinkSync(`/proc/${pid}/exe`).split("/").at(-1);
}

/** @returns {Set<number>} this process and those that started it. */
function ownLine() {
  const line = new Set();
  for (let pid = process.pid; pid > 0 && !line.has(pid); pid = statusOf(pid)?.parent ?? 0) line.add(pid);
  return line;
}

/**
 * Whether a process runs; one that has ended but was not collected by its parent does not.
 *
 * @param {number} pid
 */
export function isRunning(pid) {
  const state = statusOf(pid)?.state;
  return state !== undefined && state !== "Z" && state !== "X";
}

/** @param {number} pid */
function sharesOurRoot(pid) {
  try {
    const theirs = statSync(`/proc/${pid}/root/`);
    const ours = statSync("/");
    return theirs.dev === ours.dev && theirs.ino === ours.ino;
  } catch {
    return false;
  }
}

/**
 * Processes that were started for the instance with this data folder, without this process and those that started it,
 * and without PostgreSQL, which is ended in its own way.
 *
 * @param {string} dataDirectory absolute
 * @returns {number[]}
 */
export function processesOfInstance(dataDirectory) {
  const marker = `${INSTANCE_VARIABLE}=${dataDirectory}`;
  const own = ownLine();
  return processIds().filter((pid) => {
    if (own.has(pid) || !isRunning(pid)) return false;
    try {
      const environment = readFileSync(`/proc/${pid}/environ`, "utf8").split("\0");
      return environment.includes(marker) && sharesOurRoot(pid) && programOf(pid) !== "postgres";
    } catch {
      return false;
    }
  });
}

/**
 * Whether any process was started with this argument.
 *
 * @param {string} argument
 */
export function isSomeonesArgument(argument) {
  return processIds().some((pid) => {
    try {
      return readFileSync(`/proc/${pid}/cmdline`, "utf8").split("\0").includes(argument) && isRunning(pid);
    } catch {
      return false;
    }
  });
}

/**
 * Running PostgreSQL processes that work in a data directory, the first one being the server itself if it is there.
 * PostgreSQL writes its titles over its environment, so it is known by its working directory.
 *
 * @param {string} directory
 * @returns {number[]}
 */
export function postgresProcessesIn(directory) {
  /** @type {import("node:fs").Stats} */
  let wanted;
  try {
    wanted = statSync(directory);
  } catch {
    return [];
  }
  return processIds()
    .filter((pid) => {
      if (!isRunning(pid)) return false;
      try {
        const there = statSync(`/proc/${pid}/cwd/`);
        return there.dev === wanted.dev && there.ino === wanted.ino && programOf(pid) === "postgres";
      } catch {
        return false;
      }
    })
    .sort((a, b) => a - b);
}

/**
 * @param {number} pid
 * @param {NodeJS.Signals} signal
 */
export function signal(pid, signal) {
  try {
    process.kill(pid, signal);
  } catch {
    // It has ended meanwhile, which is what was wanted.
  }
}

/**
 * @param {() => boolean} condition
 * @param {number} milliseconds
 * @returns {Promise<boolean>} whether the condition came true in time.
 */
export async function waitFor(condition, milliseconds) {
  const until = Date.now() + milliseconds;
  while (!condition()) {
    if (Date.now() >= until) return false;
    await delay(25);
  }
  return true;
}

/**
 * Ends what a killed start command left behind: politely, then by force.
 *
 * @param {string} dataDirectory absolute
 * @returns {Promise<number>} how many processes there were.
 */
export async function endLeftovers(dataDirectory) {
  const found = processesOfInstance(dataDirectory);
  for (const pid of found) signal(pid, "SIGTERM");
  if (!(await waitFor(() => processesOfInstance(dataDirectory).length === 0, 5_000))) {
    for (const pid of processesOfInstance(dataDirectory)) signal(pid, "SIGKILL");
    await waitFor(() => processesOfInstance(dataDirectory).length === 0, 2_000);
  }
  return found.length;
}
