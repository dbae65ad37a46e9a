/**
 * Money: whole minor units (pence, cents, yen ...) with an ISO 4217 currency.
 *
 * Nothing in this file, and nothing that uses it, holds money in a binary fraction: sums are safe integers, and
 * whatever multiplies or divides goes through BigInt and is rounded once.
 */

const TWO_DECIMALS = [
  "AED AFN ALL AMD AOA ARS AUD AWG AZN BAM BBD BDT BGN BMD BND BOB BOV BRL BSD BTN BWP BYN BZD CAD CDF CHE CHF CHW",
  "CNY COP COU CRC CUP CVE CZK DKK DOP DZD EGP ERN ETB EUR FJD FKP GBP GEL GHS GIP GMD GTQ GYD HKD HNL HTG HUF IDR",
  "ILS INR IRR JMD KES KGS KHR KPW KYD KZT LAK LBP LKR LRD LSL MAD MDL MGA MKD MMK MNT MOP MRU MUR MVR MWK MXN MXV",
  "MYR MZN NAD NGN NIO NOK NPR NZD PAB PEN PGK PHP PKR PLN QAR RON RSD RUB SAR SBD SCR SDG SEK SGD SHP SLE SOS SRD",
  "SSP STN SVC SYP SZL THB TJS TMT TOP TRY TTD TWD TZS UAH USD USN UYU UZS VED VES WST XCD XCG YER ZAR ZMW ZWG",
] as const;
const NO_DECIMALS = ["BIF CLP DJF GNF ISK JPY KMF KRW PYG RWF UGX UYI VND VUV XAF XOF XPF"] as const;
const THREE_DECIMALS = ["BHD IQD JOD KWD LYD OMR TND"] as const;
const FOUR_DECIMALS = ["CLF UYW"] as const;

type Words<Text extends string> = Text extends `${infer First} ${infer Rest}` ? First | Words<Rest> : Text;

/** An ISO 4217 code that has a minor unit. Metals and units of account (XAU, XDR ...) have none and are not money here. */
export type CurrencyCode =
  | Words<(typeof TWO_DECIMALS)[number]>
  | Words<(typeof NO_DECIMALS)[number]>
  | Words<(typeof THREE_DECIMALS)[number]>
  | Words<(typeof FOUR_DECIMALS)[number]>;

const EXPONENTS: ReadonlyMap<string, number> = new Map(
  [
    { rows: NO_DECIMALS, exponent: 0 },
    { rows: TWO_DECIMALS, exponent: 2 },
    { rows: THREE_DECIMALS, exponent: 3 },
    { rows: FOUR_DECIMALS, exponent: 4 },
  ].flatMap(({ rows, exponent }) =>
    rows.flatMap((row) => row.split(" ").map((code) => [code, exponent] as const)),
  ),
);

/** An amount in whole minor units of one currency: `{ amount: 12050, currency: "GBP" }` is £120.50. */
export type Money = { readonly amount: number; readonly currency: CurrencyCode };

/** Two currencies met in one sum, or a code that ISO 4217 does not give a minor unit: always a mistake in the program. */
export class CurrencyError extends Error {
  override readonly name = "CurrencyError";
}

/** Whether a text is a currency this product can count in. Upper case only, as ISO 4217 writes them. */
export function isCurrencyCode(text: string): text is CurrencyCode {
  return EXPONENTS.has(text);
}

/** The text as a currency code. Throws CurrencyError for an unknown one. */
export function currencyCode(text: string): CurrencyCode {
  if (!isCurrencyCode(text))
    throw new CurrencyError(`"${text}" is not an ISO 4217 currency with a minor unit.`);
  return text;
}

/** Every currency code that can be chosen, in alphabetical order. */
export function currencyCodes(): CurrencyCode[] {
  return [...EXPONENTS.keys()].filter(isCurrencyCode).sort();
}

