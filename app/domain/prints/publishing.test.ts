import { describe, expect, it } from "vitest";
import { missingForPublishing, picturesFixedBecause, slugFixedBecause } from "./publishing";

const picture = { label: "7", description: "Beeches in fog", scanReady: true };

describe("publishing", () => {
  it("asks for nothing when nothing is missing", () => {
    expect(missingForPublishing({ title: "Pell Wood", year: 2025, pictures: [picture] })).toEqual([]);
  });

  it("names everything that is missing, and of which picture", () => {
    expect(missingForPublishing({ title: " ", year: null, pictures: [] })).toHaveLength(3);
    const two = missingForPublishing({
      title: "Pell Wood",
      year: 2025,
      pictures: [picture, { label: "8", description: " ", scanReady: false }],
    });
    expect(two).toEqual([
      "The scan of picture 8 has not been checked yet.",
      "Describe picture 8 for those who cannot see it.",
    ]);
  });

  it("fixes pictures with the first edition opened, and the address with publishing", () => {
    expect(picturesFixedBecause([{ state: "draft" }])).toBeNull();
    expect(picturesFixedBecause([{ state: "draft" }, { state: "closed" }])).toMatch(/has been opened/);
    expect(slugFixedBecause("draft")).toBeNull();
    expect(slugFixedBecause("withdrawn")).not.toBeNull();
  });
});
