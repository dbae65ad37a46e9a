import { createHmac } from "node:crypto";
import path from "node:path";
import { fileURLToPath } from "node:url";
import pg from "pg";
import { readState } from "../../scripts/lib/instance.mjs";
import { readSecrets, settings } from "../../scripts/lib/settings.mjs";

/*
 * The running shop that the browser's tests use, found through its data folder: E2E_DATA_DIR, or `.data` for the one that
 * `npm start` makes.
 */

const PROJECT = path.dirname(path.dirname(path.dirname(fileURLToPath(import.meta.url))));

export const dataDirectory = path.resolve(PROJECT, process.env.E2E_DATA_DIR || ".data");

function read() {
  const secrets = readSecrets(dataDirectory);
  const { ports, host, baseUrl } = readState(dataDirectory);
  if (secrets === undefined || ports === undefined || baseUrl === undefined) {
    throw new Error(`${dataDirectory} holds no shop; start one, or name its folder in E2E_DATA_DIR`);
  }
  const given = Object.fromEntries(Object.entries(ports).map(([name, port]) => [name, String(port)]));
  const environment = { ...given, HOST: host, BASE_URL: baseUrl };
  return {
    secrets,
    ports,
    baseUrl,
    environment: settings({ environment, dataDirectory, mode: secrets.mode, secrets }),
  };
}

const instance = read();

/** The whole environment of the instance's processes, for a further web process beside its own. */
export const environment: Readonly<Record<string, string>> = instance.environment;

/** "http://127.0.0.1:3000", as buyers see it. */
export const shopUrl: string = instance.baseUrl;
export const storageUrl = `http://127.0.0.1:${instance.ports.STORAGE_PORT}`;
export const stripeUrl = `http://127.0.0.1:${instance.ports.STRIPE_PORT}`;
export const mailUrl = `http://127.0.0.1:${instance.ports.MAIL_PORT}`;

let pool: pg.Pool | undefined;

/** Reads rows of the instance's database, as its application does. Connections close with the test process. */
export async function rows<Row extends pg.QueryResultRow>(
  query: string,
  values: unknown[] = [],
): Promise<Row[]> {
  pool ??= new pg.Pool({ connectionString: environment.DATABASE_URL, max: 2, allowExitOnIdle: true });
  return (await pool.query<Row>(query, values)).rows;
}

/** The first row of a query that must have one. */
export async function row<Row extends pg.QueryResultRow>(
  query: string,
  values: unknown[] = [],
): Promise<Row> {
  const [first] = await rows<Row>(query, values);
  if (first === undefined) throw new Error(`no row: ${query}`);
  return first;
}

/** The secret part of a link that was made from a seed, as the e-mail carries it. */
export function linkToken(purpose: string, seed: string): string {
  return createHmac("sha256", instance.secrets.sessionSecret)
    .update(`${purpose}:${seed}`)
    .digest()
    .subarray(0, 24)
    .toString("base64url");
}
