import { describe, expect, it } from "vitest";
import { type CountedEdition, countAgainstCap } from "./cap";

const edition = (limit: number, ap = 0, unsigned = 0): CountedEdition => ({
  limit,
  ap,
  pp: 0,
  hc: 0,
  bat: 0,
  exhibition: 0,
  unsigned,
});

// Directive 2006/112/EC, Annex IX, Part A, point 7: signed, numbered and limited to 30 copies, all sizes and mounts included.
describe("photographs as works of art", () => {
  it("30 over two sizes are, 31 are not, and 30 with unsigned ones beside them are not", () => {
    expect(countAgainstCap([edition(20), edition(10)]).worksOfArt).toBe(true);
    expect(countAgainstCap([edition(20), edition(11)]).worksOfArt).toBe(false);
    expect(countAgainstCap([edition(20), edition(10, 0, 5)]).worksOfArt).toBe(false);
    expect(countAgainstCap([edition(10, 0, 5)]).worksOfArt).toBe(false);
  });

  // Cautious reading, not spelled out in the text: artist's proofs are signed copies and count.
  it("proofs counted: 15 + 2 and 10 + 2 make 29; one more is the last", () => {
    const two = [edition(15, 2), edition(10, 2)];
    expect(countAgainstCap(two).total).toBe(29);
    expect(countAgainstCap([...two, edition(1)])).toMatchObject({ total: 30, worksOfArt: true });
    expect(countAgainstCap([...two, edition(2)])).toMatchObject({ total: 31, worksOfArt: false });
  });
});
