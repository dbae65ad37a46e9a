import { pino } from "pino";
import { hasCode } from "./durable-files";
import { createStorageServer } from "./server";
import { readStorageSettings, StorageSettingsError } from "./settings";

/*
 * The stand-in for object storage as a process of its own: `node --import tsx storage-fake/main.ts`.
 *
 * Environment
 *   STORAGE_PORT (3001), HOST (127.0.0.1), DATA_DIR (.data; files lie in its folder `storage`)
 *   S3_ACCESS_KEY_ID, S3_SECRET_ACCESS_KEY, S3_REGION, S3_BUCKET_PRIVATE, S3_BUCKET_PUBLIC (made when missing)
 *   STORAGE_CORS_ORIGINS  origins whose pages may use it, separated by commas; none by default
 *   NUMBERLEAF_MODE       with `production` it refuses to start
 *
 * Speaks S3, path-style only: objects (put, get, head, delete, copy, batch deletion), uploads in parts,
 * ListObjectsV2. What it does not do (versions, tags, access lists, encryption, uploads by a form) it refuses by name.
 * GET /-/health, unsigned: {status}, 503 while starting.
 */

const logger = pino({ name: "storage" });

async function main(): Promise<void> {
  const settings = readStorageSettings(process.env);
  const storage = createStorageServer({
    ...settings,
    reportFault: ({ message, cause, requestId }) => logger.error({ err: cause, requestId }, message),
  });
  let closing = false;
  const stop = () => {
    if (closing) return;
    closing = true;
    void storage.close().then(() => process.exit(0));
  };
  process.on("SIGTERM", stop);
  process.on("SIGINT", stop);

  try {
    const { url } = await storage.listen();
    logger.info({ url }, "storage ready");
  } catch (error) {
    if (!hasCode(error, "EADDRINUSE")) throw error;
    throw new StorageSettingsError(`Port ${settings.port} is taken. Set STORAGE_PORT to a free one.`);
  }
}

main().catch((error: unknown) => {
  if (error instanceof StorageSettingsError) process.stderr.write(`${error.message}\n`);
  else logger.fatal({ err: error }, "storage could not start");
  process.exitCode = 1;
});
