import { describe, expect, it } from "vitest";
import { readBody } from "./ledger-body";
import { entryWords, happenedWords, spans } from "./ledger-words";

const ZONE = "Europe/London";
const plain = { sheet: null, mark: null, body: {}, corrects: null, secret: null };

describe("a line of the ledger in words", () => {
  it("reads the mark as it was when the line was written", () => {
    expect(readBody('{"number":7,"of":25,"run":"numbered","sheet":2}')).toMatchObject({
      mark: "7/25",
      sheet: 2,
    });
    expect(readBody('{"limit":25,"proofs":{"ap":2}}')).toEqual({
      mark: null,
      sheet: null,
      facts: { limit: 25 },
    });
  });

  it("names old and new prices", () => {
    const { rest } = entryWords(
      {
        ...plain,
        kind: "prices_changed",
        body: {
          format: 1,
          currency: "GBP",
          was: [{ fromNumber: 1, toNumber: 3, amount: 28_000 }],
          now: [
            { fromNumber: 1, toNumber: 2, amount: 28_000 },
            { fromNumber: 3, toNumber: 3, amount: 34_000 },
          ],
        },
      },
      ZONE,
    );
    expect(rest).toBe("of format 1: numbers 1 to 2 at £280.00, 3 at £340.00; they were 1 to 3 at £280.00");
  });

  it("tells who and why only where that may be seen", () => {
    const given = { ...plain, kind: "given" as const, mark: "8/25" };
    expect(entryWords(given, ZONE)).toEqual({ verb: "Given", rest: "" });
    const secret = { partyName: "Ember Infirmary", orderNumber: null, reason: "for the east corridor" };
    expect(entryWords({ ...given, secret }, ZONE).rest).toBe("to Ember Infirmary: for the east corridor");
  });

  it("puts numbers that follow each other together", () => {
    expect(spans([1, 3, 4, 5, 9])).toBe("1, 3 to 5, 9");
    expect(spans([])).toBe("");
    const closed = { ...plain, kind: "closed_early" as const, body: { retired: [1, 2, 3] } };
    expect(entryWords(closed, ZONE).rest).toBe(", numbers 1 to 3 retired");
    expect(entryWords({ ...closed, mark: "2/3", body: {} }, ZONE)).toEqual({
      verb: "Retired",
      rest: ", as the edition was closed early",
    });
  });

  it("names the line that a correction puts right", () => {
    const secret = { partyName: null, orderNumber: null, reason: "it was number 9" };
    expect(entryWords({ ...plain, kind: "corrected", corrects: 12, secret }, ZONE)).toEqual({
      verb: "Corrected",
      rest: ", line 12: it was number 9",
    });
  });

  it("says when it happened only where that differs from when it was written", () => {
    const recordedAt = new Date("2026-12-02T18:22:10Z");
    const at = (happenedAt: string, happenedPrecision: "instant" | "day" | "month" | "year") =>
      happenedWords({ recordedAt, happenedAt: new Date(happenedAt), happenedPrecision }, ZONE);
    expect(at("2026-12-02T18:22:00Z", "instant")).toBeNull();
    expect(at("2021-02-03T12:00:00Z", "day")).toBe("happened 3 February 2021");
    expect(at("2021-02-01T12:00:00Z", "month")).toBe("happened February 2021");
    expect(happenedWords({ recordedAt, happenedAt: null, happenedPrecision: "unknown" }, ZONE)).toBe(
      "when is not known",
    );
  });
});
