import type { IncomingMessage } from "node:http";
import { amzField, type SignedRequest } from "./authentication";
import { decodeAwsChunked } from "./aws-chunked";
import {
  CHECKSUM_ALGORITHMS,
  type Checksum,
  type ChecksumAlgorithm,
  checksumHeader,
  type DigestName,
  type Digests,
  isDigestValue,
  parseChecksumAlgorithm,
} from "./checksums";
import { StorageError } from "./errors";
import type { HeaderFields } from "./header-fields";
import type { QueryParameters } from "./request-target";
import { ChunkSignatures } from "./sigv4";

/** The most bytes one PUT may carry: 5 GiB (S3 user guide, "Uploading objects"). */
const MAXIMUM_CONTENT_BYTES = 5 * 1024 ** 3;

/** A checksum the client announced. Its value comes before the content, or after it as a trailing field. */
interface ChecksumClaim {
  algorithm: ChecksumAlgorithm;
  value: string | undefined;
}

export interface IncomingRequest {
  request: IncomingMessage;
  headers: HeaderFields;
  query: QueryParameters;
  authentication: SignedRequest;
  /** Called once, just before the body is read: lets a client that waits for it go on. */
  beginBody: () => void;
}

/** The content of a request: what it must be, its bytes as they come, and the check at the end. */
export class IncomingContent {
  private readonly trailers = new Map<string, string>();

  private constructor(
    private readonly incoming: IncomingRequest,
    /** Bytes of the content, as the client declares it. */
    readonly length: number,
    private readonly md5: string | undefined,
    private readonly claim: ChecksumClaim | undefined,
  ) {}

  /**
   * Reads the headers that describe the content.
   * @param checksumsAreOfBody false for a request whose checksum headers are of something else
   * @throws StorageError MissingContentLength, EntityTooLarge, InvalidDigest, InvalidRequest, MalformedTrailerError
   */
  static describe(incoming: IncomingRequest, checksumsAreOfBody = true): IncomingContent {
    const { headers, authentication } = incoming;
    const chunked = authentication.payload.kind === "chunked";
    const lengthText = headers.get(chunked ? "x-amz-decoded-content-length" : "content-length");
    if (lengthText === undefined || !/^\d+$/.test(lengthText)) {
      throw new StorageError("MissingContentLength", "The length of the content must be given.");
    }
    const length = Number(lengthText);
    if (length > MAXIMUM_CONTENT_BYTES) {
      throw new StorageError("EntityTooLarge", "The content is larger than one request may carry.", {
        details: { ProposedSize: lengthText, MaxSizeAllowed: String(MAXIMUM_CONTENT_BYTES) },
      });
    }
    const md5 = headers.get("content-md5");
    if (md5 !== undefined && !isDigestValue("md5", md5)) {
      throw new StorageError("InvalidDigest", "Content-MD5 is not the base64 of an MD5.");
    }
    return new IncomingContent(
      incoming,
      length,
      md5,
      checksumsAreOfBody ? readChecksumClaim(incoming) : undefined,
    );
  }

  /** The algorithm of the checksum the client gives, if any. */
  get checksumAlgorithm(): ChecksumAlgorithm | undefined {
    return this.claim?.algorithm;
  }

  /** Whether the client gives any checksum of the content apart from its signature. */
  get hasIntegrityCheck(): boolean {
    return this.md5 !== undefined || this.claim !== undefined;
  }

  /** The digests that `verify` needs, MD5 always among them since it makes the ETag. */
  get digestNames(): DigestName[] {
    const names: DigestName[] = ["md5"];
    if (this.incoming.authentication.payload.kind === "sha256") names.push("sha256");
    if (this.claim) names.push(this.claim.algorithm);
    return names;
  }

  /** The bytes, in the pieces in which they come. Ending early leaves the connection usable for the answer. */
  async *pieces(): AsyncGenerator<Buffer> {
    this.incoming.beginBody();
    const { payload, signingKey, amzDate, scope, signature } = this.incoming.authentication;
    const body = this.body();
    const content =
      payload.kind === "chunked"
        ? decodeAwsChunked(body, {
            signatures: payload.signed
              ? new ChunkSignatures(signingKey, amzDate, scope, signature)
              : undefined,
            trailer: payload.trailer,
            trailers: this.trailers,
          })
        : body;
    let received = 0;
    for await (const piece of content) {
      received += piece.length;
      if (received > this.length) break;
      yield piece;
    }
    if (received !== this.length) {
      throw new StorageError("IncompleteBody", "The content does not have the length that was declared.", {
        details: { NumberBytesExpected: String(this.length), NumberBytesProvided: String(received) },
      });
    }
  }

