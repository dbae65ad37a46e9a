import { mkdir, readdir, rm } from "node:fs/promises";
import path from "node:path";
import { BucketObjects, type ReportProblem } from "./bucket-objects";
import { BucketUploads } from "./bucket-uploads";
import type { DigestName, Digests } from "./checksums";
import { FOLDER_MODE, syncFolder, type TemporaryFile, writeTemporaryFile } from "./durable-files";
import { StorageError } from "./errors";

export interface StoreOptions {
  /** Where everything lies. One process at a time may have it open. */
  folder: string;
  /** Buckets that are made when they are not there yet. */
  buckets: readonly string[];
  reportProblem: ReportProblem;
}

export interface Bucket {
  name: string;
  objects: BucketObjects;
  uploads: BucketUploads;
}

/** All buckets in one folder: `tmp/` for what is being written, `buckets/<name>/{objects,uploads}/` for the rest. */
export class Store {
  private constructor(
    private readonly temporaryFolder: string,
    private readonly buckets: ReadonlyMap<string, Bucket>,
  ) {}

  /** Opens the folder, makes what is missing, and removes what writes cut short have left. */
  static async open(options: StoreOptions): Promise<Store> {
    const temporaryFolder = path.join(options.folder, "tmp");
    const bucketsFolder = path.join(options.folder, "buckets");
    await rm(temporaryFolder, { recursive: true, force: true });
    await mkdir(temporaryFolder, { recursive: true, mode: FOLDER_MODE });
    await mkdir(bucketsFolder, { recursive: true, mode: FOLDER_MODE });
    for (const name of options.buckets) {
      requireBucketName(name);
      await mkdir(path.join(bucketsFolder, name), { recursive: true, mode: FOLDER_MODE });
    }
    await syncFolder(bucketsFolder);

    const buckets = new Map<string, Bucket>();
    const entries = await readdir(bucketsFolder, { withFileTypes: true });
    const names = entries.filter((entry) => entry.isDirectory()).map((entry) => entry.name);
    for (const name of names.sort()) {
      const folder = path.join(bucketsFolder, name);
      const objects = new BucketObjects(path.join(folder, "objects"), temporaryFolder, options.reportProblem);
      const uploads = new BucketUploads(
        path.join(folder, "uploads"),
        temporaryFolder,
        objects,
        options.reportProblem,
      );
      await objects.load();
      await uploads.load();
      buckets.set(name, { name, objects, uploads });
    }
    return new Store(temporaryFolder, buckets);
  }

  bucketNames(): string[] {
    return [...this.buckets.keys()];
  }

  /** @throws StorageError NoSuchBucket */
  bucket(name: string): Bucket {
    const bucket = this.buckets.get(name);
    if (!bucket) {
      throw new StorageError("NoSuchBucket", "There is no such bucket.", { details: { BucketName: name } });
    }
    return bucket;
  }

  /**
   * Streams bytes to a finished file that belongs to nothing yet. Give it to a bucket, which takes it over.
   * @param check called with the digests before the file counts as finished; it throws to refuse the bytes
   */
  async receive(
    source: AsyncIterable<Buffer>,
    digestNames: Iterable<DigestName>,
    check?: (digests: Digests, size: number) => void,
  ): Promise<TemporaryFile> {
    return await writeTemporaryFile(this.temporaryFolder, source, digestNames, check);
  }
}

/**
 * Bucket names are folder names here, so only those S3 allows are let in.
 * Source: S3 user guide, "General purpose bucket naming rules" (letters, digits, dots, hyphens; 3 to 63).
 */
function requireBucketName(name: string): void {
  if (!/^[a-z0-9](?:[a-z0-9-]|\.(?!\.)){1,61}[a-z0-9]$/.test(name)) {
    throw new Error(`"${name}" is no valid bucket name`);
  }
}
