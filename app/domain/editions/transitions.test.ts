import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  allowedCopyTransition,
  allowedSheetTransition,
  COPY_ENTRY_KINDS,
  type CopyContext,
  type CopyPlacement,
  ENTRY_WORDS,
  ISSUING_KINDS,
  isLive,
  LEDGER_ENTRY_KINDS,
  MAKINGS,
  mayBeHeld,
  mayPrintAgain,
  PLACEMENTS,
  refusedForEdition,
  replayCopy,
  SHEET_ENTRY_KINDS,
  type SheetMaking,
} from "./transitions";

const answer = (result: { to: string } | { refused: string; sentence: string }) =>
  "refused" in result ? result.refused : result.to;
const copy = (...args: Parameters<typeof allowedCopyTransition>) => answer(allowedCopyTransition(...args));
const sheet = (...args: Parameters<typeof allowedSheetTransition>) => answer(allowedSheetTransition(...args));

const anyPlacement = fc.constantFrom(...PLACEMENTS);
const anyContext: fc.Arbitrary<CopyContext> = fc.record(
  {
    holdOfSameOrder: fc.boolean(),
    dispatched: fc.boolean(),
    forSale: fc.boolean(),
    issued: fc.boolean(),
    copyIssued: fc.boolean(),
  },
  { requiredKeys: [] },
);

describe("a sale", () => {
  it("is made from in hand, a hold of the same order, set aside and consignment, and from nowhere else", () => {
    const from = PLACEMENTS.filter((place) => copy("sold", place, { holdOfSameOrder: true }) === "sold");
    expect(from).toEqual(["in_hand", "held", "set_aside", "consigned"]);
  });

  it("does not take a copy held for another order", () => {
    expect(copy("sold", "held")).toBe("held_elsewhere");
    expect(copy("sold", "held", { holdOfSameOrder: false })).toBe("held_elsewhere");
  });

  it("is never of a run that is not for sale", () => {
    expect(copy("sold", "in_hand", { forSale: false })).toBe("not_for_sale");
    expect(copy("sold_by_stockist", "consigned", { forSale: false })).toBe("not_for_sale");
  });

  it("by a stockist is only of what the stockist has", () => {
    expect(PLACEMENTS.filter((place) => copy("sold_by_stockist", place) === "sold")).toEqual(["consigned"]);
  });

  it("is the only way into sold", () => {
    fc.assert(
      fc.property(fc.constantFrom(...COPY_ENTRY_KINDS), anyPlacement, anyContext, (kind, from, context) => {
        const enters = copy(kind, from, context) === "sold" && from !== "sold";
        expect(enters && kind !== "sold" && kind !== "sold_by_stockist").toBe(false);
      }),
    );
  });
});

describe("a refund", () => {
  it("puts the copy back in hand when nothing has left the studio", () => {
    expect(copy("refunded", "sold", { dispatched: false })).toBe("in_hand");
    expect(copy("sale_cancelled", "sold", { dispatched: false })).toBe("in_hand");
  });

  it("after dispatch leaves it coming back until its sheet has been seen", () => {
    expect(copy("refunded", "sold", { dispatched: true })).toBe("coming_back");
    expect(copy("refunded", "sold")).toBe("coming_back");
    expect(copy("refunded", "coming_back")).toBe("coming_back");
    expect(copy("sale_cancelled", "sold", { dispatched: true })).toBe("already_dispatched");
    expect(copy("sale_cancelled", "sold")).toBe("already_dispatched");
    expect(copy("inspected_back", "coming_back")).toBe("in_hand");
  });

  it("may come after the sheet", () => {
    expect(copy("coming_back", "sold", { dispatched: true })).toBe("coming_back");
    expect(copy("coming_back", "sold", { dispatched: false })).toBe("not_dispatched");
    expect(copy("refunded", "in_hand")).toBe("in_hand");
  });

  it("never lets a copy that has left the studio be sold again unseen", () => {
    fc.assert(
      fc.property(fc.constantFrom(...COPY_ENTRY_KINDS), anyContext, (kind, context) => {
        const from = (place: CopyPlacement) => copy(kind, place, { ...context, dispatched: true });
        expect(["in_hand", "set_aside", "kept", "consigned", "held"]).not.toContain(from("sold"));
        if (kind !== "inspected_back") {
          expect(["in_hand", "set_aside", "kept", "consigned", "held", "sold"]).not.toContain(
            from("coming_back"),
          );
        }
      }),
    );
  });
});

