import { describe, expect, it } from "vitest";
import { taxSums } from "./tax-sums";

const home = { treatment: "home", basisPoints: 2000, label: "VAT 20%" };

describe("taxSums", () => {
  it("adds up each rate by itself", () => {
    const reduced = { treatment: "home", basisPoints: 700, label: "VAT 7%" };
    expect(
      taxSums([
        { tax: 4667, snapshot: home },
        { tax: 200, snapshot: home },
        { tax: 70, snapshot: reduced },
      ]),
    ).toEqual([
      { ...home, tax: 4867 },
      { ...reduced, tax: 70 },
    ]);
  });

  it("says nothing of tax where the studio is not registered, and keeps an export's 0 %", () => {
    expect(taxSums([{ tax: 0, snapshot: { treatment: "unregistered", basisPoints: 0, label: "" } }])).toEqual(
      [],
    );
    const exported = { treatment: "export", basisPoints: 0, label: "VAT 0% (export)" };
    expect(taxSums([{ tax: 0, snapshot: exported }])).toEqual([{ ...exported, tax: 0 }]);
  });
});
