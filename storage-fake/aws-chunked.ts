import { createHash } from "node:crypto";
import { StorageError } from "./errors";
import type { ChunkSignatures } from "./sigv4";

/** Every chunk but the last has at least this many bytes (S3 API reference, "sigv4-streaming"). */
const MINIMUM_CHUNK_BYTES = 8192;
const MAXIMUM_LINE_BYTES = 4096;
const MAXIMUM_TRAILERS = 16;

export interface AwsChunkedOptions {
  /** Given when each chunk, and the trailers, must be signed. */
  signatures: ChunkSignatures | undefined;
  /** Whether fields follow the last chunk. */
  trailer: boolean;
  /** Filled with the trailing fields, names in lower case, once all content has been given out. */
  trailers: Map<string, string>;
}

/**
 * Takes the `aws-chunked` coding off a body and gives out the content piece by piece. A signed chunk is given out
 * before its signature can be checked, so the content counts only when the whole has come through without an error.
 * @throws StorageError IncompleteBody, InvalidChunkSizeError, SignatureDoesNotMatch, MalformedTrailerError
 */
export async function* decodeAwsChunked(
  source: AsyncIterable<Buffer>,
  options: AwsChunkedOptions,
): AsyncGenerator<Buffer> {
  const reader = new ByteReader(source);
  try {
    yield* decode(reader, options);
  } finally {
    await reader.close();
  }
}

async function* decode(reader: ByteReader, options: AwsChunkedOptions): AsyncGenerator<Buffer> {
  let smallChunk: { number: number; size: number } | undefined;
  for (let number = 1; ; number++) {
    const { size, signature } = parseChunkHeader(await reader.line());
    if (size > 0 && smallChunk) {
      throw new StorageError(
        "InvalidChunkSizeError",
        `Only the last chunk may be smaller than ${MINIMUM_CHUNK_BYTES} bytes.`,
        { details: { Chunk: String(number), BadChunkSize: String(smallChunk.size) } },
      );
    }
    if (size > 0 && size < MINIMUM_CHUNK_BYTES) smallChunk = { number, size };

    const hash = options.signatures && createHash("sha256");
    for (let remaining = size; remaining > 0; ) {
      const piece = await reader.some(remaining);
      hash?.update(piece);
      remaining -= piece.length;
      yield piece;
    }
    if (options.signatures && hash && !options.signatures.acceptChunk(signature, hash.digest("hex"))) {
      throw new StorageError(
        "SignatureDoesNotMatch",
        `The signature of chunk ${number} is not that of its bytes.`,
      );
    }
    if (size === 0) break;
    if ((await reader.line()) !== "") throw incomplete("a chunk is longer than it says");
  }
  await readTrailers(reader, options);
  if (!(await reader.atEnd())) throw incomplete("bytes follow the last chunk");
}

function parseChunkHeader(line: string): { size: number; signature: string } {
  const match = /^([0-9a-fA-F]{1,12})(?:;chunk-signature=([0-9a-f]{64}))?$/.exec(line);
  if (!match) throw incomplete("a chunk header cannot be read");
  return { size: Number.parseInt(match[1] ?? "", 16), signature: match[2] ?? "" };
}

async function readTrailers(reader: ByteReader, options: AwsChunkedOptions): Promise<void> {
  let canonical = "";
  let signature = "";
  for (let count = 0; ; count++) {
    if (count === 0 && (await reader.atEnd())) break;
    const line = await reader.line();
    if (line === "") break;
    const colon = line.indexOf(":");
    if (!options.trailer || colon < 1 || count > MAXIMUM_TRAILERS) throw malformedTrailer();
    const name = line.slice(0, colon).trim().toLowerCase();
    const value = line.slice(colon + 1).trim();
    if (name === "x-amz-trailer-signature") signature = value;
    else {
      options.trailers.set(name, value);
      canonical += `${name}:${value}\n`;
    }
  }
  if (options.trailer && options.signatures && !options.signatures.acceptTrailers(signature, canonical)) {
    throw new StorageError("SignatureDoesNotMatch", "The signature of the trailing fields is not theirs.");
  }
}

function incomplete(what: string): StorageError {
  return new StorageError("IncompleteBody", `The aws-chunked body is broken: ${what}.`);
}

function malformedTrailer(): StorageError {
  return new StorageError("MalformedTrailerError", "The fields after the last chunk cannot be read.");
}

/** Reads lines and runs of bytes from a stream of pieces, holding no more than the piece at hand. */
class ByteReader {
  private readonly iterator: AsyncIterator<Buffer>;
  private piece: Buffer = Buffer.alloc(0);

  constructor(source: AsyncIterable<Buffer>) {
    this.iterator = source[Symbol.asyncIterator]();
  }

  /** Lets the source go, however much of it is left. */
  async close(): Promise<void> {
    await this.iterator.return?.();
  }

  /** Whether everything has been read. */
  async atEnd(): Promise<boolean> {
    while (this.piece.length === 0) {
      const next = await this.iterator.next();
      if (next.done) return true;
      this.piece = next.value;
    }
    return false;
  }

  /** The next bytes, at least one and at most `limit`. */
  async some(limit: number): Promise<Buffer> {
    if (await this.atEnd()) throw incomplete("it ends in the middle of a chunk");
    const bytes = this.piece.subarray(0, limit);
    this.piece = this.piece.subarray(bytes.length);
    return bytes;
  }

  /** The text up to the next CR LF, which is read over. */
  async line(): Promise<string> {
    let line = "";
    for (;;) {
      if (await this.atEnd()) throw incomplete("it ends before its last chunk");
      const lineFeed = this.piece.indexOf(0x0a);
      const end = lineFeed === -1 ? this.piece.length : lineFeed + 1;
      line += this.piece.toString("latin1", 0, end);
      this.piece = this.piece.subarray(end);
      if (line.length > MAXIMUM_LINE_BYTES) throw incomplete("a line is too long");
      if (lineFeed !== -1) {
        if (!line.endsWith("\r\n")) throw incomplete("a line does not end with CR LF");
        return line.slice(0, -2);
      }
    }
  }
}