/**
 * How many decimals a currency has: GBP 2, JPY 0, KWD 3, CLF 4.
 * Throws CurrencyError for a code that is unknown or has no minor unit (XAU).
 *
 * Source: ISO 4217 table A.1. It differs from CLDR, which many runtimes use to display (LAK, IRR, HUF ...), so the
 * runtime's own digits are never used.
 */
export function minorUnits(currency: string): number {
  const exponent = EXPONENTS.get(currency);
  if (exponent === undefined) {
    throw new CurrencyError(`"${currency}" is not an ISO 4217 currency with a minor unit.`);
  }
  return exponent;
}

/** An amount of whole minor units. Throws RangeError for a fraction or an amount past 2^53 - 1, CurrencyError for a bad code. */
export function money(amount: number, currency: CurrencyCode): Money {
  if (!Number.isSafeInteger(amount)) {
    throw new RangeError(`${amount} is not a whole number of minor units that can be counted exactly.`);
  }
  minorUnits(currency);
  return { amount: amount === 0 ? 0 : amount, currency };
}

/** Nothing, in a currency. */
export function zero(currency: CurrencyCode): Money {
  return money(0, currency);
}

function sameCurrency(a: Money, b: Money): CurrencyCode {
  if (a.currency !== b.currency) {
    throw new CurrencyError(`${a.currency} and ${b.currency} cannot be put together in one sum.`);
  }
  return a.currency;
}

/** a + b. Throws CurrencyError when the currencies differ, RangeError when the sum is past what can be counted. */
export function add(a: Money, b: Money): Money {
  return money(a.amount + b.amount, sameCurrency(a, b));
}

/** a - b. Throws as `add`. */
export function subtract(a: Money, b: Money): Money {
  return money(a.amount - b.amount, sameCurrency(a, b));
}

/** The same amount the other way round, as a credit shows it. */
export function negate(a: Money): Money {
  return money(-a.amount, a.currency);
}

/** The sum of a list; of an empty list, nothing in the given currency. Throws as `add`. */
export function sum(currency: CurrencyCode, amounts: readonly Money[]): Money {
  return amounts.reduce(add, zero(currency));
}

/** Below zero when a is less than b, above when it is more. Throws CurrencyError when the currencies differ. */
export function compare(a: Money, b: Money): number {
  sameCurrency(a, b);
  return a.amount - b.amount;
}

/**
 * numerator / denominator as a whole number, ties away from zero ("half-up" on the amount itself, so that a credit
 * rounds as the sale did). Throws RangeError when the denominator is 0.
 */
export function divideHalfUp(numerator: bigint, denominator: bigint): bigint {
  if (denominator === 0n) throw new RangeError("A ratio cannot have the denominator 0.");
  const negative = numerator < 0n !== denominator < 0n;
  const top = numerator < 0n ? -numerator : numerator;
  const bottom = denominator < 0n ? -denominator : denominator;
  const rounded = (top * 2n + bottom) / (bottom * 2n);
  return negative ? -rounded : rounded;
}

/**
 * The amount times numerator / denominator, rounded once, half-up (ties away from zero).
 * Both are whole numbers: 17.5 % is `multiplyRatio(price, 175, 1000)`. Throws RangeError when one is not, when the
 * denominator is 0, or when the result is past what can be counted.
 */
export function multiplyRatio(a: Money, numerator: number | bigint, denominator: number | bigint): Money {
  const rounded = divideHalfUp(BigInt(a.amount) * BigInt(numerator), BigInt(denominator));
  return money(Number(rounded), a.currency);
}

/**
 * Splits an amount by weights so that the parts add up to it exactly: each part is its share cut to whole minor units,
 * and what is left over goes, one unit each, to the largest remainders (the earlier part first where they are equal).
 * Weights are whole numbers of 0 or more, at least one above 0; a weight of 0 gets nothing. A negative amount is split
 * as its opposite. Throws RangeError for other weights.
 */
