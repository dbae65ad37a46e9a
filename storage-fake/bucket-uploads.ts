import { randomBytes, randomUUID } from "node:crypto";
import { mkdir, readdir, readFile, rename, rm } from "node:fs/promises";
import path from "node:path";
import type { BucketObjects, Contents, ReportProblem, WriteConditions } from "./bucket-objects";
import { type Checksum, joinChecksums, joinETags, type PartChecksum, type PartDigest } from "./checksums";
import {
  FOLDER_MODE,
  hasCode,
  removeFile,
  syncFolder,
  type TemporaryFile,
  writeJsonFile,
} from "./durable-files";
import { StorageError } from "./errors";
import { compareKeys } from "./key-order";
import { KeyedMutex } from "./keyed-mutex";
import {
  type ObjectRecord,
  type PartRecord,
  partRecordSchema,
  type UploadRecord,
  uploadRecordSchema,
} from "./records";

/** The least a part may have, unless it is the last: 5 MiB (S3 user guide, "multipart upload limits"). */
export const MINIMUM_PART_BYTES = 5 * 1024 * 1024;

interface Upload {
  record: UploadRecord;
  folder: string;
  parts: Map<number, PartRecord>;
}

/** A part as the completing client names it. */
export interface NamedPart {
  number: number;
  /** Without quotes. */
  etag: string;
  checksum: PartChecksum | undefined;
}

export interface Completion {
  parts: readonly NamedPart[];
  conditions: WriteConditions;
  /** What the client says the whole is, to be checked. */
  expectedChecksum: PartChecksum | undefined;
  expectedSize: number | undefined;
  modifiedAt: number;
}

/** The uploads in parts that are under way in one bucket, each a folder with a document, the parts and theirs. */
export class BucketUploads {
  private readonly uploads = new Map<string, Upload>();
  private readonly writing = new KeyedMutex();

  constructor(
    private readonly folder: string,
    private readonly temporaryFolder: string,
    private readonly objects: BucketObjects,
    private readonly reportProblem: ReportProblem,
  ) {}

  /** Reads what is under way, after the objects are loaded. An upload that was completed or given up is removed. */
  async load(): Promise<void> {
    await mkdir(this.folder, { recursive: true, mode: FOLDER_MODE });
    for (const uploadId of await readdir(this.folder)) {
      const folder = path.join(this.folder, uploadId);
      try {
        const upload = await readUpload(folder);
        const completed = upload && this.objects.get(upload.record.key)?.uploadId === uploadId;
        if (upload && !completed) this.uploads.set(uploadId, upload);
        else await rm(folder, { recursive: true, force: true });
      } catch (error) {
        this.reportProblem(`upload ${uploadId} is damaged and left out`, error);
      }
    }
  }

  /**
   * The upload of that id at that key.
   * @throws StorageError NoSuchUpload
   */
  get(key: string, uploadId: string): UploadRecord {
    return this.require(key, uploadId).record;
  }

  private require(key: string, uploadId: string): Upload {
    const upload = this.uploads.get(uploadId);
    if (upload?.record.key !== key) {
      throw new StorageError("NoSuchUpload", "There is no such upload: it may be completed or given up.", {
        details: { UploadId: uploadId },
      });
    }
    return upload;
  }

  /** The parts that have arrived, by number. */
  parts(key: string, uploadId: string): PartRecord[] {
    return [...this.require(key, uploadId).parts.values()].sort((a, b) => a.number - b.number);
  }

  /** All uploads by key, those of one key in the order they began. */
  all(): UploadRecord[] {
    return [...this.uploads.values()]
      .map((upload) => upload.record)
      .sort((a, b) => compareKeys(a.key, b.key) || compareKeys(a.uploadId, b.uploadId));
  }

