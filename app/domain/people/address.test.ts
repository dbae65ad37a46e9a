import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  ADDRESS_PROBLEMS,
  addressSchema,
  isSamePostcode,
  needsPostcode,
  postcodeExample,
  writePostcode,
} from "./address";
import { COUNTRY_CODES } from "./countries";

const home = {
  name: "Ada Fenwick",
  line1: "2 Hag Down",
  line2: "",
  city: "Amberley Locks",
  region: "",
  postcode: "AB1 2CD",
  country: "GB",
};
const problems = (fields: Record<string, unknown>) => {
  const result = addressSchema.safeParse({ ...home, ...fields });
  return result.success ? [] : result.error.issues.map((issue) => [issue.path.join("."), issue.message]);
};

describe("an address", () => {
  it("comes out tidy, without what was left empty", () => {
    expect(
      addressSchema.parse({
        ...home,
        name: "  Ada \t Fenwick ",
        line2: "   ",
        postcode: "ab12cd",
        country: "gb",
      }),
    ).toEqual({
      name: "Ada Fenwick",
      line1: "2 Hag Down",
      city: "Amberley Locks",
      postcode: "AB1 2CD",
      country: "GB",
    });
    expect(addressSchema.parse({ ...home, line2: "Upper floor", region: "Vale of Ember" })).toMatchObject({
      line2: "Upper floor",
      region: "Vale of Ember",
    });
    const { line2: _line2, region: _region, ...short } = home;
    expect(addressSchema.parse(short)).toEqual(addressSchema.parse(home));
  });

  it("keeps to one line", () => {
    expect(addressSchema.parse({ ...home, name: "Ada\r\nBcc: someone" }).name).toBe("Ada Bcc: someone");
    expect(addressSchema.parse({ ...home, name: "Zoe\u0308\u200b Ng" }).name).toBe("Zo\u00eb Ng");
  });

  it("says at each field what is missing", () => {
    expect(problems({ name: "", line1: " ", city: undefined, postcode: "", country: "" })).toEqual([
      ["name", "address.name.missing"],
      ["line1", "address.line1.missing"],
      ["city", "address.city.missing"],
      ["country", "address.country.missing"],
    ]);
    expect(problems({ postcode: "" })).toEqual([["postcode", "address.postcode.missing"]]);
    expect(problems({ name: "", postcode: "" })).toEqual([
      ["name", "address.name.missing"],
      ["postcode", "address.postcode.missing"],
    ]);
    expect(problems({ postcode: "12345" })).toEqual([["postcode", "address.postcode.wrong"]]);
    expect(problems({ country: "XX" })).toEqual([["country", "address.country.unknown"]]);
    expect(problems({ country: "US", postcode: "12345" })).toEqual([["region", "address.region.missing"]]);
    expect(problems({ name: "x".repeat(101) })).toEqual([["name", "address.name.long"]]);
    expect(problems({ line2: "x".repeat(101) })).toEqual([["line2", "address.line2.long"]]);
    expect(problems({ postcode: "x".repeat(17) })).toEqual([["postcode", "address.postcode.long"]]);
  });

  it("asks for no postcode where there may be none", () => {
    expect(problems({ country: "AE", postcode: "" })).toEqual([]);
    expect(problems({ country: "IE", postcode: "" })).toEqual([]);
    expect(addressSchema.parse({ ...home, country: "IE", postcode: " q12  ab34 " }).postcode).toBe(
      "Q12 AB34",
    );
  });

  it("has no other message than those listed", () => {
    const anything = fc.oneof(fc.string(), fc.constant(undefined), fc.constant(null), fc.integer());
    fc.assert(
      fc.property(
        fc.record({ name: anything, line1: anything, line2: anything, city: anything, postcode: anything }),
        fc.constantFrom(...COUNTRY_CODES, "", "??"),
        (fields, country) => {
          const listed: readonly string[] = ADDRESS_PROBLEMS;
          for (const [path, message] of problems({ ...fields, country })) {
            expect(listed, path).toContain(message);
          }
        },
      ),
    );
  });
});

describe("postcodes", () => {
  it.each([
    ["GB", "qq1a2bc", "QQ1A 2BC"],
    ["GB", "Q1 2BC", "Q1 2BC"],
    ["NL", "1234ab", "1234 AB"],
    ["DE", "D-12345", "12345"],
    ["US", "123456789", "12345-6789"],
    ["CA", "x1a2b3", "X1A 2B3"],
    ["PL", "12 345", "12-345"],
    ["JP", "1234567", "123-4567"],
    ["SE", "se-123 45", "123 45"],
    ["LV", "1234", "LV-1234"],
    ["JE", "je12ab", "JE1 2AB"],
  ])("%s %s is written %s", (country, typed, written) => {
    expect(writePostcode(country, typed)).toBe(written);
  });

  it.each([
    ["GB", "1234"],
    ["DE", "1234"],
    ["NL", "0234 AB"],
    ["US", "1234"],
    ["CA", "D1A 2B3"],
    ["FR", "1234A"],
  ])("%s has none like %s", (country, typed) => {
    expect(writePostcode(country, typed)).toBeNull();
  });

  it("have examples that are right, and writing them twice changes nothing", () => {
    for (const country of COUNTRY_CODES.filter(needsPostcode)) {
      const example = postcodeExample(country) ?? "";
      expect(writePostcode(country, example), country).toBe(example);
    }
    expect(postcodeExample("AE")).toBeNull();
  });

  it("are compared as people type them", () => {
    expect(isSamePostcode("AB1 2CD", "ab12cd")).toBe(true);
    expect(isSamePostcode("12-345", "12345")).toBe(true);
    expect(isSamePostcode("AB1 2CD", "AB1 2CE")).toBe(false);
    expect(isSamePostcode("", "")).toBe(false);
  });
});