export function allocate(a: Money, weights: readonly number[]): Money[] {
  if (weights.some((weight) => !Number.isSafeInteger(weight) || weight < 0)) {
    throw new RangeError("Weights are whole numbers of 0 or more.");
  }
  const shares = weights.map((weight) => BigInt(weight));
  const total = shares.reduce((all, share) => all + share, 0n);
  if (total === 0n) throw new RangeError("At least one weight must be above 0.");

  const sign = a.amount < 0 ? -1n : 1n;
  const whole = BigInt(a.amount) * sign;
  const parts = shares.map((share, index) => ({
    index,
    units: (whole * share) / total,
    remainder: (whole * share) % total,
  }));
  let left = whole - parts.reduce((all, part) => all + part.units, 0n);
  const byRemainder = [...parts].sort((p, q) =>
    p.remainder === q.remainder ? p.index - q.index : p.remainder > q.remainder ? -1 : 1,
  );
  for (const part of byRemainder) {
    if (left === 0n) break;
    part.units += 1n;
    left -= 1n;
  }
  return parts.map((part) => money(Number(part.units * sign), a.currency));
}

function isNumeric(text: string): text is Intl.StringNumericLiteral {
  return /^-?\d+(\.\d+)?$/.test(text);
}

/** The amount as a plain decimal with a point, as data formats want it: "12950.00", "-0.05", "12000" (JPY). Exact. */
export function decimalText(a: Money): string {
  const exponent = minorUnits(a.currency);
  const digits = String(Math.abs(a.amount)).padStart(exponent + 1, "0");
  const whole = exponent === 0 ? digits : `${digits.slice(0, -exponent)}.${digits.slice(-exponent)}`;
  return a.amount < 0 ? `-${whole}` : whole;
}

/** Making a formatter costs far more than using it, and a page shows dozens of prices. */
const formatters = new Map<string, Intl.NumberFormat>();

function formatterFor(currency: CurrencyCode, languageTag: string): Intl.NumberFormat {
  const key = `${languageTag} ${currency}`;
  const known = formatters.get(key);
  if (known !== undefined) return known;
  const exponent = minorUnits(currency);
  const made = new Intl.NumberFormat(languageTag, {
    style: "currency",
    currency,
    minimumFractionDigits: exponent,
    maximumFractionDigits: exponent,
  });
  formatters.set(key, made);
  return made;
}

/**
 * The amount as a reader of a language writes it, with the currency and all its ISO 4217 decimals: "£12,950.00",
 * "12.950,00 €", "¥12,000". The language is a BCP 47 tag of the shop's own. Exact for every amount.
 */
export function formatMoney(a: Money, languageTag: string): string {
  const text = decimalText(a);
  if (!isNumeric(text)) throw new RangeError(`${text} is not a decimal.`);
  return formatterFor(a.currency, languageTag).format(text);
}

/** Why a text was not taken as an amount. The words belong to the caller, who knows the reader's language. */
export type MoneyProblem = "empty" | "not_an_amount" | "other_currency" | "too_many_decimals" | "too_large";

export type ParsedMoney =
  | { readonly ok: true; readonly money: Money }
  | { readonly ok: false; readonly problem: MoneyProblem };

/** Longer than the largest amount with its marks and a currency's name in any language. */
const LONGEST_TEXT = 60;

const SPACES = /[\s\u00a0\u202f\u2009]/g;

/** A language's own marks; every kind of space, and every apostrophe, count as one. */
function marksOf(languageTag: string): { decimal: string; group: string } {
  const parts = new Intl.NumberFormat(languageTag, {
    useGrouping: true,
    minimumFractionDigits: 1,
  }).formatToParts(1234567.5);
  const mark = (type: string, otherwise: string) =>
    plainMark(parts.find((part) => part.type === type)?.value ?? otherwise);
  return { decimal: mark("decimal", "."), group: mark("group", ",") };
}

function plainMark(text: string): string {
  return text.replace(SPACES, " ").replace(/[\u2019\u02bc]/g, "'");
}

