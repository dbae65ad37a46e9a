import { spawnSync } from "node:child_process";
import {
  accessSync,
  chmodSync,
  constants,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  renameSync,
  rmSync,
  statSync,
  writeFileSync,
} from "node:fs";
import path from "node:path";
import { PlainError } from "./plain-error.mjs";
import { postgresProcessesIn, signal, waitFor } from "./processes.mjs";
import { APP_ROLE, DATABASE, OWNER_ROLE } from "./settings.mjs";

/*
 * A private PostgreSQL cluster in a folder of its own: TCP on loopback only, passwords for every role. As root its
 * processes run as the user `postgres`, because PostgreSQL refuses to run as root.
 */

const VERSIONS_DIRECTORY = "/usr/lib/postgresql";

/**
 * The newest PostgreSQL that Debian has installed, or the one with the given major version.
 *
 * @param {string} [version]
 * @returns {{ version: string, bin: string } | undefined}
 */
export function findPostgres(version) {
  const found = existsSync(VERSIONS_DIRECTORY) ? readdirSync(VERSIONS_DIRECTORY) : [];
  const usable = found
    .filter((name) => existsSync(path.join(VERSIONS_DIRECTORY, name, "bin", "postgres")))
    .sort((a, b) => Number(b) - Number(a));
  const chosen = version === undefined ? usable[0] : usable.find((name) => name === version);
  if (chosen === undefined) return undefined;
  return { version: chosen, bin: path.join(VERSIONS_DIRECTORY, chosen, "bin") };
}

const isRoot = () => process.getuid?.() === 0;

/**
 * The command line by which a PostgreSQL program is run as the user it has to run as. It replaces itself
 * by the program, so the pid is the program's own.
 *
 * @param {string[]} command
 * @returns {string[]}
 */
function asPostgresUser(command) {
  if (!isRoot()) return command;
  return ["setpriv", "--reuid=postgres", "--regid=postgres", "--init-groups", ...command];
}

/**
 * @param {string[]} command
 * @param {{ input?: string, env?: Record<string, string>, cwd?: string }} [options]
 */
function run([program = "", ...args], options = {}) {
  return spawnSync(program, args, {
    cwd: options.cwd ?? "/",
    encoding: "utf8",
    input: options.input ?? "",
    env: { ...process.env, LC_ALL: "C.UTF-8", HOME: "/", ...options.env },
  });
}

/**
 * @typedef {{
 *   directory: string,
 *   version: string,
 *   bin: string,
 *   command: string[],
 * }} Cluster `command` starts the server in the foreground; it stops cleanly on SIGINT.
 */

/**
 * Makes the cluster where there is none, and says how to start it.
 *
 * @param {{
 *   baseDirectory: string,
 *   port: number,
 *   superuserPassword: string,
 *   durable: boolean,
 *   elsewhere: string,
 * }} options `baseDirectory` belongs to the cluster alone. `durable: false` is for tests: a crash may lose it.
 *   `elsewhere` is where the data goes if the user `postgres` cannot enter `baseDirectory`.
 * @returns {Cluster}
 */
export function openCluster({ baseDirectory, port, superuserPassword, durable, elsewhere }) {
  const home = ownDirectory(baseDirectory, elsewhere);
  const directory = path.join(home, "data");
  takeOver(home);
  const made = existsSync(path.join(directory, "PG_VERSION"));
  const version = made ? readFileSync(path.join(directory, "PG_VERSION"), "utf8").trim() : undefined;
  const postgres = findPostgres(version);
  if (postgres === undefined) {
    throw new PlainError(
      `The database in ${directory} was made by PostgreSQL ${version}, which is not installed any more: install the package postgresql-${version}.`,
    );
  }
  if (!made) makeCluster(home, directory, postgres.bin, superuserPassword, durable);
  const quick = ["fsync=off", "synchronous_commit=off", "full_page_writes=off"];
  const parameters = [
    "listen_addresses=127.0.0.1",
    "unix_socket_directories=",
    "timezone=UTC",
    "log_timezone=UTC",
    "password_encryption=scram-sha-256",
    // A violated constraint or a failing statement would otherwise bring names and addresses into the log.
    "log_error_verbosity=terse",
    "log_min_error_statement=panic",
    "log_checkpoints=off",
    ...(durable ? [] : quick),
  ];
  return {
    directory,
    ...postgres,
    command: asPostgresUser([
      path.join(postgres.bin, "postgres"),
      "-D",
      directory,
      "-p",
      String(port),
      ...parameters.flatMap((parameter) => ["-c", parameter]),
    ]),
  };
}