  async create(facts: Omit<UploadRecord, "version" | "uploadId">): Promise<UploadRecord> {
    // The time comes first so that ids sort as uploads began; the rest cannot be guessed.
    const time = facts.initiatedAt.toString(36).padStart(9, "0");
    const uploadId = `${time}-${randomBytes(18).toString("base64url")}`;
    const record: UploadRecord = { version: 1, uploadId, ...facts };
    const folder = path.join(this.folder, uploadId);
    await mkdir(folder, { mode: FOLDER_MODE });
    await writeJsonFile(this.temporaryFolder, path.join(folder, "upload.json"), record);
    await syncFolder(this.folder);
    this.uploads.set(uploadId, { record, folder, parts: new Map() });
    return record;
  }

  /** Takes a finished file over as a part; one sent before under the same number is replaced. */
  async putPart(
    key: string,
    uploadId: string,
    file: TemporaryFile,
    facts: Omit<PartRecord, "version" | "segment">,
  ): Promise<PartRecord> {
    try {
      return await this.writing.run(uploadId, async () => {
        const upload = this.require(key, uploadId);
        const name = `${facts.number}.${randomUUID()}.data`;
        const record: PartRecord = { version: 1, ...facts, segment: { file: name, size: file.size } };
        await rename(file.path, path.join(upload.folder, name));
        await writeJsonFile(this.temporaryFolder, path.join(upload.folder, `${facts.number}.json`), record);
        const previous = upload.parts.get(facts.number);
        upload.parts.set(facts.number, record);
        if (previous) await removeFile(path.join(upload.folder, previous.segment.file));
        return record;
      });
    } catch (error) {
      await removeFile(file.path);
      throw error;
    }
  }

  /** Gives the upload up and removes its parts. */
  async abort(key: string, uploadId: string): Promise<void> {
    await this.writing.run(uploadId, async () => this.remove(this.require(key, uploadId)));
  }

  /**
   * Joins the named parts into the object. Completing once more, after an answer that got lost, gives the same
   * object again, as S3 does.
   * @throws StorageError NoSuchUpload, MalformedXML, InvalidPartOrder, InvalidPart, EntityTooSmall, InvalidRequest,
   *   BadDigest, PreconditionFailed
   */
  async complete(key: string, uploadId: string, completion: Completion): Promise<ObjectRecord> {
    return await this.writing.run(uploadId, async () => {
      const done = this.objects.get(key);
      if (done?.uploadId === uploadId && done.etag === joinETags(completion.parts.map((part) => part.etag))) {
        return done;
      }
      const upload = this.require(key, uploadId);
      const parts = chooseParts(upload, completion.parts);
      const size = parts.reduce((sum, part) => sum + part.segment.size, 0);
      if (completion.expectedSize !== undefined && completion.expectedSize !== size) {
        throw new StorageError(
          "InvalidRequest",
          `The parts have ${size} bytes, not ${completion.expectedSize}.`,
        );
      }
      const record = await this.objects.commit(
        key,
        parts.map(
          (part): Contents => ({
            path: path.join(upload.folder, part.segment.file),
            size: part.segment.size,
            mode: "share",
          }),
        ),
        {
          etag: joinETags(parts.map((part) => part.etag)),
          modifiedAt: completion.modifiedAt,
          attributes: upload.record.attributes,
          checksum: wholeChecksum(upload.record, parts, completion.expectedChecksum),
          uploadId,
        },
        completion.conditions,
      );
      await this.remove(upload);
      return record;
    });
  }

  private async remove(upload: Upload): Promise<void> {
    // Without its document the folder is no upload any more, so a crash from here on leaves only rubbish.
    await removeFile(path.join(upload.folder, "upload.json"));
    await syncFolder(upload.folder);
    this.uploads.delete(upload.record.uploadId);
    try {
      await rm(upload.folder, { recursive: true, force: true });
    } catch (error) {
      this.reportProblem("the folder of an upload could not be removed", error);
    }
  }
}

