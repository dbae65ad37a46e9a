/** Countries by their ISO 3166-1 alpha-2 codes, and who belongs to which tax territory. Names come from the runtime. */

const CODES = [
  "AD AE AF AG AI AL AM AO AQ AR AS AT AU AW AX AZ BA BB BD BE BF BG BH BI BJ BL BM BN BO BQ BR BS BT BV BW BY BZ",
  "CA CC CD CF CG CH CI CK CL CM CN CO CR CU CV CW CX CY CZ DE DJ DK DM DO DZ EC EE EG EH ER ES ET FI FJ FK FM FO FR",
  "GA GB GD GE GF GG GH GI GL GM GN GP GQ GR GS GT GU GW GY HK HM HN HR HT HU ID IE IL IM IN IO IQ IR IS IT JE JM JO",
  "JP KE KG KH KI KM KN KP KR KW KY KZ LA LB LC LI LK LR LS LT LU LV LY MA MC MD ME MF MG MH MK ML MM MN MO MP MQ MR",
  "MS MT MU MV MW MX MY MZ NA NC NE NF NG NI NL NO NP NR NU NZ OM PA PE PF PG PH PK PL PM PN PR PS PT PW PY QA RE RO",
  "RS RU RW SA SB SC SD SE SG SH SI SJ SK SL SM SN SO SR SS ST SV SX SY SZ TC TD TF TG TH TJ TK TL TM TN TO TR TT TV",
  "TW TZ UA UG UM US UY UZ VA VC VE VG VI VN VU WF WS YE YT ZA ZM ZW",
];

/** The officially assigned ISO 3166-1 alpha-2 codes, in alphabetical order. From memory, counted against the standard's 249. */
export const COUNTRY_CODES: readonly string[] = CODES.flatMap((row) => row.split(" "));

const KNOWN = new Set(COUNTRY_CODES);

/** Whether a text is an assigned code, in upper case. */
export function isCountryCode(text: string): boolean {
  return KNOWN.has(text);
}

/**
 * The 27 member states of the European Union. Source: Treaty on European Union Art. 52, without the United Kingdom since
 * 1 February 2020; from memory. Their overseas parts have ISO codes of their own (GP, MQ, AX ...) and are not in the list.
 */
export const EU_MEMBERS: ReadonlySet<string> = new Set(
  "AT BE BG CY CZ DE DK EE ES FI FR GR HR HU IE IT LT LU LV MT NL PL PT RO SE SI SK".split(" "),
);

/** Whether a country is a member state of the European Union. */
export function isInEu(country: string): boolean {
  return EU_MEMBERS.has(country);
}

/** The country's name in a language ("Germany", "Deutschland"); the code itself where the runtime knows no name. */
export function countryName(code: string, languageTag: string): string {
  return isCountryCode(code)
    ? (new Intl.DisplayNames(languageTag, { type: "region", fallback: "code" }).of(code) ?? code)
    : code;
}

/** Every country with its name, in the order of the language. */
export function countriesByName(languageTag: string): { code: string; name: string }[] {
  const collator = new Intl.Collator(languageTag);
  return COUNTRY_CODES.map((code) => ({ code, name: countryName(code, languageTag) })).sort((a, b) =>
    collator.compare(a.name, b.name),
  );
}
