/** A postal address as it is written on a parcel: its schema, and what each country asks of it. */

import { z } from "zod";
import { isCountryCode } from "./countries";

/** Every message the schema gives. They are keys: the languages have the sentences. */
export const ADDRESS_PROBLEMS = [
  "address.name.missing",
  "address.name.long",
  "address.line1.missing",
  "address.line1.long",
  "address.line2.long",
  "address.city.missing",
  "address.city.long",
  "address.region.missing",
  "address.region.long",
  "address.postcode.missing",
  "address.postcode.wrong",
  "address.postcode.long",
  "address.country.missing",
  "address.country.unknown",
] as const;
export type AddressProblem = (typeof ADDRESS_PROBLEMS)[number];

/** Letters and digits of a postcode, and how they are grouped. `A` is a letter, `9` a digit, anything else stands for itself. */
type PostcodeRule = {
  readonly pattern: RegExp;
  readonly example: string;
  readonly write?: (plain: string) => string;
};

const digits = (count: number): PostcodeRule => ({
  pattern: new RegExp(`^\\d{${count}}$`),
  example: "123456".slice(0, count),
});
/** Puts a mark so many characters from the start (or, below zero, from the end). */
const withMark = (at: number, mark: string) => (plain: string) =>
  `${plain.slice(0, at)}${mark}${plain.slice(at)}`;
const british: Pick<PostcodeRule, "write"> = { write: withMark(-3, " ") };

/**
 * What a postcode looks like once spaces, hyphens and case are put aside, for countries whose parcels do not arrive without one.
 * Source: Universal Postal Union, postal addressing systems; from memory. Countries not named here are asked for nothing: some
 * have no postcodes, and a wrong guess would turn a buyer away.
 */
const POSTCODES: Readonly<Record<string, PostcodeRule>> = {
  AT: digits(4),
  AU: digits(4),
  BE: digits(4),
  BG: digits(4),
  BR: { pattern: /^\d{8}$/, example: "12345-678", write: withMark(5, "-") },
  CA: {
    pattern: /^[ABCEGHJ-NPRSTVXY]\d[ABCEGHJ-NPRSTV-Z]\d[ABCEGHJ-NPRSTV-Z]\d$/,
    example: "X1A 2B3",
    write: withMark(3, " "),
  },
  CH: digits(4),
  CY: digits(4),
  CZ: { pattern: /^\d{5}$/, example: "123 45", write: withMark(3, " ") },
  DE: digits(5),
  DK: digits(4),
  EE: digits(5),
  ES: digits(5),
  FI: digits(5),
  FR: digits(5),
  GB: { pattern: /^(GIR0AA|[A-Z]{1,2}\d[A-Z\d]?\d[A-Z]{2})$/, example: "AB1 2CD", ...british },
  GG: { pattern: /^GY\d{1,2}\d[A-Z]{2}$/, example: "GY1 2AB", ...british },
  GR: { pattern: /^\d{5}$/, example: "123 45", write: withMark(3, " ") },
  HR: digits(5),
  HU: digits(4),
  IM: { pattern: /^IM\d{1,2}\d[A-Z]{2}$/, example: "IM1 2AB", ...british },
  IN: digits(6),
  IT: digits(5),
  JE: { pattern: /^JE\d{1,2}\d[A-Z]{2}$/, example: "JE1 2AB", ...british },
  JP: { pattern: /^\d{7}$/, example: "123-4567", write: withMark(3, "-") },
  KR: digits(5),
  LI: digits(4),
  LT: { pattern: /^(LT)?\d{5}$/, example: "LT-12345", write: (plain) => `LT-${plain.slice(-5)}` },
  LU: { pattern: /^(L)?\d{4}$/, example: "1234", write: (plain) => plain.slice(-4) },
  LV: { pattern: /^(LV)?\d{4}$/, example: "LV-1234", write: (plain) => `LV-${plain.slice(-4)}` },
  MC: { pattern: /^980\d{2}$/, example: "98012" },
  MX: digits(5),
  NL: { pattern: /^[1-9]\d{3}[A-Z]{2}$/, example: "1234 AB", write: withMark(4, " ") },
  NO: digits(4),
  NZ: digits(4),
  PL: { pattern: /^\d{5}$/, example: "12-345", write: withMark(2, "-") },
  PT: { pattern: /^\d{7}$/, example: "1234-567", write: withMark(4, "-") },
  RO: digits(6),
  SE: { pattern: /^\d{5}$/, example: "123 45", write: withMark(3, " ") },
  SG: digits(6),
  SI: digits(4),
  SK: { pattern: /^\d{5}$/, example: "123 45", write: withMark(3, " ") },
  TR: digits(5),
  US: {
    pattern: /^\d{5}(\d{4})?$/,
    example: "12345",
    write: (plain) => (plain.length === 9 ? withMark(5, "-")(plain) : plain),
  },
};

