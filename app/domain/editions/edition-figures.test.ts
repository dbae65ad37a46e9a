import { describe, expect, it } from "vitest";
import { type EditionPlan, editionFigures } from "./edition-figures";

const plan = (
  changes: Partial<EditionPlan["formats"][number]> = {},
  limit: number | null = 25,
): EditionPlan => ({
  limit,
  ap: 2,
  pp: 1,
  hc: 0,
  bat: 1,
  exhibition: 0,
  formats: [
    {
      sheet: { widthMm: 500, heightMm: 400 },
      image: { widthMm: 400, heightMm: 320 },
      grammage: 310,
      steps: [{ fromNumber: 1, toNumber: 25, amount: 28_000 }],
      ...changes,
    },
  ],
});
const picture = { widthPx: 6_000, heightPx: 4_800, otherEditions: [] };
const other = { limit: 5, ap: 1, pp: 0, hc: 0, bat: 0, exhibition: 0, status: "open" as const };

describe("what a planned edition comes to", () => {
  it("is worked out from crop, sizes, paper and ladder", () => {
    const figures = editionFigures(plan(), [picture]);
    expect(figures.copies).toBe(29);
    expect(figures.cap).toMatchObject({ total: 29, room: 1, warning: null });
    expect(figures.proofsUsual).toEqual({ floor: 2, ceil: 3 });
    expect(figures.formats[0]).toMatchObject({
      // 6,000 px over 400 mm: 6000 x 25.4 / 400 = 381.
      resolution: { ppi: 381, word: "fine" },
      margins: { left: 50, right: 50, top: 40, bottom: 40 },
      fits: true,
      // 0.5 m x 0.4 m x 310 g/m2.
      grams: 62,
      sellOut: 700_000,
      heightForWidth: null,
      ladderProblems: [],
    });
  });

  it("counts every other edition of the picture, and takes the picture with most", () => {
    const two = editionFigures(plan(), [picture, { ...picture, otherEditions: [other] }]);
    expect(two.cap).toMatchObject({ total: 35, state: "past_cap" });
    expect(two.cap?.warning).toMatch(/2006\/112\/EC/);
    expect(two.sheetsACopy).toBe(2);
  });

  it("takes the weakest picture of a portfolio for the resolution", () => {
    const figures = editionFigures(plan(), [picture, { ...picture, widthPx: 3_000, heightPx: 2_400 }]);
    expect(figures.formats[0]?.resolution).toEqual({ ppi: 190.5, word: "enough at arm's length" });
  });

  it("says when the image has another shape than the picture, not when rounding to whole mm made it so", () => {
    expect(
      editionFigures(plan({ image: { widthMm: 400, heightMm: 300 } }), [picture]).formats[0],
    ).toMatchObject({
      heightForWidth: 320,
    });
    expect(
      editionFigures(plan({ image: { widthMm: 296, heightMm: 237 } }), [picture]).formats[0],
    ).toMatchObject({
      heightForWidth: null,
    });
  });

  it("leaves open what is not known yet", () => {
    const figures = editionFigures(plan({ sheet: null, image: null, grammage: null, steps: [] }, null), [
      picture,
    ]);
    expect(figures).toMatchObject({ copies: null, cap: null, proofsUsual: null });
    expect(figures.formats[0]).toMatchObject({
      resolution: null,
      margins: null,
      grams: null,
      sellOut: null,
      fits: true,
    });
    const gap = editionFigures(plan({ steps: [{ fromNumber: 1, toNumber: 24, amount: 1 }] }), [picture]);
    expect(gap.formats[0]).toMatchObject({ sellOut: null, ladderProblems: ["Number 25 has no price."] });
    expect(editionFigures(plan({ image: { widthMm: 501, heightMm: 320 } }), [picture]).formats[0]?.fits).toBe(
      false,
    );
  });
});