describe("a hold", () => {
  it("is laid on copies in hand only", () => {
    expect(PLACEMENTS.filter(mayBeHeld)).toEqual(["in_hand"]);
  });

  it("is no ledger entry: none leads to it, and only its own order's sale takes the copy out of it", () => {
    fc.assert(
      fc.property(fc.constantFrom(...COPY_ENTRY_KINDS), anyPlacement, anyContext, (kind, from, context) => {
        const to = copy(kind, from, context);
        if (from !== "held") expect(to).not.toBe("held");
        else if (kind !== "sold") expect(["held", "held_elsewhere"]).toContain(to);
      }),
    );
  });
});

describe("where a copy stands", () => {
  it("begins with the opening and with nothing else", () => {
    expect(COPY_ENTRY_KINDS.filter((kind) => copy(kind, null) !== "not_from_here")).toEqual(["opened"]);
    expect(PLACEMENTS.filter((place) => copy("opened", place) === "in_hand")).toEqual([]);
  });

  it("is never left once retired", () => {
    fc.assert(
      fc.property(fc.constantFrom(...COPY_ENTRY_KINDS), anyContext, (kind, context) => {
        expect(
          PLACEMENTS.filter((place) => place === copy(kind, "retired", context) && place !== "retired"),
        ).toEqual([]);
      }),
    );
  });

  it("changes as the studio places it", () => {
    expect(copy("set_aside", "in_hand")).toBe("set_aside");
    expect(copy("released_from_set_aside", "set_aside")).toBe("in_hand");
    expect(copy("given", "set_aside")).toBe("given");
    expect(copy("kept", "in_hand")).toBe("kept");
    expect(copy("no_longer_kept", "kept")).toBe("in_hand");
    expect(copy("consigned", "in_hand")).toBe("consigned");
    expect(copy("brought_back", "consigned")).toBe("in_hand");
    expect(copy("retired", "coming_back")).toBe("retired");
    expect(copy("given", "sold")).toBe("not_from_here");
    expect(copy("consigned", "coming_back")).toBe("not_from_here");
    expect(copy("retired", "sold")).toBe("not_from_here");
  });

  it("stays when an owner passes the print on", () => {
    expect(copy("passed_on", "sold")).toBe("sold");
    expect(copy("passed_on", "given")).toBe("given");
    expect(copy("passed_on", "in_hand")).toBe("not_from_here");
  });

  it("is what replaying the entries gives", () => {
    expect(replayCopy([])).toBeNull();
    expect(
      replayCopy([
        { kind: "opened" },
        { kind: "sold" },
        { kind: "certificate_issued" },
        { kind: "refunded", context: { dispatched: true } },
        { kind: "certificate_voided" },
        { kind: "inspected_back" },
        { kind: "consigned" },
        { kind: "sold_by_stockist" },
        { kind: "passed_on" },
      ]),
    ).toBe("sold");
    expect(() => replayCopy([{ kind: "opened" }, { kind: "sold" }, { kind: "sold" }])).toThrow(
      "Entry 3 (sold)",
    );
  });
});

describe("the limit", () => {
  it("falls while no number is issued, retiring the numbers above it", () => {
    expect(copy("limit_lowered", "in_hand", { issued: false })).toBe("retired");
    expect(copy("limit_lowered", "in_hand", { issued: true })).toBe("already_issued");
    expect(copy("limit_lowered", "in_hand")).toBe("already_issued");
    expect(copy("limit_lowered", "held", { issued: false })).toBe("held_elsewhere");
    expect(ISSUING_KINDS).toEqual(expect.arrayContaining(["sold", "given", "consigned", "signed"]));
  });

  it("may not fall for an edition with a number issued or held", () => {
    const open = { stage: "open", issued: 0, held: 0 } as const;
    expect(refusedForEdition("limit_lowered", open)).toBeNull();
    expect(refusedForEdition("limit_lowered", { ...open, issued: 1 })?.refused).toBe("already_issued");
    expect(refusedForEdition("limit_lowered", { ...open, held: 1 })?.refused).toBe("held_elsewhere");
    expect(refusedForEdition("closed_early", { ...open, issued: 9 })).toBeNull();
    expect(refusedForEdition("closed_early", { ...open, held: 1 })?.refused).toBe("held_elsewhere");
    expect(refusedForEdition("prices_changed", { ...open, issued: 3, held: 1 })).toBeNull();
    expect(refusedForEdition("prices_changed", { ...open, stage: "closed" })?.refused).toBe("not_from_here");
    expect(refusedForEdition("opened", open)?.refused).toBe("not_from_here");
    expect(refusedForEdition("opened", { ...open, stage: "draft" })).toBeNull();
    expect(refusedForEdition("closed_early", { ...open, stage: "draft" })?.refused).toBe("not_from_here");
  });

  it("stands when the edition closes early: unissued numbers are retired, the others stay where they are", () => {
    expect(copy("closed_early", "in_hand", { copyIssued: false })).toBe("retired");
    expect(copy("closed_early", "set_aside", { copyIssued: false })).toBe("retired");
    expect(copy("closed_early", "in_hand", { copyIssued: true })).toBe("in_hand");
    expect(copy("closed_early", "held", { copyIssued: false })).toBe("held_elsewhere");
    expect(copy("closed_early", "sold")).toBe("not_from_here");
  });
});

