import { tmpdir } from "node:os";
import path from "node:path";
import { setTimeout as delay } from "node:timers/promises";
import { fileURLToPath } from "node:url";
import { makeChildren } from "./lib/children.mjs";
import {
  dropDatabase,
  endLeftoverServer,
  openCluster,
  setUpDatabase,
  waitForCluster,
} from "./lib/cluster.mjs";
import { ensureDebianPackages } from "./lib/debian.mjs";
import { INSTANCE_LOCK, readState, rememberState } from "./lib/instance.mjs";
import { lockNote, tryLock } from "./lib/locks.mjs";
import { PlainError } from "./lib/plain-error.mjs";
import { assertPortsFree, derivePorts } from "./lib/ports.mjs";
import { endLeftovers } from "./lib/processes.mjs";
import { dataDirectoryOf, localServices, openSecrets, reachable, settings } from "./lib/settings.mjs";
import { ensureBuild, ensureNodePackages } from "./lib/source.mjs";

/*
 * `npm start`: installs what is missing, starts every part of one instance, and stops them in order. Plain JavaScript
 * on Node's own modules, as the npm packages may not be there yet.
 */

const PROJECT = path.dirname(path.dirname(fileURLToPath(import.meta.url)));
const OLDEST_NODE = [20, 19];

/** Proofs and the demo's scans are made in what the pages leave over. */
const BACKGROUND = 10;

const HELP = `npm start                 the shop with its demo data
npm start -- --empty      a studio of your own, without demo data
npm start -- --dev        as npm start, with the development server in place of a build

PORT (3000) and the five ports after it, HOST (127.0.0.1) and DATA_DIR (.data) come from the environment.`;

const say = (/** @type {string} */ line) => console.log(line);

/** @type {import("./lib/children.mjs").Children | undefined} */
let children;
let ended = false;

/**
 * Stops everything and ends this process; asked a second time, by force.
 *
 * @param {number} code
 */
async function end(code) {
  if (ended) {
    children?.kill();
    process.exit(code);
  }
  ended = true;
  await children?.stop();
  process.exit(code);
}

/** @param {unknown} error */
async function endWith(error) {
  if (ended) return;
  console.error(error instanceof PlainError ? `\n${error.message}` : error);
  await end(1);
}

for (const signal of /** @type {const} */ (["SIGINT", "SIGTERM", "SIGHUP"])) {
  process.on(signal, () => {
    if (!ended && signal !== "SIGHUP") say("\nstopping");
    end(0);
  });
}
// A terminal that is gone must not keep the children from being stopped.
process.stdout.on("error", () => {});
process.stderr.on("error", () => {});

try {
  await start(process.argv.slice(2));
} catch (error) {
  await endWith(error);
}

