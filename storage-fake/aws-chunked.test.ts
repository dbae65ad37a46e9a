import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { decodeAwsChunked } from "./aws-chunked";

async function* inPieces(data: Buffer, size: number): AsyncGenerator<Buffer> {
  for (let offset = 0; offset < data.length; offset += size) yield data.subarray(offset, offset + size);
}

async function decode(coded: string | Buffer, pieceSize = 7, trailer = true) {
  const trailers = new Map<string, string>();
  const pieces: Buffer[] = [];
  const source = inPieces(Buffer.from(coded), pieceSize);
  for await (const piece of decodeAwsChunked(source, { signatures: undefined, trailer, trailers })) {
    pieces.push(piece);
  }
  return { content: Buffer.concat(pieces), trailers };
}

function chunk(data: Buffer): Buffer {
  return Buffer.concat([Buffer.from(`${data.length.toString(16)}\r\n`), data, Buffer.from("\r\n")]);
}

test("content and trailing fields come through however the bytes are cut", async () => {
  await fc.assert(
    fc.asyncProperty(
      fc.array(fc.integer({ min: 8192, max: 9000 }), { maxLength: 3 }),
      fc.integer({ min: 0, max: 200 }),
      fc.integer({ min: 1, max: 5000 }),
      async (sizes, lastSize, pieceSize) => {
        const chunks = [...sizes, ...(lastSize ? [lastSize] : [])].map((size) =>
          Buffer.alloc(size, "frame "),
        );
        const end = Buffer.from("0\r\nX-Amz-Checksum-Crc32: AAAAAA== \r\n\r\n");
        const { content, trailers } = await decode(Buffer.concat([...chunks.map(chunk), end]), pieceSize);
        expect(content.equals(Buffer.concat(chunks))).toBe(true);
        expect([...trailers]).toEqual([["x-amz-checksum-crc32", "AAAAAA=="]]);
      },
    ),
    { numRuns: 40 },
  );
});

describe("broken bodies are refused", () => {
  test.each([
    ["nothing at all", ""],
    ["the end is missing", "3\r\nabc\r\n"],
    ["a chunk is cut short", "5\r\nabc"],
    ["a chunk is longer than it says", "3\r\nabcd\r\n0\r\n\r\n"],
    ["a size that is no number", "x\r\nabc\r\n0\r\n\r\n"],
    ["a line without its carriage return", "3\nabc\r\n0\r\n\r\n"],
    ["bytes after the end", "3\r\nabc\r\n0\r\n\r\nmore"],
    ["an endless line", "1".repeat(10_000)],
  ])("%s", async (_name, coded) => {
    await expect(decode(coded)).rejects.toMatchObject({ code: "IncompleteBody" });
  });

  test("trailing fields where none were announced", async () => {
    await expect(decode("3\r\nabc\r\n0\r\na:b\r\n\r\n", 7, false)).rejects.toMatchObject({
      code: "MalformedTrailerError",
    });
  });

  // S3 API reference, "Signature Calculations ... Multiple Chunks": at least 8 KB but for the last chunk.
  test("a small chunk that is not the last", async () => {
    await expect(decode("3\r\nabc\r\n3\r\ndef\r\n0\r\n\r\n")).rejects.toMatchObject({
      code: "InvalidChunkSizeError",
    });
  });
});
