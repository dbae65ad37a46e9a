import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { type CrcName, combineCrc, createCrc } from "./crc";

function crcOf(name: CrcName, ...pieces: Buffer[]): Buffer {
  const crc = createCrc(name);
  for (const piece of pieces) crc.update(piece);
  return crc.digest();
}

const ASCENDING = Buffer.from(Array.from({ length: 32 }, (_, index) => index));

describe("CRC-32", () => {
  // The check is that of ITU-T V.42, "32-bit frame check sequence". The value of "123456789" is common practice in
  // tables of parametrised CRCs, and written here from memory.
  test("the check value of the nine digits", () => {
    expect(crcOf("crc32", Buffer.from("123456789")).toString("hex")).toBe("cbf43926");
  });
});

describe("CRC-32C", () => {
  // RFC 3720 (2004), appendix B.4, "CRC Examples"; its bytes are printed in the order they are sent, lowest first.
  // Written from memory.
  test.each([
    ["32 bytes of zeroes", Buffer.alloc(32), "aa36918a"],
    ["32 bytes of ones", Buffer.alloc(32, 0xff), "43aba862"],
    ["32 bytes ascending", ASCENDING, "4e79dd46"],
    ["32 bytes descending", Buffer.from(ASCENDING).reverse(), "5cdb3f11"],
  ])("%s", (_name, data, sentBytes) => {
    expect(Buffer.from(crcOf("crc32c", data)).reverse().toString("hex")).toBe(sentBytes);
  });
});

describe("the 64-bit CRC of NVM Express", () => {
  // NVM Express, NVM Command Set Specification: the test vectors of its 64-bit CRC guard, written from memory.
  test.each([
    ["4 KiB of zeroes", Buffer.alloc(4096), "6482d367eb22b64e"],
    ["4 KiB of ones", Buffer.alloc(4096, 0xff), "c0ddba7302eca3ac"],
  ])("%s", (_name, data, expected) => {
    expect(crcOf("crc64nvme", data).toString("hex")).toBe(expected);
  });
});

describe("properties of every check", () => {
  const names = fc.constantFrom<CrcName>("crc32", "crc32c", "crc64nvme");
  const bytes = fc.uint8Array({ maxLength: 200 }).map((array) => Buffer.from(array));

  test("it does not matter where the data is cut", () => {
    fc.assert(
      fc.property(names, bytes, bytes, (name, first, second) => {
        expect(crcOf(name, first, second)).toEqual(crcOf(name, Buffer.concat([first, second])));
      }),
    );
  });

  test("joining two values gives the value of the joined data", () => {
    fc.assert(
      fc.property(names, bytes, bytes, (name, first, second) => {
        const joined = combineCrc(name, crcOf(name, first), crcOf(name, second), second.length);
        expect(joined).toEqual(crcOf(name, first, second));
      }),
    );
  });
});
