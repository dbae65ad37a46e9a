import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll } from "vitest";
import { freePorts } from "../../scripts/lib/ports.mjs";
import { newSecrets, settings } from "../../scripts/lib/settings.mjs";
import { testDatabase } from "./database";

/*
 * Runs before every test file of the `integration` project and before its imports: the environment that
 * `npm start` would give to the web and worker processes, on this worker's own database, on six free ports that nothing
 * listens on until a test starts a service there, and with a data folder of the file's own.
 */
const database = await testDatabase();
const dataDirectory = mkdtempSync(join(tmpdir(), "numberleaf-test-"));
afterAll(() => rmSync(dataDirectory, { recursive: true, force: true }));
Object.assign(
  process.env,
  settings({
    environment: {
      ...(await freePorts()),
      DATABASE_URL: database.url,
      DATABASE_OWNER_URL: database.ownerUrl,
      LOG_LEVEL: "silent",
    },
    dataDirectory,
    mode: "test",
    secrets: newSecrets("test"),
  }),
  { NODE_ENV: "test" },
);
