import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { freeSlug, isSlug, suggestSlug } from "./slug";

describe("an address suggested from a title", () => {
  it("keeps letters and figures, spells out what has no plain letter, and drops the rest", () => {
    expect(suggestSlug("Weir at Saint Orrin's Mill")).toBe("weir-at-saint-orrins-mill");
    expect(suggestSlug("Hag Down, 4 a.m.")).toBe("hag-down-4-a-m");
    expect(suggestSlug("Große Öde, ærø")).toBe("grosse-ode-aero");
    expect(suggestSlug("  — ")).toBe("");
  });

  it("is an address or nothing, whatever the title", () => {
    fc.assert(
      fc.property(fc.string({ unit: "grapheme", maxLength: 120 }), (title) => {
        const slug = suggestSlug(title);
        expect(slug === "" || isSlug(slug)).toBe(true);
        expect(slug.length).toBeLessThanOrEqual(60);
      }),
    );
  });

  it("cuts long titles between words", () => {
    const slug = suggestSlug("the long white road across the chalk above the river in november fog");
    expect(slug).toBe("the-long-white-road-across-the-chalk-above-the-river-in");
  });

  it("takes the first free number where it is taken", () => {
    expect(freeSlug("hag-down", new Set())).toBe("hag-down");
    expect(freeSlug("hag-down", new Set(["hag-down", "hag-down-2"]))).toBe("hag-down-3");
    expect(freeSlug("", new Set())).toBe("untitled");
  });
});
