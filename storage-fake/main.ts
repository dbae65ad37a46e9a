import { pino } from "pino";
import { hasCode } from "./durable-files";
import { createStorageServer } from "./server";
import { readStorageSettings, StorageSettingsError } from "./settings";

/* The stand-in for object storage as a process of its own: `node --import tsx storage-fake/main.ts`. */

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
