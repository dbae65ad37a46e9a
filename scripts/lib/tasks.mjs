import path from "node:path";
import { INSTANCE_LOCK, readState } from "./instance.mjs";
import { lockNote } from "./locks.mjs";
import { PlainError } from "./plain-error.mjs";
import { dataDirectoryOf, readSecrets, settings } from "./settings.mjs";

/**
 * The environment for a single process beside `npm start`: that of real services where DATABASE_URL names one, and
 * otherwise that of the running instance in DATA_DIR. What is set explicitly wins, PORT too: a second web
 * process of the same shop is `PORT=3010 npm run serve`.
 *
 * @param {Record<string, string | undefined>} environment
 * @param {string} projectDirectory
 * @returns {Promise<Record<string, string | undefined>>} what is to be added to the environment.
 * @throws {PlainError} where there is no such instance, or it does not run.
 */
export async function taskEnvironment(environment, projectDirectory) {
  if (environment.DATABASE_URL) return {};
  const dataDirectory = dataDirectoryOf(environment, projectDirectory);
  const secrets = readSecrets(dataDirectory);
  const shown = path.relative(projectDirectory, dataDirectory) || dataDirectory;
  if (secrets === undefined || (await lockNote(INSTANCE_LOCK, dataDirectory)) === undefined) {
    throw new PlainError(
      `No instance is running on ${shown}: begin with npm start, set DATA_DIR to that of a running one, or set DATABASE_URL and the other services (README.md, "Configuration").`,
    );
  }
  const { ports = {}, host = "", baseUrl = "" } = readState(dataDirectory);
  const remembered = Object.fromEntries(Object.entries(ports).map(([name, port]) => [name, String(port)]));
  const given = Object.fromEntries(Object.entries(environment).filter(([, value]) => value !== ""));
  return settings({
    environment: { ...remembered, HOST: host, BASE_URL: baseUrl, ...given },
    dataDirectory,
    mode: secrets.mode,
    secrets,
  });
}