/** @param {string} baseDirectory */
const locationNote = (baseDirectory) => `${baseDirectory}.location`;

/**
 * The folder that PostgreSQL's user owns: the base directory, or one beside other temporary files where that user cannot
 * come in, as below /root. It is remembered, so that it is found again.
 *
 * @param {string} baseDirectory
 * @param {string} elsewhere
 * @returns {string}
 */
function ownDirectory(baseDirectory, elsewhere) {
  const note = locationNote(baseDirectory);
  if (existsSync(note)) {
    const recorded = readFileSync(note, "utf8").trim();
    if (!existsSync(recorded)) {
      throw new PlainError(
        `The database of this folder was in ${recorded}, which is gone. Put it back, or remove ${note} to begin with an empty database.`,
      );
    }
    return recorded;
  }
  mkdirSync(baseDirectory, { recursive: true, mode: 0o700 });
  if (!isRoot()) return baseDirectory;
  giveToPostgres(baseDirectory);
  if (mayEnter(baseDirectory)) return baseDirectory;
  const directory = mkdtempSync(path.join(elsewhere, "numberleaf-postgres-"));
  giveToPostgres(directory);
  if (!mayEnter(directory)) {
    throw new PlainError(`The user postgres can enter neither ${baseDirectory} nor ${elsewhere}.`);
  }
  rmSync(baseDirectory, { recursive: true });
  writeFileSync(note, `${directory}\n`);
  return directory;
}

/**
 * A data folder first used by an ordinary user, and now by root, has to change hands; the other way round it cannot.
 *
 * @param {string} home
 */
function takeOver(home) {
  if (isRoot()) {
    const { stdout } = run(["id", "--user", "postgres"]);
    if (statSync(home).uid !== Number(stdout)) run(["chown", "--recursive", "postgres:postgres", home]);
    return;
  }
  try {
    accessSync(home, constants.R_OK | constants.W_OK | constants.X_OK);
  } catch {
    throw new PlainError(
      `${home} belongs to another user. Start as the user who made it, or choose another DATA_DIR.`,
    );
  }
}

/** @param {string} directory */
function giveToPostgres(directory) {
  const { status, stderr } = run(["chown", "postgres:postgres", directory]);
  if (status !== 0) throw new PlainError(`Cannot give ${directory} to the user postgres: ${stderr.trim()}`);
  chmodSync(directory, 0o700);
}

/** @param {string} directory */
function mayEnter(directory) {
  return run(asPostgresUser(["test", "-w", `${directory}/.`])).status === 0;
}

/**
 * Made under another name and renamed when complete, so that a start killed in between begins anew.
 *
 * @param {string} home
 * @param {string} directory
 * @param {string} bin
 * @param {string} superuserPassword
 * @param {boolean} durable
 */
function makeCluster(home, directory, bin, superuserPassword, durable) {
  const unfinished = path.join(home, "unfinished");
  const passwordFile = path.join(home, "password");
  rmSync(unfinished, { recursive: true, force: true });
  writeFileSync(passwordFile, `${superuserPassword}\n`, { mode: 0o600 });
  try {
    if (isRoot()) run(["chown", "postgres:postgres", passwordFile]);
    const { status, stdout, stderr } = run(
      asPostgresUser([
        path.join(bin, "initdb"),
        "--pgdata",
        unfinished,
        "--username=postgres",
        "--auth=scram-sha-256",
        `--pwfile=${passwordFile}`,
        "--encoding=UTF8",
        "--locale=C.UTF-8",
        ...(durable ? [] : ["--no-sync"]),
      ]),
      { cwd: home },
    );
    if (status !== 0) {
      throw new PlainError(`PostgreSQL could not make a cluster in ${home}:\n${(stderr || stdout).trim()}`);
    }
  } finally {
    rmSync(passwordFile, { force: true });
  }
  renameSync(unfinished, directory);
}

/**
 * Stops a server of this cluster that a killed start left behind, and removes a lock file whose number belongs to
 * another program by now; PostgreSQL itself recognises only those that belong to nobody.
 *
 * @param {string} baseDirectory
 */