function namesOf(currency: CurrencyCode, languageTag: string): string[] {
  const display = (tag: string, currencyDisplay: "symbol" | "narrowSymbol") =>
    new Intl.NumberFormat(tag, { style: "currency", currency, currencyDisplay })
      .formatToParts(1)
      .find((part) => part.type === "currency")?.value ?? currency;
  return [
    currency,
    display(languageTag, "symbol"),
    display(languageTag, "narrowSymbol"),
    display("en", "symbol"),
  ].map((name) => name.toUpperCase());
}

/**
 * An amount typed by a person, read by the marks of their language: "1,234.50" in English and "1.234,50" in German are
 * both 123450 minor units of EUR. The currency's code or sign may stand before or after it. Thousands may be marked, but then
 * rightly (groups of three; where the language itself writes groups of two, those). Nothing is rounded or guessed: more
 * decimals than the currency has, even zeros, are refused, since "1.500" means two things in two languages.
 */
export function parseMoney(text: string, currency: CurrencyCode, languageTag = "en"): ParsedMoney {
  const refuse = (problem: MoneyProblem): ParsedMoney => ({ ok: false, problem });
  const exponent = minorUnits(currency);
  const cleaned = plainMark(text.replace(/[\u200e\u200f\u061c]/g, ""))
    .replace(/\u2212/g, "-")
    .trim();
  if (cleaned === "") return refuse("empty");

  if (cleaned.length > LONGEST_TEXT) return refuse("not_an_amount");
  const shape = /^(-?)([^\d\-.,']*)(-?)([\d.,' ]*\d)([^\d\-.,']*)$/.exec(cleaned);
  if (shape === null) return refuse("not_an_amount");
  const [, signBefore = "", nameBefore = "", signAfter = "", digits = "", nameAfter = ""] = shape;
  const names = [nameBefore, nameAfter].map((name) => name.trim()).filter((name) => name !== "");
  if (names.length > 1 || (signBefore !== "" && signAfter !== "")) return refuse("not_an_amount");
  const [name] = names;
  if (name !== undefined && !namesOf(currency, languageTag).includes(name.toUpperCase())) {
    return refuse(
      isCurrencyCode(name.toUpperCase()) || /\p{Sc}/u.test(name) ? "other_currency" : "not_an_amount",
    );
  }

  const { decimal, group } = marksOf(languageTag);
  const pieces = digits.split(decimal);
  if (pieces.length > 2) return refuse("not_an_amount");
  const [wholeText = "", decimals] = pieces;
  if (decimals !== undefined && !/^\d+$/.test(decimals)) return refuse("not_an_amount");
  const whole = wholeText === "" && decimals !== undefined ? "0" : wholeDigits(wholeText, group, languageTag);
  if (whole === null) return refuse("not_an_amount");
  if (decimals !== undefined && decimals.length > exponent) return refuse("too_many_decimals");

  const amount = Number(BigInt(whole + (decimals ?? "").padEnd(exponent, "0")));
  if (!Number.isSafeInteger(amount)) return refuse("too_large");
  const negative = signBefore !== "" || signAfter !== "";
  return { ok: true, money: money(negative ? -amount : amount, currency) };
}

/** The digits of the part before the decimal mark, or null when its groups are not the language's own. */
function wholeDigits(text: string, group: string, languageTag: string): string | null {
  if (/^\d+$/.test(text)) return text;
  const groups = text.split(group);
  if (groups.some((part) => !/^\d+$/.test(part))) return null;
  const digits = groups.join("");
  const expected = plainMark(
    new Intl.NumberFormat(languageTag, { useGrouping: "always" }).format(BigInt(digits)),
  );
  // A leading zero ("0,150") is never how a grouped number is written, and is most often a decimal in another language.
  if (expected === text) return digits;
  return digits.startsWith("0") || !isGroupedByThree(groups) || !isGroupedByThree(expected.split(group))
    ? null
    : digits;
}

function isGroupedByThree(groups: readonly string[]): boolean {
  const [first = "", ...rest] = groups;
  return first.length <= 3 && rest.every((part) => part.length === 3);
}