describe("a sheet", () => {
  it("is printed, signed, packed, dispatched and delivered in that order", () => {
    let making: SheetMaking = "to_print";
    for (const kind of ["printed", "signed", "packed", "dispatched", "delivered"] as const) {
      const result = allowedSheetTransition(kind, making);
      if ("refused" in result) throw new Error(result.sentence);
      making = result.to;
    }
    expect(making).toBe("delivered");
    expect(sheet("signed", "to_print")).toBe("not_from_here");
    expect(sheet("packed", "printed")).toBe("not_from_here");
    expect(sheet("dispatched", "printed")).toBe("not_from_here");
    expect(sheet("printed", "spoiled")).toBe("not_from_here");
    expect(sheet("unpacked", "packed")).toBe("signed");
  });

  it("is spoiled with its reason, or not at all", () => {
    expect(sheet("spoiled", "printed")).toBe("reason_missing");
    expect(sheet("spoiled", "printed", { reason: "  " })).toBe("reason_missing");
    expect(sheet("spoiled", "printed", { reason: "dust in the sky" })).toBe("spoiled");
  });

  it("is printed again only once the one before is spoiled or destroyed", () => {
    const after = MAKINGS.filter(
      (previous) => sheet("printed_again", "to_print", { previous }) === "printed",
    );
    expect(after).toEqual(["spoiled", "destroyed"]);
    expect(sheet("printed_again", "to_print", { previous: "lost" })).toBe("sheet_lost");
    expect(sheet("printed_again", "to_print", { previous: "delivered" })).toBe("sheet_still_there");
    expect(sheet("printed_again", "to_print")).toBe("no_sheet_before");
    expect(sheet("printed_again", "printed", { previous: "spoiled" })).toBe("not_from_here");
    expect(sheet("printed", "to_print", { previous: "spoiled" })).toBe("has_sheet_before");
    expect(sheet("printed", "to_print", { previous: "lost" })).toBe("sheet_lost");
  });

  it("that is lost can only come back", () => {
    expect(
      SHEET_ENTRY_KINDS.filter((kind) => sheet(kind, "lost", { reason: "because" }) !== "not_from_here"),
    ).toEqual(["returned"]);
    expect(sheet("returned", "lost")).toBe("returned");
    expect(sheet("spoiled", "returned", { reason: "creased on its way" })).toBe("spoiled");
  });

  it("is at no time one of two that live", () => {
    const anyStep = fc.tuple(fc.constantFrom(...SHEET_ENTRY_KINDS), fc.nat());
    fc.assert(
      fc.property(fc.array(anyStep, { maxLength: 60 }), (steps) => {
        const sheets: SheetMaking[] = ["to_print"];
        for (const [kind, seed] of steps) {
          // The queue takes a further sheet on the same condition on which it may be printed.
          if (kind === "printed_again" && mayPrintAgain(sheets.at(-1) ?? null) === null)
            sheets.push("to_print");
          const index = seed % sheets.length;
          const result = allowedSheetTransition(kind, sheets[index] ?? "to_print", {
            reason: "a reason",
            previous: sheets[index - 1] ?? null,
          });
          if (!("refused" in result)) sheets[index] = result.to;
        }
        expect(sheets.filter(isLive).length).toBeLessThanOrEqual(1);
      }),
    );
  });

  it("ends when it is spoiled or destroyed", () => {
    for (const ended of MAKINGS.filter((making) => !isLive(making))) {
      expect(SHEET_ENTRY_KINDS.every((kind) => sheet(kind, ended, { reason: "x" }) === "not_from_here")).toBe(
        true,
      );
      expect(mayPrintAgain(ended)).toBeNull();
    }
  });
});

describe("the words", () => {
  it("name every kind of entry once", () => {
    expect(new Set(LEDGER_ENTRY_KINDS).size).toBe(LEDGER_ENTRY_KINDS.length);
    expect(Object.keys(ENTRY_WORDS).sort()).toEqual([...LEDGER_ENTRY_KINDS].sort());
  });

  it("say why an entry is refused", () => {
    const result = allowedCopyTransition("sold", "given");
    expect(result).toEqual({ refused: "not_from_here", sentence: 'A copy that is given cannot be "sold".' });
  });
});
