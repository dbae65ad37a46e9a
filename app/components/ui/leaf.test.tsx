import { renderToStaticMarkup } from "react-dom/server";
import { describe, expect, it } from "vitest";
import { ForeEdge } from "~/components/ui/fore-edge";
import { Leaf, LeafLegend, type LeafPlacement, runMark } from "~/components/ui/leaf";
import { NumberSheet } from "~/components/ui/number-sheet";

const placements: LeafPlacement[] = [
  "in_hand",
  "held",
  "set_aside",
  "sold",
  "coming_back",
  "given",
  "kept",
  "consigned",
  "retired",
];

function drawing(markup: string): string {
  return /<svg[^>]*>(.*?)<\/svg>/s.exec(markup)?.[1] ?? "";
}

function text(markup: string): string {
  return markup.replaceAll(/<[^>]+>/g, "");
}

describe("a leaf", () => {
  it("is drawn differently for every placement, so that its shape alone tells", () => {
    const drawn = placements.map((placement) =>
      drawing(renderToStaticMarkup(<Leaf number={7} placement={placement} word={placement} />)),
    );
    expect(drawn).not.toContain("");
    expect(new Set(drawn).size).toBe(placements.length);
  });

  it("shows the public a free number bare and a gone one inked", () => {
    const of = (placement: LeafPlacement) =>
      drawing(renderToStaticMarkup(<Leaf number={7} placement={placement} word="" />));
    expect(of("free")).toBe(of("in_hand"));
    expect(of("gone")).toBe(of("sold"));
  });

  it("says its number and its word at every size", () => {
    for (const size of ["shop", "studio", "mini", undefined] as const) {
      const markup = renderToStaticMarkup(<Leaf number={12} placement="held" word="held" size={size} />);
      expect(text(markup)).toBe("12 held");
    }
  });

  it("writes the run before the number", () => {
    expect(text(renderToStaticMarkup(<Leaf number={1} run="ap" placement="kept" word="kept" />))).toBe(
      "AP1 kept",
    );
    expect(runMark("HC")).toBe("HC");
    expect(runMark()).toBe("");
  });
});

describe("a legend", () => {
  it("hides its example numbers from those who hear it", () => {
    const markup = renderToStaticMarkup(
      <LeafLegend placements={[{ placement: "held", name: "Held", meaning: "corner folded", number: 10 }]} />,
    );
    expect(
      text(markup.replace(/<span aria-hidden="true">.*?<\/span> <span[^>]*><\/span><\/span><\/span>/s, "")),
    ).toBe("Held corner folded");
  });
});

describe("a number sheet", () => {
  it("names each list of leaves by its price and its numbers", () => {
    const markup = renderToStaticMarkup(
      <NumberSheet
        variant="shop"
        columns={5}
        rows={[
          {
            fromNumber: 1,
            toNumber: 1,
            price: "£280",
            words: "number 1",
            left: "none left",
            isNow: false,
            copies: [{ number: 1, placement: "gone", word: "gone" }],
          },
        ]}
      />,
    );
    const heading = /<h3[^>]*id="([^"]+)"[^>]*>(.*?)<\/h3>/s.exec(markup);
    expect(text(heading?.[2] ?? "")).toBe("£280 number 1 none left");
    expect(markup).toContain(`<ol class="leaves leaves-5" aria-labelledby="${heading?.[1]}">`);
  });
});

describe("a fore-edge", () => {
  it("has one bar a copy and says the same in words", () => {
    for (const count of [1, 30, 31, 100]) {
      const markup = renderToStaticMarkup(
        <ForeEdge
          label={`${count} numbers`}
          copies={Array.from({ length: count }, (_, at) => ({ number: at + 1, placement: "free" as const }))}
        />,
      );
      expect(markup.match(/<g /g)).toHaveLength(count);
      expect(markup).toContain(`aria-label="${count} numbers"`);
    }
  });
});
