import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { layOutWall, type WallLayout, type WallSheet } from "~/components/shop/wall-layout";

const lengths = fc.integer({ min: 60, max: 1600 });
const sheets = fc.array(
  fc.record({ width: lengths, height: lengths, letters: fc.integer({ min: 0, max: 40 }) }).map(
    ({ letters, ...sheet }): WallSheet => ({
      sheet,
      picture: { width: sheet.width * 0.8, height: sheet.height * 0.8 },
      letters,
    }),
  ),
  { minLength: 1, maxLength: 6 },
);

type Box = { left: number; right: number; bottom: number; top: number };

function boxes(layout: WallLayout, hung: readonly WallSheet[]): Box[] {
  return layout.places.map(({ x, bottom }, at) => {
    const size = hung[at]?.sheet ?? { width: Number.NaN, height: Number.NaN };
    return { left: x, right: x + size.width, bottom, top: bottom + size.height };
  });
}

function meet(a: Box, b: Box): boolean {
  return a.left < b.right && b.left < a.right && a.bottom < b.top && b.bottom < a.top;
}

describe("a wall", () => {
  it.each(["wide", "narrow"] as const)("keeps sheets apart, off the chair and on the wall (%s)", (view) => {
    fc.assert(
      fc.property(sheets, (hung) => {
        const layout = layOutWall(hung, view);
        const chair = {
          left: layout.chair.x,
          right: layout.chair.x + layout.chair.width,
          bottom: layout.chair.bottom,
          top: layout.chair.bottom + layout.chair.height,
        };
        const all = [...boxes(layout, hung), chair];
        expect(all).toHaveLength(hung.length + 1);
        for (const [at, box] of all.entries()) {
          expect(box.left).toBeGreaterThanOrEqual(0);
          expect(box.right).toBeLessThanOrEqual(layout.width);
          expect(box.top).toBeLessThanOrEqual(layout.height);
          for (const other of all.slice(at + 1)) expect(meet(box, other)).toBe(false);
        }
      }),
    );
  });

  it("hangs the middle of every sheet at eye level where there is one row", () => {
    fc.assert(
      fc.property(sheets, (hung) => {
        for (const box of boxes(layOutWall(hung, "wide"), hung)) {
          expect((box.top + box.bottom) / 2).toBe(1500);
        }
      }),
    );
  });
});