  private async *body(): AsyncGenerator<Buffer> {
    // The default would destroy the connection, and with it the answer, whenever the loop is left early.
    for await (const piece of this.incoming.request.iterator({ destroyOnReturn: false })) yield piece;
    if (!this.incoming.request.complete) throw new Error("the connection ended in the middle of the body");
  }

  /**
   * Compares what arrived with what the client said about it, and gives the checksum to keep.
   * @throws StorageError BadDigest, XAmzContentSHA256Mismatch, MalformedTrailerError
   */
  verify(digests: Digests): Checksum | undefined {
    const { payload } = this.incoming.authentication;
    if (payload.kind === "sha256" && digests.hex("sha256") !== payload.hex) {
      throw new StorageError(
        "XAmzContentSHA256Mismatch",
        "The content's SHA-256 is not the one that was signed.",
        {
          details: {
            ClientComputedContentSHA256: payload.hex,
            S3ComputedContentSHA256: digests.hex("sha256"),
          },
        },
      );
    }
    if (this.md5 !== undefined && digests.base64("md5") !== this.md5) {
      throw new StorageError("BadDigest", "The content's MD5 is not the one in Content-MD5.", {
        details: { ExpectedDigest: this.md5, CalculatedDigest: digests.base64("md5") },
      });
    }
    if (!this.claim) return undefined;
    const { algorithm } = this.claim;
    const value = digests.base64(algorithm);
    const expected = this.claim.value ?? this.trailers.get(checksumHeader(algorithm));
    if (expected === undefined || !isDigestValue(algorithm, expected)) {
      throw new StorageError(
        "MalformedTrailerError",
        `The trailing ${checksumHeader(algorithm)} is missing or wrong.`,
      );
    }
    if (expected !== value) {
      throw new StorageError(
        "BadDigest",
        `The content's ${algorithm} checksum is not the one that was given.`,
      );
    }
    return { algorithm, type: "FULL_OBJECT", value };
  }
}

/** Fields that begin like a checksum's and carry none. */
const NO_CHECKSUM_VALUES = ["x-amz-checksum-algorithm", "x-amz-checksum-mode", "x-amz-checksum-type"];

/**
 * The values of all `x-amz-checksum-<algorithm>` fields.
 * @throws StorageError InvalidRequest when one is not well-formed or of an algorithm not known here
 */
export function checksumValues(
  headers: HeaderFields,
  query: QueryParameters,
  authentication: SignedRequest,
): { algorithm: ChecksumAlgorithm; value: string }[] {
  const names = [...headers.names(), ...query.entries.map(([name]) => name.toLowerCase())];
  const unknown = names.find(
    (name) =>
      name.startsWith("x-amz-checksum-") &&
      !NO_CHECKSUM_VALUES.includes(name) &&
      !CHECKSUM_ALGORITHMS.some((algorithm) => checksumHeader(algorithm) === name),
  );
  if (unknown !== undefined) {
    throw new StorageError("NotImplemented", `The checksum ${unknown} is not known here.`);
  }
  return CHECKSUM_ALGORITHMS.flatMap((algorithm) => {
    const value = amzField(checksumHeader(algorithm), headers, query, authentication);
    return value === undefined ? [] : [{ algorithm, value }];
  });
}

function readChecksumClaim(incoming: IncomingRequest): ChecksumClaim | undefined {
  const { headers, query, authentication } = incoming;
  const values = checksumValues(headers, query, authentication);
  for (const { algorithm, value } of values) {
    if (!isDigestValue(algorithm, value)) {
      throw new StorageError(
        "InvalidRequest",
        `${checksumHeader(algorithm)} is not the base64 of such a checksum.`,
      );
    }
  }
  const claims: ChecksumClaim[] = values;
  const trailer = headers.get("x-amz-trailer");
  if (trailer !== undefined) {
    const algorithm = CHECKSUM_ALGORITHMS.find(
      (name) => checksumHeader(name) === trailer.trim().toLowerCase(),
    );
    const announced = authentication.payload.kind === "chunked" && authentication.payload.trailer;
    if (!algorithm || !announced) {
      throw new StorageError(
        "InvalidRequest",
        "x-amz-trailer names no checksum field that can follow this body.",
      );
    }
    claims.push({ algorithm, value: undefined });
  }
  if (claims.length > 1) throw new StorageError("InvalidRequest", "Only one checksum can be given.");

  const named = amzField("x-amz-sdk-checksum-algorithm", headers, query, authentication);
  if (named !== undefined && parseChecksumAlgorithm(named) !== claims[0]?.algorithm) {
    throw new StorageError(
      "InvalidRequest",
      "x-amz-sdk-checksum-algorithm names a checksum that is not given.",
    );
  }
  return claims[0];
}
