import { describe, expect, test } from "vitest";
import { parseRange } from "./byte-ranges";

// RFC 9110 (2022), section 14.1.2 "Byte Ranges": the examples are of a representation of 10000 bytes.
describe("the RFC's examples", () => {
  test.each([
    ["bytes=0-499", 0, 500],
    ["bytes=500-999", 500, 1000],
    ["bytes=-500", 9500, 10_000],
    ["bytes=9500-", 9500, 10_000],
  ])("%s", (header, start, end) => {
    expect(parseRange(header, 10_000)).toEqual({ kind: "part", start, end });
  });
});

// The same section: a last position past the end is the end; a suffix longer than the body is all of it.
test("positions past the end", () => {
  expect(parseRange("bytes=9999-20000", 10_000)).toEqual({ kind: "part", start: 9999, end: 10_000 });
  expect(parseRange("bytes=-20000", 10_000)).toEqual({ kind: "part", start: 0, end: 10_000 });
});

// Section 14.1.2: a first position at or past the end, or a suffix of nothing, cannot be satisfied.
test.each([
  ["bytes=10000-", 10_000],
  ["bytes=-0", 10_000],
  ["bytes=0-", 0],
  ["bytes=-5", 0],
])("%s of %d bytes cannot be satisfied", (header, size) => {
  expect(parseRange(header, size)).toEqual({ kind: "unsatisfiable" });
});

// Section 14.2: a Range header that is invalid or of another unit is ignored, and several ranges may be.
test.each([undefined, "bytes=", "bytes=-", "bytes=5-4", "bytes=a-b", "lines=1-2", "bytes=0-1,4-5"])(
  "%s gives the whole body",
  (header) => {
    expect(parseRange(header, 10_000)).toEqual({ kind: "whole" });
  },
);