/** Countries whose addresses name a state, province or prefecture; from memory of the same source. */
const NEEDS_REGION: ReadonlySet<string> = new Set(["AU", "BR", "CA", "IN", "JP", "MX", "US"]);

/** Whether a parcel to this country needs a postcode. */
export function needsPostcode(country: string): boolean {
  return Object.hasOwn(POSTCODES, country);
}

/** Whether an address in this country names a region. */
export function needsRegion(country: string): boolean {
  return NEEDS_REGION.has(country);
}

/** How a postcode of this country looks ("AB1 2CD"), as a help beside the field; null where none is asked for. */
export function postcodeExample(country: string): string | null {
  return needsPostcode(country) ? (POSTCODES[country]?.example ?? null) : null;
}

/**
 * A postcode as its country writes it: "ab12cd" is "AB1 2CD" in GB, "1234ab" is "1234 AB" in NL. Null when it is none of that
 * country's. Where no form is known, the text with its spaces put in order.
 */
export function writePostcode(country: string, text: string): string | null {
  const rule = needsPostcode(country) ? POSTCODES[country] : undefined;
  if (rule === undefined) return text.trim().replace(/\s+/g, " ").toUpperCase();
  const plain = text.toUpperCase().replace(/[\s\-\u2010-\u2014]/g, "");
  // The dialling letters some people put before the digits: "D-12345", "F-12345".
  const bare = plain.replace(new RegExp(`^(${country}|${country.charAt(0)})(?=\\d+$)`), "");
  const known = [plain, bare].find((candidate) => rule.pattern.test(candidate));
  if (known === undefined) return null;
  return rule.write === undefined ? known : rule.write(known);
}

const LONGEST_LINE = 100;

/** Text of one line: outer and doubled spaces go, and so do characters that cannot be printed. */
const oneLine = z
  .string()
  .transform((text) => text.normalize("NFC").replace(/\p{C}/gu, " ").replace(/\s+/g, " ").trim());

function wanted(missing: AddressProblem, long: AddressProblem) {
  return z
    .string({ error: missing })
    .pipe(oneLine)
    .pipe(z.string().min(1, { error: missing }).max(LONGEST_LINE, { error: long }));
}

function optional(long: AddressProblem, longest = LONGEST_LINE) {
  return z
    .string({ error: long })
    .nullish()
    .transform((text) => text ?? "")
    .pipe(oneLine)
    .pipe(z.string().max(longest, { error: long }))
    .transform((text) => (text === "" ? undefined : text));
}

const country = z
  .string({ error: "address.country.missing" satisfies AddressProblem })
  .transform((text) => text.trim().toUpperCase())
  .pipe(
    z
      .string()
      .min(1, { error: "address.country.missing" satisfies AddressProblem })
      .refine((code) => code === "" || isCountryCode(code), {
        error: "address.country.unknown" satisfies AddressProblem,
      }),
  );

/**
 * An address from a form. Fields left empty come as "", null or not at all; they leave the result. The postcode comes out as its
 * country writes it. Every message is an `AddressProblem`, at the path of its field.
 */
export const addressSchema = z
  .object({
    name: wanted("address.name.missing", "address.name.long"),
    line1: wanted("address.line1.missing", "address.line1.long"),
    line2: optional("address.line2.long"),
    city: wanted("address.city.missing", "address.city.long"),
    region: optional("address.region.long"),
    postcode: optional("address.postcode.long", 16),
    country,
  })
  .check((context) => {
    const { value } = context;
    const complain = (path: "region" | "postcode", message: AddressProblem) =>
      context.issues.push({ code: "custom", input: value[path], path: [path], message });
    const hasIssue = (path: string) => context.issues.some((issue) => issue.path?.[0] === path);
    if (needsRegion(value.country) && value.region === undefined)
      complain("region", "address.region.missing");
    if (value.postcode === undefined) {
      if (needsPostcode(value.country)) complain("postcode", "address.postcode.missing");
    } else if (!hasIssue("postcode") && writePostcode(value.country, value.postcode) === null) {
      complain("postcode", "address.postcode.wrong");
    }
  })
  .transform(({ line2, region, postcode, ...rest }): Address => {
    const written = postcode === undefined ? null : writePostcode(rest.country, postcode);
    return {
      ...rest,
      ...(line2 === undefined ? {} : { line2 }),
      ...(region === undefined ? {} : { region }),
      ...(written === null ? {} : { postcode: written }),
    };
  });

/** A postal address. `country` is an ISO 3166-1 alpha-2 code. */
export type Address = {
  name: string;
  line1: string;
  line2?: string;
  city: string;
  region?: string;
  postcode?: string;
  country: string;
};

/** Whether two postcodes are one, whatever their case, spaces and hyphens: for asking a buyer for the one of their order. */
export function isSamePostcode(a: string, b: string): boolean {
  const plain = (text: string) => text.toUpperCase().replace(/[^\p{L}\p{N}]/gu, "");
  return plain(a) !== "" && plain(a) === plain(b);
}
