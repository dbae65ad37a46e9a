import path from "node:path";
import { z } from "zod";
import type { StorageServerOptions } from "./server";

/** Said to whoever starts the server with settings that cannot be. */
export class StorageSettingsError extends Error {}

const originSchema = z.string().refine(
  (origin) => {
    const url = URL.canParse(origin) ? new URL(origin) : undefined;
    return url?.origin === origin;
  },
  { error: "must be origins such as http://127.0.0.1:3000, without a path" },
);

const environmentSchema = z.object({
  STORAGE_PORT: z.coerce.number().int().min(0).max(65535).default(3001),
  HOST: z.string().min(1).default("127.0.0.1"),
  DATA_DIR: z.string().min(1).default(".data"),
  S3_ACCESS_KEY_ID: z.string().min(1),
  S3_SECRET_ACCESS_KEY: z.string().min(1),
  S3_REGION: z.string().min(1),
  S3_BUCKET_PRIVATE: z.string().min(1),
  S3_BUCKET_PUBLIC: z.string().min(1),
  STORAGE_CORS_ORIGINS: z
    .string()
    .default("")
    .transform((list) =>
      list
        .split(",")
        .map((origin) => origin.trim())
        .filter((origin) => origin !== ""),
    )
    .pipe(z.array(originSchema)),
});

/**
 * Reads the server's settings from an environment.
 * @throws StorageSettingsError naming what is missing or wrong; also in production, where no stand-in may run
 */
export function readStorageSettings(
  environment: Readonly<Record<string, string | undefined>>,
): StorageServerOptions {
  if (environment.NUMBERLEAF_MODE === "production") {
    throw new StorageSettingsError(
      "NUMBERLEAF_MODE is production: the stand-in for object storage does not run there. Set S3_ENDPOINT to the real one.",
    );
  }
  // A variable that is set to nothing counts as not set.
  const given = Object.entries(environment).filter(([, value]) => value !== "");
  const parsed = environmentSchema.safeParse(Object.fromEntries(given));
  if (!parsed.success) {
    const problems = parsed.error.issues.map((issue) => `${issue.path.join(".")}: ${issue.message}`);
    throw new StorageSettingsError(`The storage server's settings are wrong.\n${problems.join("\n")}`);
  }
  const settings = parsed.data;
  if (settings.S3_BUCKET_PRIVATE === settings.S3_BUCKET_PUBLIC) {
    throw new StorageSettingsError("S3_BUCKET_PRIVATE and S3_BUCKET_PUBLIC must be two buckets.");
  }
  return {
    host: settings.HOST,
    port: settings.STORAGE_PORT,
    folder: path.resolve(settings.DATA_DIR, "storage"),
    accessKeyId: settings.S3_ACCESS_KEY_ID,
    secretAccessKey: settings.S3_SECRET_ACCESS_KEY,
    region: settings.S3_REGION,
    privateBucket: settings.S3_BUCKET_PRIVATE,
    publicBucket: settings.S3_BUCKET_PUBLIC,
    corsOrigins: settings.STORAGE_CORS_ORIGINS,
  };
}
