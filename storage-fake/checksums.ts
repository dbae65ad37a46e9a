import { createHash, type Hash } from "node:crypto";
import { type Crc, type CrcName, combineCrc, createCrc } from "./crc";
import { StorageError } from "./errors";

export const CHECKSUM_ALGORITHMS = ["crc32", "crc32c", "crc64nvme", "sha1", "sha256"] as const;
export type ChecksumAlgorithm = (typeof CHECKSUM_ALGORITHMS)[number];
export type DigestName = "md5" | ChecksumAlgorithm;

/** FULL_OBJECT covers the bytes; COMPOSITE covers the checksums of the parts, as a multipart ETag does. */
export type ChecksumType = "FULL_OBJECT" | "COMPOSITE";

/** The checksum of one run of bytes. */
export interface PartChecksum {
  algorithm: ChecksumAlgorithm;
  /** Base64. */
  value: string;
}

export interface Checksum {
  algorithm: ChecksumAlgorithm;
  type: ChecksumType;
  /** Base64; a composite one is followed by `-` and the number of parts. */
  value: string;
}

const DIGEST_BYTES: Readonly<Record<DigestName, number>> = {
  md5: 16,
  crc32: 4,
  crc32c: 4,
  crc64nvme: 8,
  sha1: 20,
  sha256: 32,
};

/** The header that carries a checksum: `x-amz-checksum-crc32` and so on. */
export function checksumHeader(algorithm: ChecksumAlgorithm): string {
  return `x-amz-checksum-${algorithm}`;
}

/** The XML element that carries a checksum: `ChecksumCRC32` and so on. */
export function checksumElement(algorithm: ChecksumAlgorithm): string {
  return `Checksum${algorithm.toUpperCase()}`;
}

/** The algorithm a client names, in any case, or undefined when it is not one of ours. */
export function parseChecksumAlgorithm(name: string): ChecksumAlgorithm | undefined {
  const wanted = name.toLowerCase();
  return CHECKSUM_ALGORITHMS.find((algorithm) => algorithm === wanted);
}

function isCrc(algorithm: ChecksumAlgorithm): algorithm is CrcName {
  return algorithm === "crc32" || algorithm === "crc32c" || algorithm === "crc64nvme";
}

/** Whether `type` can be had of `algorithm` for an object in parts: a SHA cannot be joined, and CRC64NVME only joined. */
export function supportsChecksumType(algorithm: ChecksumAlgorithm, type: ChecksumType): boolean {
  return type === "FULL_OBJECT" ? isCrc(algorithm) : algorithm !== "crc64nvme";
}

/** The type an object in parts has when the client names none. */
export function defaultChecksumType(algorithm: ChecksumAlgorithm): ChecksumType {
  return algorithm === "crc64nvme" ? "FULL_OBJECT" : "COMPOSITE";
}

/** Whether a text is the base64 of a digest of this kind. */
export function isDigestValue(name: DigestName, value: string): boolean {
  const bytes = Buffer.from(value, "base64");
  return bytes.length === DIGEST_BYTES[name] && bytes.toString("base64") === value;
}

/** Digests of one stream of bytes, several at once. */
export class DigestSet {
  private readonly digests = new Map<DigestName, Hash | Crc>();

  constructor(names: Iterable<DigestName>) {
    for (const name of new Set(names)) {
      this.digests.set(name, name !== "md5" && isCrc(name) ? createCrc(name) : createHash(name));
    }
  }

  update(data: Buffer): void {
    for (const digest of this.digests.values()) digest.update(data);
  }

  /** Ends the set. */
  finish(): Digests {
    const results = new Map<DigestName, Buffer>();
    for (const [name, digest] of this.digests) results.set(name, digest.digest());
    return new Digests(results);
  }
}

/** Finished digests. Asking for one that was not taken is a bug, and throws. */
export class Digests {
  constructor(private readonly values: ReadonlyMap<DigestName, Buffer>) {}

  private get(name: DigestName): Buffer {
    const value = this.values.get(name);
    if (!value) throw new Error(`the ${name} digest was not taken`);
    return value;
  }

  hex(name: DigestName): string {
    return this.get(name).toString("hex");
  }

  base64(name: DigestName): string {
    return this.get(name).toString("base64");
  }
}

export interface PartDigest {
  /** Bytes in the part. */
  size: number;
  /** Base64. */
  value: string;
}

/**
 * The checksum of an object made of parts.
 * @throws StorageError InvalidRequest when the algorithm has no such type
 */
export function joinChecksums(
  algorithm: ChecksumAlgorithm,
  type: ChecksumType,
  parts: readonly PartDigest[],
): Checksum {
  if (type === "COMPOSITE") {
    const digests = new DigestSet([algorithm]);
    for (const part of parts) digests.update(Buffer.from(part.value, "base64"));
    return { algorithm, type, value: `${digests.finish().base64(algorithm)}-${parts.length}` };
  }
  if (!isCrc(algorithm)) {
    throw new StorageError(
      "InvalidRequest",
      `${algorithm.toUpperCase()} has no full-object checksum of parts.`,
    );
  }
  const joined = parts.reduce(
    (sum, part) => combineCrc(algorithm, sum, Buffer.from(part.value, "base64"), part.size),
    createCrc(algorithm).digest(),
  );
  return { algorithm, type, value: joined.toString("base64") };
}

/** The ETag of an object in parts: the MD5 of the parts' MD5s and their number (common practice of S3 clients). */
export function joinETags(partETags: readonly string[]): string {
  const md5 = createHash("md5");
  for (const etag of partETags) md5.update(Buffer.from(etag, "hex"));
  return `${md5.digest("hex")}-${partETags.length}`;
}
