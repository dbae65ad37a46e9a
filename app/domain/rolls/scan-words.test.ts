import { describe, expect, it } from "vitest";
import { byteWords, frameStanding, pixelWords, type ScanStanding } from "./scan-words";

const ready: ScanStanding = { state: "ready", refusedReason: null, proofState: "ready", proofFailure: null };

describe("where a frame's scan stands", () => {
  it("is looked at again by the page exactly while the worker has something to do", () => {
    const pending = (scan: ScanStanding | null) => frameStanding(scan).pending;
    expect(pending(null)).toBe(false);
    expect(pending({ ...ready, state: "expected", proofState: "waiting" })).toBe(false);
    expect(pending({ ...ready, state: "checking", proofState: "waiting" })).toBe(true);
    expect(pending({ ...ready, proofState: "waiting" })).toBe(true);
    expect(pending({ ...ready, proofState: "working" })).toBe(true);
    expect(pending(ready)).toBe(false);
    expect(pending({ ...ready, proofState: "failed" })).toBe(false);
    expect(pending({ ...ready, state: "checking", proofState: "failed" })).toBe(false);
  });

  it("says why a file was refused, and cannot be tried again as it is", () => {
    const refused = frameStanding({
      ...ready,
      state: "refused",
      proofState: "waiting",
      refusedReason: "The file is empty.",
    });
    expect(refused).toMatchObject({
      words: "Refused",
      more: "The file is empty.",
      needsLook: true,
      canRetry: false,
    });
  });

  it.each(["checking", "ready"] as const)(
    "can be tried again when the queue has given up on a scan that is %s",
    (state) => {
      const failed = frameStanding({
        ...ready,
        state,
        proofState: "failed",
        proofFailure: "Storage did not answer.",
      });
      expect(failed).toMatchObject({ more: "Storage did not answer.", needsLook: true, canRetry: true });
    },
  );

  it("says that a try is to follow while there is one", () => {
    const waits = frameStanding({ ...ready, proofState: "waiting", proofFailure: "Storage did not answer." });
    expect(waits.more).toBe("Storage did not answer. It is tried again.");
    expect(waits.needsLook).toBe(false);
  });
});

it("sizes of files are in decimal units", () => {
  expect([1, 999_999, 1_000_000, 238_400_000, 1_450_000_000].map(byteWords)).toEqual([
    "1 kB",
    "1,000 kB",
    "1 MB",
    "238 MB",
    "1.5 GB",
  ]);
});

it("pixels are given with their depth", () => {
  expect(pixelWords({ width: 7_000, height: 5_600, bitDepth: 16, channels: 1 })).toBe(
    "7,000 × 5,600, 16-bit grey",
  );
  expect(pixelWords({ width: 90, height: 60, bitDepth: 8, channels: 3 })).toBe("90 × 60, 8-bit colour");
  expect(pixelWords({ width: null, height: null, bitDepth: null, channels: null })).toBe("");
});
