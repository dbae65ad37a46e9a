import { createHash, randomUUID } from "node:crypto";
import { mkdir, open, readdir, readFile, rename } from "node:fs/promises";
import path from "node:path";
import type { Checksum } from "./checksums";
import { matchesETag } from "./conditions";
import { FOLDER_MODE, linkOrCopy, removeFile, syncFolder, writeJsonTemporary } from "./durable-files";
import { StorageError } from "./errors";
import { compareKeys, firstIndex, type ListKeysOptions, type ListPosition, listKeys } from "./key-order";
import { KeyedMutex } from "./keyed-mutex";
import { type ObjectAttributes, type ObjectRecord, objectRecordSchema, type Segment } from "./records";

/** Told of damage found and of clean-up that failed; the server goes on. */
export type ReportProblem = (message: string, cause: unknown) => void;

/** A finished data file that is to become (part of) an object. */
export interface Contents {
  path: string;
  /** Bytes. */
  size: number;
  /** `move` takes the file over, and removes it when the object is refused; `share` leaves it where it is. */
  mode: "move" | "share";
}

export interface ObjectFacts {
  /** Without quotes. */
  etag: string;
  /** Milliseconds since the epoch. */
  modifiedAt: number;
  attributes: ObjectAttributes;
  checksum?: Checksum | undefined;
  uploadId?: string | undefined;
}

/** What must be true of the object now there for a write or a deletion to happen. */
export interface WriteConditions {
  /** `*`: there must be none. */
  ifNoneMatch?: string | undefined;
  /** There must be one with one of these entity tags. */
  ifMatch?: string | undefined;
}

export interface ObjectListing {
  records: ObjectRecord[];
  commonPrefixes: string[];
  next: ListPosition | undefined;
}

interface StoredObject {
  record: ObjectRecord;
  folder: string;
  readers: number;
  /** Replaced or deleted: its data files go when the last reader has left. */
  retired: boolean;
}

const READ_BYTES = 256 * 1024;

/** An object held open: its data stays readable until `close`, whatever happens to the key meanwhile. */
export class ObjectReader {
  private closed = false;

  constructor(
    private readonly stored: StoredObject,
    private readonly onClose: (stored: StoredObject) => void,
  ) {
    stored.readers += 1;
  }

  get record(): ObjectRecord {
    return this.stored.record;
  }

  /** Paths of the data files, in order. */
  get segmentPaths(): string[] {
    return this.record.segments.map((segment) => path.join(this.stored.folder, segment.file));
  }

  /** The bytes from `start` up to, not including, `end`. */
  async *read(start: number, end: number): AsyncGenerator<Buffer> {
    let segmentStart = 0;
    for (const segment of this.record.segments) {
      const from = Math.max(start - segmentStart, 0);
      const to = Math.min(end - segmentStart, segment.size);
      segmentStart += segment.size;
      if (from < to) yield* readFileRange(path.join(this.stored.folder, segment.file), from, to);
    }
  }

  close(): void {
    if (this.closed) return;
    this.closed = true;
    this.onClose(this.stored);
  }
}

async function* readFileRange(filePath: string, from: number, to: number): AsyncGenerator<Buffer> {
  const handle = await open(filePath, "r");
  try {
    let position = from;
    while (position < to) {
      const buffer = Buffer.allocUnsafe(Math.min(READ_BYTES, to - position));
      const { bytesRead } = await handle.read(buffer, 0, buffer.length, position);
      if (bytesRead === 0) throw new Error(`${filePath} is shorter than its record says`);
      position += bytesRead;
      yield buffer.subarray(0, bytesRead);
    }
  } finally {
    await handle.close();
  }
}

/**
 * The objects of one bucket.
 *
 * On the disk each is a document `<hash of key>.json` that names its data files. Data files are written once and
 * never changed; the renaming of the document is the one step in which an object comes to be or is replaced. Since
 * one process owns the folder, an index of all documents is kept in memory.
 */
export class BucketObjects {
  private readonly objects = new Map<string, StoredObject>();
  private sortedKeys: string[] = [];
  private readonly writing = new KeyedMutex();

  constructor(
    private readonly folder: string,
    private readonly temporaryFolder: string,
    private readonly reportProblem: ReportProblem,
  ) {}

  /** Reads all documents and removes data files that belong to none, which a crash can leave. */
  async load(): Promise<void> {
    await mkdir(this.folder, { recursive: true, mode: FOLDER_MODE });
    const shards = (await readdir(this.folder)).filter((name) => /^[0-9a-f]{2}$/.test(name));
    await Promise.all(shards.map((name) => this.loadShard(path.join(this.folder, name))));
    this.sortedKeys = [...this.objects.keys()].sort(compareKeys);
  }

  private async loadShard(folder: string): Promise<void> {
    const names = await readdir(folder);
    const present = new Set(names);
    const kept = new Set<string>();
    const damaged = new Set<string>();
    for (const name of names) {
      if (!/^[0-9a-f]{64}\.json$/.test(name)) continue;
      const hash = name.slice(0, 64);
      try {
        const record = objectRecordSchema.parse(JSON.parse(await readFile(path.join(folder, name), "utf8")));
        if (hashKey(record.key) !== hash) throw new Error("the document is of another key");
        for (const segment of record.segments) {
          if (!present.has(segment.file)) throw new Error(`the data file ${segment.file} is missing`);
          kept.add(segment.file);
        }
        this.objects.set(record.key, { record, folder, readers: 0, retired: false });
      } catch (error) {
        damaged.add(hash);
        this.reportProblem(`object document ${name} is damaged and left out`, error);
      }
    }
    for (const name of names) {
      const ours = /^[0-9a-f]{64}\..+\.data$/.test(name);
      if (ours && !kept.has(name) && !damaged.has(name.slice(0, 64)))
        await removeFile(path.join(folder, name));
    }
  }