/** @param {string[]} args */
async function start(args) {
  if (args.includes("--help")) return say(HELP);
  const unknown = args.find((arg) => !["--empty", "--dev"].includes(arg));
  if (unknown !== undefined) throw new PlainError(`npm start does not know ${unknown}.\n\n${HELP}`);
  assertNode();

  const dataDirectory = dataDirectoryOf(process.env, PROJECT);
  const secrets = openSecrets(dataDirectory, wantedMode(args));
  const environment = settings({ environment: process.env, dataDirectory, mode: secrets.mode, secrets });
  const ports = derivePorts(environment);
  const local = localServices(process.env);
  const host = environment.HOST ?? "127.0.0.1";

  const lock = await tryLock(INSTANCE_LOCK, dataDirectory, environment.BASE_URL);
  if (lock === undefined) {
    const address = (await lockNote(INSTANCE_LOCK, dataDirectory)) ?? "another address";
    throw new PlainError(
      `It is already running on ${dataDirectory}, at ${address}. A second one beside it needs a PORT and a DATA_DIR of its own: PORT=4000 DATA_DIR=.data-second npm start`,
    );
  }

  children = makeChildren({
    directory: PROJECT,
    logDirectory: path.join(dataDirectory, "logs"),
    environment: { ...inherited(), ...environment, NODE_ENV: "production" },
    say,
    fail: (reason) => endWith(new PlainError(`${reason}\nEverything else is stopped too.`)),
  });
  const { run, start: startChild } = children;

  const clusterDirectory = path.join(dataDirectory, "pg");
  const left = await endLeftovers(dataDirectory);
  if (left > 0) say(`ended ${left} processes that an earlier start had left behind`);
  if (local.postgres) await endLeftoverServer(clusterDirectory);
  await assertPortsFree([
    { name: "PORT", port: ports.PORT, host },
    ...(local.storage
      ? [{ name: /** @type {const} */ ("STORAGE_PORT"), port: ports.STORAGE_PORT, host }]
      : []),
    ...(local.stripe ? [{ name: /** @type {const} */ ("STRIPE_PORT"), port: ports.STRIPE_PORT, host }] : []),
    ...(local.mail
      ? [
          { name: /** @type {const} */ ("MAIL_PORT"), port: ports.MAIL_PORT, host: "127.0.0.1" },
          { name: /** @type {const} */ ("SMTP_PORT"), port: ports.SMTP_PORT, host: "127.0.0.1" },
        ]
      : []),
    ...(local.postgres
      ? [{ name: /** @type {const} */ ("POSTGRES_PORT"), port: ports.POSTGRES_PORT, host: "127.0.0.1" }]
      : []),
  ]);
  rememberState(dataDirectory, { ports, host, baseUrl: environment.BASE_URL ?? "" });

  const dev = args.includes("--dev");
  const node = (/** @type {string[]} */ ...rest) => [process.execPath, ...rest];
  const script = (/** @type {string} */ file) => node("--import", "tsx", file);

  /** @returns {Promise<string | undefined>} where its files are, if there is one of our own. */
  async function startDatabase() {
    if (!local.postgres) return undefined;
    await ensureDebianPackages({ say });
    const cluster = openCluster({
      baseDirectory: clusterDirectory,
      port: ports.POSTGRES_PORT,
      superuserPassword: secrets.superuserPassword,
      durable: secrets.mode !== "test",
      // The book of a real studio must not lie where the system tidies up.
      elsewhere: secrets.mode === "studio" ? "/var/lib/postgresql" : tmpdir(),
    });
    const server = startChild({
      name: "postgres",
      command: cluster.command,
      phase: "database",
      worthTelling: (line) => / (FATAL|PANIC): /.test(line),
    });
    await waitForCluster(cluster, server.pid, () => server.running);
    const access = { port: ports.POSTGRES_PORT, ...secrets };
    if (readState(dataDirectory).demoData === "begun") {
      say("the demo data was not complete and is made again");
      dropDatabase(cluster, access);
    }
    setUpDatabase(cluster, access);
    return cluster.directory;
  }

  /** @returns {Promise<void>} */
  async function startServices() {
    /** @type {{ name: string, file: string, address: string, host: string }[]} */
    const services = [];
    const visited = (/** @type {number} */ port) => `http://${reachable(host)}:${port}`;
    if (local.storage) {
      services.push({
        name: "storage",
        file: "storage-fake/main.ts",
        address: visited(ports.STORAGE_PORT),
        host,
      });
    }
    if (local.stripe) {
      services.push({
        name: "stripe",
        file: "scripts/stripe-fake/main.ts",
        address: visited(ports.STRIPE_PORT),
        host,
      });
    }
    if (local.mail) {
      // Whoever can read the caught e-mail can take over any account, so it is never shown to other machines.
      services.push({
        name: "mail",
        file: "scripts/mail-fake/main.ts",
        address: `http://127.0.0.1:${ports.MAIL_PORT}`,
        host: "127.0.0.1",
      });
    }
    await Promise.all(
      services.map(async (service) => {
        const child = startChild({
          name: service.name,
          command: script(service.file),
          environment: { HOST: service.host },
          phase: "services",
        });
        await answers(`${service.address}/-/health`, service.name, () => child.running);
      }),
    );
  }

  async function fillDatabase() {
    await run("migrate", script("scripts/migrate.ts"));
    if (secrets.mode === "studio" || !local.postgres) return;
    const { demoData } = readState(dataDirectory);
    if (demoData === "rows" || demoData === "complete") return;
    rememberState(dataDirectory, { demoData: "begun" });
    say("making the demo data, once");
    await services;
    await run("seed", [...script("scripts/seed.ts"), "rows"], {
      onLine: (line) => say(`  ${line}`),
    });
    rememberState(dataDirectory, { demoData: "rows" });
  }

  /**
   * The demo's scans are drawn while the shop is open; one that was stopped in the middle goes on. A test that brings scans
   * of its own asks for a few by DEMO_SCANS, so that its own need not wait behind them.
   */
  async function drawDemoScans() {
    if (readState(dataDirectory).demoData !== "rows") return;
    const few = /^\d+$/.exec(process.env.DEMO_SCANS ?? "")?.[0];
    await run("demo-scans", [...script("scripts/seed.ts"), "scans", ...(few === undefined ? [] : [few])], {
      niceness: BACKGROUND,
    });
    if (few === undefined) rememberState(dataDirectory, { demoData: "complete" });
  }

  const packages = ensureNodePackages(PROJECT, { say, run });
  const database = startDatabase();
  const services = packages.then(startServices);
  const build = packages.then(() => (dev ? undefined : ensureBuild(PROJECT, { say, run })));
  const filled = Promise.all([packages, database]).then(fillDatabase);
  const [buildDirectory, databaseDirectory] = await Promise.all([build, database, filled, services]);

  startChild({
    name: "worker",
    command: script("scripts/worker.ts"),
    phase: "work",
    restart: true,
    niceness: BACKGROUND,
  });
  startChild(
    buildDirectory === undefined
      ? {
          name: "web",
          command: node(
            "node_modules/@react-router/dev/bin.js",
            "dev",
            "--host",
            host,
            "--port",
            String(ports.PORT),
            "--strictPort",
          ),
          environment: { NODE_ENV: "development" },
          phase: "work",
          restart: true,
        }
      : {
          name: "web",
          command: [...script("scripts/serve.ts"), buildDirectory],
          phase: "work",
          restart: true,
        },
  );
  const here = `http://${reachable(host)}:${ports.PORT}`;
  await answers(`${here}/readyz`, "web", () => !ended);
  await introduce({ here, environment, secrets, dataDirectory, databaseDirectory, local });
  drawDemoScans().catch((error) => {
    if (!ended) say(`the demo's scans were not all drawn: ${error instanceof Error ? error.message : error}`);
  });
}

