import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { CAP_SOURCE, type CountedEdition, copiesOf, countAgainstCap } from "./cap";

const edition = (limit: number, more: Partial<CountedEdition> = {}): CountedEdition => ({
  limit,
  ap: 0,
  pp: 0,
  hc: 0,
  bat: 0,
  exhibition: 0,
  ...more,
});

describe("countAgainstCap", () => {
  it("warns before the cap is crossed, with its source and a caution", () => {
    const open = [edition(15, { ap: 2, status: "open" }), edition(10, { ap: 2, status: "closed" })];
    expect(countAgainstCap(open)).toMatchObject({ total: 29, room: 1, state: "within", warning: null });
    expect(countAgainstCap([...open, edition(1, { status: "draft" })])).toMatchObject({
      state: "at_cap",
      drafts: 1,
    });
    const past = countAgainstCap([...open, edition(2, { status: "draft" })]);
    expect(past).toMatchObject({ state: "past_cap", room: -1, worksOfArt: false });
    expect(past.warning).toContain("31 copies");
    expect(past.warning).toContain(CAP_SOURCE);
    expect(past.warning).toContain("accountant");
  });

  it("counts every class of proof", () => {
    expect(copiesOf(edition(10, { ap: 2, pp: 1, hc: 1, bat: 1, exhibition: 1 }))).toBe(16);
    expect(() => copiesOf(edition(-1))).toThrow(RangeError);
  });

  it("goes by the cap it is given", () => {
    expect(countAgainstCap([edition(12)], 12).worksOfArt).toBe(true);
    expect(countAgainstCap([edition(13)], 12).worksOfArt).toBe(false);
  });

  it("counts the same however the copies are spread over editions", () => {
    fc.assert(
      fc.property(fc.array(fc.nat(20), { maxLength: 6 }), (limits) => {
        const spread = countAgainstCap(limits.map((limit) => edition(limit)));
        const together = countAgainstCap([edition(limits.reduce((all, limit) => all + limit, 0))]);
        expect([spread.total, spread.state]).toEqual([together.total, together.state]);
      }),
    );
  });
});
