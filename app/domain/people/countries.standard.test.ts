import { describe, expect, it } from "vitest";
import { COUNTRY_CODES, countriesByName, countryName, EU_MEMBERS, isCountryCode, isInEu } from "./countries";

// ISO 3166-1: 249 officially assigned alpha-2 codes. The names are the runtime's (CLDR), an independent list: a code it
// has no name for would not be one.
describe("countries", () => {
  it("are 249, each once, in order, and each has a name", () => {
    expect(COUNTRY_CODES).toHaveLength(249);
    expect([...new Set(COUNTRY_CODES)].sort()).toEqual(COUNTRY_CODES);
    expect(COUNTRY_CODES.filter((code) => countryName(code, "en") === code)).toEqual([]);
  });

  it("do not include codes that are only reserved", () => {
    expect(["UK", "EU", "XK", "AN", "SU", "gb", ""].filter(isCountryCode)).toEqual([]);
  });

  it("are named in the reader's language and put in its order", () => {
    expect(countryName("DE", "en")).toBe("Germany");
    expect(countryName("DE", "de")).toBe("Deutschland");
    expect(countryName("??", "en")).toBe("??");
    const names = countriesByName("de").map((country) => country.name);
    expect(names.indexOf("Österreich")).toBeLessThan(names.indexOf("Polen"));
  });
});

// Treaty on European Union Art. 52 with the accessions since, and without the United Kingdom since 1 February 2020; from memory.
describe("the European Union", () => {
  it("has 27 members, all of them countries", () => {
    expect(EU_MEMBERS.size).toBe(27);
    expect([...EU_MEMBERS].every(isCountryCode)).toBe(true);
    expect(["DE", "FR", "IE", "HR", "GR"].every(isInEu)).toBe(true);
    expect(["GB", "CH", "NO", "IS", "LI", "GP", "AX", "MC"].some(isInEu)).toBe(false);
  });
});