  get(key: string): ObjectRecord | undefined {
    return this.objects.get(key)?.record;
  }

  /** Holds the object open for reading; close it in any case. */
  open(key: string): ObjectReader | undefined {
    const stored = this.objects.get(key);
    return stored && new ObjectReader(stored, (object) => this.release(object));
  }

  list(options: ListKeysOptions): ObjectListing {
    const { keys, commonPrefixes, next } = listKeys(this.sortedKeys, options);
    const records = keys.flatMap((key) => this.get(key) ?? []);
    return { records, commonPrefixes, next };
  }

  /**
   * Refuses early what `commit` would refuse, before a body has been sent for nothing.
   * @throws StorageError PreconditionFailed or NoSuchKey
   */
  checkConditions(key: string, conditions: WriteConditions): void {
    const current = this.get(key);
    if (conditions.ifNoneMatch !== undefined && current) {
      throw new StorageError("PreconditionFailed", "There is an object at this key already.", {
        details: { Condition: "If-None-Match" },
      });
    }
    if (conditions.ifMatch !== undefined) {
      if (!current)
        throw new StorageError("NoSuchKey", "There is no object at this key.", { details: { Key: key } });
      if (!matchesETag(conditions.ifMatch, current.etag)) {
        throw new StorageError("PreconditionFailed", "The object at this key is another one.", {
          details: { Condition: "If-Match" },
        });
      }
    }
  }

  /**
   * Makes finished data files the object at a key, in one step and durably. Of several writers the last one wins;
   * of several who demand that there be none, the first.
   * @throws StorageError PreconditionFailed or NoSuchKey, with nothing changed
   */
  async commit(
    key: string,
    contents: readonly Contents[],
    facts: ObjectFacts,
    conditions: WriteConditions = {},
  ): Promise<ObjectRecord> {
    try {
      return await this.writing.run(key, async () => {
        this.checkConditions(key, conditions);
        return await this.replace(key, contents, facts);
      });
    } catch (error) {
      for (const content of contents) if (content.mode === "move") await removeFile(content.path);
      throw error;
    }
  }

  /** The folder for keys of a hash: one of 256, so that none grows too large to read. Made when first needed. */
  private async shardOf(hash: string): Promise<string> {
    const folder = path.join(this.folder, hash.slice(0, 2));
    const created = await mkdir(folder, { recursive: true, mode: FOLDER_MODE });
    if (created !== undefined) await syncFolder(this.folder);
    return folder;
  }

  private async replace(
    key: string,
    contents: readonly Contents[],
    facts: ObjectFacts,
  ): Promise<ObjectRecord> {
    const hash = hashKey(key);
    const folder = await this.shardOf(hash);
    const id = randomUUID();
    const segments = contents.map(
      (content, index): Segment => ({ file: `${hash}.${id}-${index + 1}.data`, size: content.size }),
    );
    const record: ObjectRecord = {
      version: 1,
      key,
      etag: facts.etag,
      size: contents.reduce((sum, content) => sum + content.size, 0),
      modifiedAt: facts.modifiedAt,
      attributes: facts.attributes,
      checksum: facts.checksum,
      segments,
      uploadId: facts.uploadId,
    };

    const document = await writeJsonTemporary(this.temporaryFolder, record);
    try {
      for (const [index, content] of contents.entries()) {
        const target = path.join(folder, segments[index]?.file ?? "");
        if (content.mode === "move") await rename(content.path, target);
        else await linkOrCopy(content.path, target);
      }
      await rename(document, path.join(folder, `${hash}.json`));
    } catch (error) {
      await removeFile(document);
      for (const segment of segments) await removeFile(path.join(folder, segment.file));
      throw error;
    }
    await syncFolder(folder);

    const previous = this.objects.get(key);
    this.objects.set(key, { record, folder, readers: 0, retired: false });
    if (previous) await this.retire(previous);
    else this.sortedKeys.splice(this.indexOf(key), 0, key);
    return record;
  }

  /** Deletes the object; deleting what is not there is no fault. */
  async delete(key: string, conditions: WriteConditions = {}): Promise<void> {
    await this.writing.run(key, async () => {
      this.checkConditions(key, conditions);
      const stored = this.objects.get(key);
      if (!stored) return;
      await removeFile(path.join(stored.folder, `${hashKey(key)}.json`));
      await syncFolder(stored.folder);
      this.objects.delete(key);
      this.sortedKeys.splice(this.indexOf(key), 1);
      await this.retire(stored);
    });
  }

  private indexOf(key: string): number {
    return firstIndex(this.sortedKeys, (other) => compareKeys(other, key) >= 0);
  }

  private async retire(stored: StoredObject): Promise<void> {
    stored.retired = true;
    if (stored.readers > 0) return;
    try {
      for (const segment of stored.record.segments) await removeFile(path.join(stored.folder, segment.file));
    } catch (error) {
      // The object is gone from the index already; the next start removes what is left of it.
      this.reportProblem("a data file could not be removed", error);
    }
  }

  private release(stored: StoredObject): void {
    stored.readers -= 1;
    if (stored.retired && stored.readers === 0) void this.retire(stored);
  }
}

/** The name a key's files have: any key is safe in it, `..` and slashes too. */
function hashKey(key: string): string {
  return createHash("sha256").update(key, "utf8").digest("hex");
}