export async function endLeftoverServer(baseDirectory) {
  const note = locationNote(baseDirectory);
  const home = existsSync(note) ? readFileSync(note, "utf8").trim() : baseDirectory;
  const directory = path.join(home, "data");
  const running = () => postgresProcessesIn(directory);
  const server = serverPid(directory);
  if (server !== undefined && running().includes(server)) {
    signal(server, "SIGINT");
    if (!(await waitFor(() => running().length === 0, 8_000))) signal(server, "SIGQUIT");
  }
  // Without their server the remaining processes end by themselves.
  if (!(await waitFor(() => running().length === 0, 5_000))) {
    for (const pid of running()) signal(pid, "SIGKILL");
    await waitFor(() => running().length === 0, 2_000);
  }
  if (serverPid(directory) !== undefined) rmSync(path.join(directory, "postmaster.pid"), { force: true });
}

/**
 * Removes a cluster that is not running, wherever it lies.
 *
 * @param {string} baseDirectory
 */
export function removeCluster(baseDirectory) {
  const note = locationNote(baseDirectory);
  if (existsSync(note)) rmSync(readFileSync(note, "utf8").trim(), { recursive: true, force: true });
  rmSync(note, { force: true });
  rmSync(baseDirectory, { recursive: true, force: true });
}

/**
 * @param {string} directory
 * @returns {number | undefined}
 */
function serverPid(directory) {
  return lockFile(directory)?.pid;
}

/**
 * What the server says of itself in its lock file.
 *
 * @param {string} directory
 * @returns {{ pid: number, status: string } | undefined}
 */
function lockFile(directory) {
  try {
    const lines = readFileSync(path.join(directory, "postmaster.pid"), "utf8").split("\n");
    return { pid: Number(lines[0]), status: (lines[7] ?? "").trim() };
  } catch {
    return undefined;
  }
}

/**
 * Waits until the server with this pid takes connections.
 *
 * @param {Cluster} cluster
 * @param {number} pid
 * @param {() => boolean} stillRunning
 */
export async function waitForCluster(cluster, pid, stillRunning) {
  const isReady = () => {
    const file = lockFile(cluster.directory);
    return file?.pid === pid && file.status === "ready";
  };
  await waitFor(() => isReady() || !stillRunning(), 60_000);
  if (!isReady()) throw new PlainError("PostgreSQL did not start.");
}

/**
 * Runs statements as the superuser.
 *
 * @param {Cluster} cluster
 * @param {{ port: number, superuserPassword: string, statements: string, database?: string }} options
 */
function asSuperuser(cluster, { port, superuserPassword, statements, database = "postgres" }) {
  const { status, stderr } = run(
    [
      path.join(cluster.bin, "psql"),
      "--no-psqlrc",
      "--quiet",
      "--set=ON_ERROR_STOP=1",
      `--dbname=postgres://postgres@127.0.0.1:${port}/${database}`,
    ],
    { input: statements, env: { PGPASSWORD: superuserPassword, PGOPTIONS: "--client-min-messages=warning" } },
  );
  if (status !== 0) {
    throw new PlainError(`The database could not be set up:\n${stderr.trim()}`);
  }
}

/**
 * Makes the two roles and the database, or sets the roles' passwords again. The application's role owns nothing
 * and may not make anything.
 *
 * @param {Cluster} cluster
 * @param {{ port: number, superuserPassword: string, ownerPassword: string, appPassword: string }} options
 */
export function setUpDatabase(cluster, { port, superuserPassword, ownerPassword, appPassword }) {
  const role = (/** @type {string} */ name, /** @type {string} */ password) => `
    select 'create role ${name}' where not exists (select from pg_roles where rolname = '${name}') \\gexec
    alter role ${name} login nosuperuser nocreatedb nocreaterole password '${password}';`;
  asSuperuser(cluster, {
    port,
    superuserPassword,
    statements: `
      ${role(OWNER_ROLE, ownerPassword)}
      ${role(APP_ROLE, appPassword)}
      select 'create database ${DATABASE} owner ${OWNER_ROLE}'
        where not exists (select from pg_database where datname = '${DATABASE}') \\gexec
      revoke all on database ${DATABASE} from public;
      grant connect, temporary on database ${DATABASE} to ${APP_ROLE};
    `,
  });
}

/**
 * Removes the database with everything in it. Only for one whose first filling was interrupted.
 *
 * @param {Cluster} cluster
 * @param {{ port: number, superuserPassword: string }} options
 */
export function dropDatabase(cluster, { port, superuserPassword }) {
  asSuperuser(cluster, {
    port,
    superuserPassword,
    statements: `drop database if exists ${DATABASE} with (force);`,
  });
}