function assertNode() {
  const [major = 0, minor = 0] = process.versions.node.split(".").map(Number);
  const [oldestMajor = 0, oldestMinor = 0] = OLDEST_NODE;
  if (major > oldestMajor || (major === oldestMajor && minor >= oldestMinor)) return;
  throw new PlainError(
    `Node.js ${OLDEST_NODE.join(".")} or newer is needed; this is ${process.versions.node}.`,
  );
}

/**
 * @param {string[]} args
 * @returns {import("./lib/settings.mjs").Mode | undefined} undefined: whatever the data folder already is.
 */
function wantedMode(args) {
  const mode = process.env.NUMBERLEAF_MODE;
  if (mode === "production") {
    throw new PlainError(
      "NUMBERLEAF_MODE is production: npm start runs local stand-ins for storage, payments and e-mail, which have no place there. Use npm run migrate, npm run serve and npm run worker.",
    );
  }
  if (args.includes("--empty")) return "studio";
  if (mode === undefined || mode === "") return undefined;
  if (mode === "demo" || mode === "studio" || mode === "test") return mode;
  throw new PlainError(`NUMBERLEAF_MODE is "${mode}"; it is demo, studio, test or production.`);
}

/** The environment without what npm adds for its own scripts. */
function inherited() {
  return Object.fromEntries(Object.entries(process.env).filter(([name]) => !/^npm_/i.test(name)));
}

/**
 * Waits until an address answers with a success.
 *
 * @param {string} address
 * @param {string} name
 * @param {() => boolean} stillRunning
 */
async function answers(address, name, stillRunning) {
  const until = Date.now() + 60_000;
  let last = "no answer";
  while (Date.now() < until) {
    if (!stillRunning()) throw new PlainError(`${name} did not start.`);
    try {
      const response = await fetch(address, { signal: AbortSignal.timeout(6_000) });
      last = `${response.status} ${(await response.text()).slice(0, 200)}`;
      if (response.ok) return;
    } catch (error) {
      last = error instanceof Error ? error.message : String(error);
    }
    await delay(100);
  }
  throw new PlainError(`${name} did not answer at ${address}: ${last}`);
}

/**
 * Says where everything is. The last line is for programs: the shop answers now.
 *
 * @param {{
 *   here: string,
 *   environment: Record<string, string>,
 *   secrets: import("./lib/settings.mjs").Secrets,
 *   dataDirectory: string,
 *   databaseDirectory: string | undefined,
 *   local: ReturnType<typeof localServices>,
 * }} instance
 */
async function introduce({ here, environment, secrets, dataDirectory, databaseDirectory, local }) {
  const base = environment.BASE_URL;
  say("");
  say(`Shop      ${base}`);
  say(`Studio    ${base}/studio`);
  if (local.mail)
    say(`E-mail    http://127.0.0.1:${environment.MAIL_PORT}   (whatever the shop sends arrives here)`);
  say(`Data      ${dataDirectory}`);
  if (databaseDirectory !== undefined && !databaseDirectory.startsWith(dataDirectory)) {
    say(`Database  ${databaseDirectory}   (PostgreSQL's user cannot enter the folder above)`);
  }
  say("");
  if (secrets.mode === "studio") {
    await introduceSetup({ here, base, setupCode: secrets.setupCode });
  } else {
    const { DEMO_LOGINS } = await import("../db/seed/demo-logins.mjs");
    const width = (/** @type {"role" | "email"} */ key) =>
      Math.max(...DEMO_LOGINS.map((login) => login[key].length));
    say("Demo accounts (role, e-mail, password):");
    for (const { role, email, password } of DEMO_LOGINS) {
      say(`  ${role.padEnd(width("role"))}  ${email.padEnd(width("email"))}  ${password}`);
    }
    say("");
  }
  say(`ready ${here}`);
}

/**
 * Shows the one-time code as long as the set-up page takes it.
 *
 * @param {{ here: string, base: string | undefined, setupCode: string | null }} instance
 */
async function introduceSetup({ here, base, setupCode }) {
  const page = await fetch(`${here}/setup`, { redirect: "manual" });
  if (!page.ok || setupCode === null) return;
  say(`Set up your studio at ${base}/setup with this code, which works once:`);
  say(`  ${setupCode}`);
  say("");
}