function chooseParts(upload: Upload, named: readonly NamedPart[]): PartRecord[] {
  if (named.length === 0) throw new StorageError("MalformedXML", "A completion names at least one part.");
  named.forEach((part, index) => {
    if (index > 0 && part.number <= (named[index - 1]?.number ?? 0)) {
      throw new StorageError("InvalidPartOrder", "The parts are not named in ascending order.", {
        details: { UploadId: upload.record.uploadId },
      });
    }
  });
  const parts = named.map((part) => choosePart(upload, part));
  for (const part of parts.slice(0, -1)) {
    if (part.segment.size < MINIMUM_PART_BYTES) {
      throw new StorageError(
        "EntityTooSmall",
        "A part that is not the last one is smaller than the least allowed.",
        {
          details: {
            ProposedSize: String(part.segment.size),
            MinSizeAllowed: String(MINIMUM_PART_BYTES),
            PartNumber: String(part.number),
            ETag: part.etag,
          },
        },
      );
    }
  }
  return parts;
}

function choosePart(upload: Upload, named: NamedPart): PartRecord {
  const { checksum, uploadId } = upload.record;
  const part = upload.parts.get(named.number);
  const sameChecksum =
    named.checksum === undefined ||
    (named.checksum.algorithm === part?.checksum?.algorithm && named.checksum.value === part.checksum.value);
  if (!part || part.etag !== named.etag || !sameChecksum) {
    throw new StorageError(
      "InvalidPart",
      "A named part has not arrived, or has another entity tag or checksum.",
      {
        details: { UploadId: uploadId, PartNumber: String(named.number), ETag: named.etag },
      },
    );
  }
  if (checksum?.type === "COMPOSITE" && named.checksum === undefined) {
    throw new StorageError(
      "InvalidRequest",
      `The upload was begun with ${checksum.algorithm} checksums, so its completion must name that of each part; part ${named.number} has none.`,
    );
  }
  return part;
}

/** @throws StorageError InvalidRequest, BadDigest when the client expects another checksum of the whole */
function wholeChecksum(
  upload: UploadRecord,
  parts: readonly PartRecord[],
  expected: PartChecksum | undefined,
): Checksum | undefined {
  if (expected && expected.algorithm !== upload.checksum?.algorithm) {
    throw new StorageError("InvalidRequest", `The upload was not begun for ${expected.algorithm} checksums.`);
  }
  if (!upload.checksum) return undefined;
  const { algorithm, type } = upload.checksum;
  const digests = parts.map(
    (part): PartDigest => ({ size: part.segment.size, value: part.checksum?.value ?? "" }),
  );
  const checksum = joinChecksums(algorithm, type, digests);
  const withoutCount = checksum.value.replace(/-\d+$/, "");
  if (expected && expected.value !== checksum.value && expected.value !== withoutCount) {
    throw new StorageError("BadDigest", `The ${algorithm} checksum is not that of the joined parts.`);
  }
  return checksum;
}

/** Reads an upload's folder; undefined when it holds no upload. */
async function readUpload(folder: string): Promise<Upload | undefined> {
  const documentPath = path.join(folder, "upload.json");
  let text: string;
  try {
    text = await readFile(documentPath, "utf8");
  } catch (error) {
    if (hasCode(error, "ENOENT")) return undefined;
    throw error;
  }
  const record = uploadRecordSchema.parse(JSON.parse(text));
  const names = new Set(await readdir(folder));
  const parts = new Map<number, PartRecord>();
  const kept = new Set<string>();
  for (const name of names) {
    if (!/^\d+\.json$/.test(name)) continue;
    const part = partRecordSchema.parse(JSON.parse(await readFile(path.join(folder, name), "utf8")));
    if (!names.has(part.segment.file)) throw new Error(`the data file of part ${part.number} is missing`);
    parts.set(part.number, part);
    kept.add(part.segment.file);
  }
  for (const name of names) {
    if (name.endsWith(".data") && !kept.has(name)) await removeFile(path.join(folder, name));
  }
  return { record, folder, parts };
}
