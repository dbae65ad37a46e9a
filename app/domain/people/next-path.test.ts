import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { firstPage, safePath } from "./next-path";

describe("safePath", () => {
  it("keeps paths of ours with their search", () => {
    expect(safePath("/studio/orders?page=2&sort=number")).toBe("/studio/orders?page=2&sort=number");
    expect(safePath("/de/account#end")).toBe("/de/account");
  });

  it.each([
    "//evil.example",
    "/\\evil.example",
    "https://evil.example/",
    "javascript:alert(1)",
    "studio",
    "",
    "/\t/evil.example",
    "/..//evil.example",
    "/.//evil.example",
    "/sign-out",
    "/de/sign-in",
  ])("refuses %j", (asked) => {
    expect(safePath(asked)).toBeNull();
  });

  it("never leads to another origin, whatever is asked", () => {
    const pieces = fc.constantFrom(
      "/",
      "\\",
      ".",
      "..",
      "@",
      ":",
      "%2f",
      "evil.example",
      "\t",
      "\n",
      "?",
      "#",
      "a",
    );
    fc.assert(
      fc.property(fc.array(pieces, { maxLength: 12 }), (parts) => {
        const path = safePath(parts.join(""));
        if (path !== null) expect(new URL(path, "https://shop.example").origin).toBe("https://shop.example");
      }),
      { numRuns: 2_000 },
    );
  });
});

describe("firstPage", () => {
  it("is the first page each role may open", () => {
    expect(firstPage(["photographer"])).toBe("/studio");
    expect(firstPage(["assistant"])).toBe("/studio");
    expect(firstPage(["bookkeeper"])).toBe("/studio/orders");
    expect(firstPage(["collector"], "de")).toBe("/de/account/orders");
    expect(firstPage(["printer"])).toBe("/account");
    expect(firstPage([])).toBe("/account");
  });
});
