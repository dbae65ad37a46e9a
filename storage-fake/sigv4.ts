import { createHash, createHmac, timingSafeEqual } from "node:crypto";
import type { HeaderFields } from "./header-fields";
import type { QueryParameters } from "./request-target";
import { encodeUri, encodeUriPath } from "./uri";

/*
 * Signature Version 4 for S3. Source of every formula here: Amazon S3 API reference, "Authenticating Requests
 * (AWS Signature Version 4)", its chapters on the Authorization header, on query parameters and on chunked upload.
 */

export const ALGORITHM = "AWS4-HMAC-SHA256";
export const SERVICE = "s3";
export const SCOPE_END = "aws4_request";
export const UNSIGNED_PAYLOAD = "UNSIGNED-PAYLOAD";
const SHA256_OF_NOTHING = sha256Hex("");

export interface CredentialScope {
  /** UTC day as `YYYYMMDD`. */
  date: string;
  region: string;
}

/** SHA-256 as lower-case hex; a string is hashed as Latin-1 bytes, since header values arrive that way. */
export function sha256Hex(data: string | Buffer): string {
  return createHash("sha256")
    .update(typeof data === "string" ? Buffer.from(data, "latin1") : data)
    .digest("hex");
}

function hmac(key: string | Buffer, text: string): Buffer {
  return createHmac("sha256", key).update(text, "utf8").digest();
}

/** The key a day's requests are signed with. */
export function deriveSigningKey(secretAccessKey: string, scope: CredentialScope): Buffer {
  const dateKey = hmac(`AWS4${secretAccessKey}`, scope.date);
  const regionKey = hmac(dateKey, scope.region);
  const serviceKey = hmac(regionKey, SERVICE);
  return hmac(serviceKey, SCOPE_END);
}

/** `date/region/s3/aws4_request`. */
export function formatScope(scope: CredentialScope): string {
  return `${scope.date}/${scope.region}/${SERVICE}/${SCOPE_END}`;
}

export interface CanonicalRequestInput {
  method: string;
  /** Decoded path. It is encoded again here, so that a client which escapes less than it should still agrees. */
  path: string;
  query: QueryParameters;
  headers: HeaderFields;
  /** Lower-case names, in the order the client listed them. */
  signedHeaders: readonly string[];
  payloadHash: string;
}

/** The text whose hash is signed. A signed header that was not sent counts as empty, and so breaks the signature. */
export function canonicalRequest(input: CanonicalRequestInput): string {
  const headerLines = input.signedHeaders.map((name) => {
    const values = input.headers.all(name).map((value) => value.trim().replace(/[ \t]+/g, " "));
    return `${name}:${values.join(",")}\n`;
  });
  return [
    input.method,
    encodeUriPath(input.path),
    canonicalQuery(input.query),
    headerLines.join(""),
    input.signedHeaders.join(";"),
    input.payloadHash,
  ].join("\n");
}

function canonicalQuery(query: QueryParameters): string {
  return query.entries
    .filter(([name]) => name !== "X-Amz-Signature")
    .map(([name, value]) => [encodeUri(name), encodeUri(value)] as const)
    .sort(([nameA, valueA], [nameB, valueB]) => compareAscii(nameA, nameB) || compareAscii(valueA, valueB))
    .map(([name, value]) => `${name}=${value}`)
    .join("&");
}

function compareAscii(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0;
}

/**
 * The text that is signed for a whole request.
 * @param amzDate time of the request as `YYYYMMDDTHHMMSSZ`
 */
export function requestStringToSign(amzDate: string, scope: CredentialScope, canonical: string): string {
  return [ALGORITHM, amzDate, formatScope(scope), sha256Hex(canonical)].join("\n");
}

/** The signature of a text, lower-case hex. */
export function sign(signingKey: Buffer, stringToSign: string): string {
  return hmac(signingKey, stringToSign).toString("hex");
}

/** Compares two signatures without telling by the time taken where they differ. */
export function signaturesEqual(expected: string, provided: string): boolean {
  const expectedBytes = Buffer.from(expected, "latin1");
  const providedBytes = Buffer.from(provided, "latin1");
  return expectedBytes.length === providedBytes.length && timingSafeEqual(expectedBytes, providedBytes);
}

/**
 * Checks the signatures of an aws-chunked body, each of which covers its chunk and the signature before it.
 * The first one follows on the signature of the request.
 */
export class ChunkSignatures {
  private previous: string;

  constructor(
    private readonly signingKey: Buffer,
    private readonly amzDate: string,
    private readonly scope: CredentialScope,
    requestSignature: string,
  ) {
    this.previous = requestSignature;
  }

  /** Whether `signature` is that of the next chunk, given the chunk's SHA-256 as hex. */
  acceptChunk(signature: string, chunkHash: string): boolean {
    return this.accept(`${ALGORITHM}-PAYLOAD`, [SHA256_OF_NOTHING, chunkHash], signature);
  }

  /** Whether `signature` is that of the trailers, given as `name:value` lines each ended by a line feed. */
  acceptTrailers(signature: string, canonicalTrailers: string): boolean {
    return this.accept(`${ALGORITHM}-TRAILER`, [sha256Hex(canonicalTrailers)], signature);
  }

  private accept(label: string, hashes: readonly string[], signature: string): boolean {
    const text = [label, this.amzDate, formatScope(this.scope), this.previous, ...hashes].join("\n");
    const expected = sign(this.signingKey, text);
    this.previous = expected;
    return signaturesEqual(expected, signature);
  }
}
