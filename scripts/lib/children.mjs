import { spawn } from "node:child_process";
import { createWriteStream, existsSync, mkdirSync, renameSync, statSync } from "node:fs";
import { setPriority } from "node:os";
import path from "node:path";
import { createInterface } from "node:readline";
import { PlainError } from "./plain-error.mjs";

/*
 * The child processes of a start: their output goes to log files, their troubles to the terminal, and all of
 * them end when this process does.
 */

/** A log of the start before is kept beside a new one past this size, in bytes. */
const LOG_LIMIT = 10_000_000;

/** Waiting times before a service that stopped by itself is started again, in ms; after the last one, no more. */
const RESTART_DELAYS = [500, 1_000, 2_000, 4_000, 8_000];

/** A service that ran this long before it stopped, in ms, begins with the first delay again. */
const STEADY = 60_000;

/** Phases of stopping: those of a later one serve those of an earlier one. Times in ms after the stop was asked for. */
const PHASES = {
  /** Web and worker: end their requests and jobs. */
  work: { signal: "SIGTERM", killAfter: 7_000 },
  /** The stand-ins for outside services. */
  services: { signal: "SIGTERM", killAfter: 7_700 },
  database: { signal: "SIGINT", killAfter: 9_000 },
};

/**
 * @typedef {{
 *   name: string,
 *   command: string[],
 *   environment?: Record<string, string>,
 *   phase: keyof typeof PHASES,
 *   restart?: boolean,
 *   niceness?: number,
 *   worthTelling?: (line: string) => boolean,
 * }} Service `restart`: started again when it stops by itself; otherwise everything stops with it.
 *   `worthTelling` picks the lines of its standard error that a person should see.
 */

/**
 * @typedef {{ pid: number, running: boolean, ended: Promise<void> }} Child
 */

/**
 * @param {{
 *   directory: string,
 *   logDirectory: string,
 *   environment: Record<string, string | undefined>,
 *   say: (line: string) => void,
 *   fail: (reason: string) => void,
 * }} options `fail` is called when a service has stopped for good that should not have.
 */
export function makeChildren({ directory, logDirectory, environment, say, fail }) {
  mkdirSync(logDirectory, { recursive: true, mode: 0o700 });
  /** @type {Map<Child, Service["phase"]>} */
  const children = new Map();
  /** @type {Set<NodeJS.Timeout>} */
  const restarts = new Set();
  let stopping = false;

  /**
   * @param {string} name
   * @param {string[]} command
   * @param {Record<string, string>} extra
   * @param {Service["phase"]} phase
   * @param {number | undefined} niceness
   * @param {(line: string, isError: boolean) => void} onLine
   * @returns {Child & { code: Promise<string> }}
   */
  function launch(name, command, extra, phase, niceness, onLine) {
    if (stopping) throw new PlainError("stopped while starting");
    const [program = "", ...args] = dyingWithParent(command);
    // Of a session of its own, so that Ctrl-C in the terminal reaches this process only, which then stops them in order.
    const process_ = spawn(program, args, {
      cwd: directory,
      detached: true,
      stdio: ["ignore", "pipe", "pipe"],
      env: { ...environment, ...extra },
    });
    const log = createWriteStream(logFile(name), { flags: "a" });
    for (const [stream, isError] of /** @type {const} */ ([
      [process_.stdout, false],
      [process_.stderr, true],
    ])) {
      createInterface({ input: stream }).on("line", (line) => {
        log.write(`${line}\n`);
        onLine(line, isError);
      });
    }
    const { promise: code, resolve } = withResolvers();
    const child = { pid: process_.pid ?? 0, running: true, ended: code.then(() => undefined), code };
    const end = (/** @type {string} */ how) => {
      child.running = false;
      children.delete(child);
      log.end();
      resolve(how);
    };
    process_.on("error", (error) => end(error.message));
    process_.on("close", (status, by) => end(by === null ? `code ${status}` : `signal ${by}`));
    if (niceness !== undefined && child.pid > 0) setPriority(child.pid, niceness);
    children.set(child, phase);
    return child;
  }

  /** @param {string} name */
  function logFile(name) {
    const file = path.join(logDirectory, `${name}.log`);
    if (existsSync(file) && statSync(file).size > LOG_LIMIT) renameSync(file, `${file}.1`);
    return file;
  }

  /**
   * Starts a service.
   *
   * @param {Service} service
   * @param {number} [attempt]
   * @returns {Child}
   */
  function start(service, attempt = 0) {
    const since = Date.now();
    const child = launch(
      service.name,
      service.command,
      service.environment ?? {},
      service.phase,
      service.niceness,
      (line, isError) => {
        const trouble = troubleIn(line, isError && (service.worthTelling ?? (() => true))(line));
        if (trouble !== undefined && !stopping) say(`${service.name}: ${trouble}`);
      },
    );
    child.code.then((how) => {
      if (stopping) return;
      const log = path.relative(process.cwd(), path.join(logDirectory, `${service.name}.log`));
      const tried = Date.now() - since > STEADY ? 0 : attempt;
      const wait = service.restart ? RESTART_DELAYS[tried] : undefined;
      if (wait === undefined) {
        fail(`${service.name} stopped by itself (${how}); its log is ${log}`);
        return;
      }
      say(`${service.name} stopped by itself (${how}) and is started again; its log is ${log}`);
      const timer = setTimeout(() => {
        restarts.delete(timer);
        if (!stopping) start(service, tried + 1);
      }, wait);
      restarts.add(timer);
    });
    return child;
  }

  /**
   * Runs a command to its end.
   *
   * @param {string} name
   * @param {string[]} command
   * @param {{
   *   environment?: Record<string, string>,
   *   onLine?: (line: string) => void,
   *   niceness?: number,
   * }} [options] `onLine` is given each line of its standard output.
   * @throws {PlainError} with the end of its output, where it fails.
   */
  async function run(name, command, { environment = {}, onLine = () => {}, niceness } = {}) {
    /** @type {string[]} */
    const lines = [];
    const child = launch(name, command, environment, "work", niceness, (line, isError) => {
      lines.push(line);
      if (lines.length > 40) lines.shift();
      if (!isError) onLine(line);
    });
    const how = await child.code;
    if (how !== "code 0") throw new PlainError(`${name} failed (${how}):\n${lines.join("\n")}`);
  }

  /**
   * Stops everything, phase by phase, within 10 s.
   *
   * @returns {Promise<void>}
   */
  async function stop() {
    stopping = true;
    const asked = Date.now();
    for (const timer of restarts) clearTimeout(timer);
    for (const [phase, { signal, killAfter }] of Object.entries(PHASES)) {
      const mine = [...children].filter(([, of]) => of === phase).map(([child]) => child);
      for (const child of mine) signalChild(child, /** @type {NodeJS.Signals} */ (signal));
      const timer = setTimeout(
        () => {
          for (const child of mine) signalChild(child, "SIGKILL");
        },
        Math.max(0, asked + killAfter - Date.now()),
      );
      await Promise.all(mine.map((child) => child.ended));
      clearTimeout(timer);
    }
  }

  /** Ends everything at once and by force. */
  function kill() {
    stopping = true;
    for (const child of children.keys()) signalChild(child, "SIGKILL");
  }

  return { start, run, stop, kill, isStopping: () => stopping };
}

/** @typedef {ReturnType<typeof makeChildren>} Children */

/**
 * @returns {{ promise: Promise<string>, resolve: (value: string) => void }}
 */
function withResolvers() {
  /** @type {(value: string) => void} */
  let resolve = () => {};
  const promise = new Promise((/** @type {(value: string) => void} */ r) => {
    resolve = r;
  });
  return { promise, resolve };
}

/**
 * Asked to stop, a child ends its helpers itself, in its own order; by force, its whole process group ends.
 *
 * @param {Child} child
 * @param {NodeJS.Signals} signal
 */
function signalChild(child, signal) {
  if (!child.running || child.pid === 0) return;
  try {
    process.kill(signal === "SIGKILL" ? -child.pid : child.pid, signal);
  } catch {
    // It has ended meanwhile.
  }
}

const SETPRIV = "/usr/bin/setpriv";
const hasSetpriv = existsSync(SETPRIV);

/**
 * Has the kernel send SIGTERM to the child when this process is killed, so that little is left over.
 *
 * @param {string[]} command
 */
function dyingWithParent(command) {
  if (!hasSetpriv) return command;
  const signal = command.some((part) => part.endsWith("/postgres")) ? "INT" : "TERM";
  if (command[0] === "setpriv") return ["setpriv", "--pdeathsig", signal, ...command.slice(1)];
  return ["setpriv", "--pdeathsig", signal, ...command];
}

/**
 * What a person should see of a line of output: a warning or an error of a structured log, or what was written
 * to standard error.
 *
 * @param {string} line
 * @param {boolean} tellPlain whether a line that is no structured log is to be told.
 * @returns {string | undefined}
 */
export function troubleIn(line, tellPlain) {
  if (line.startsWith("{")) {
    try {
      const { level, msg, err, error } = JSON.parse(line);
      if (typeof level === "number") {
        if (level < 40) return undefined;
        const reason = err?.message ?? err ?? error;
        return [msg, reason].filter((part) => typeof part === "string" && part !== "").join(": ");
      }
    } catch {
      // Not a structured log after all.
    }
  }
  return tellPlain && line.trim() !== "" ? line : undefined;
}
