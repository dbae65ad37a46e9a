/** The languages of the shop. English has no prefix in addresses; the others stand first: `/de/prints`. */
export const LANGUAGES = ["en", "de"] as const;
export type Language = (typeof LANGUAGES)[number];

/** Tags for `Intl` and the `lang` attribute. */
export const LANGUAGE_TAG: Record<Language, string> = { en: "en-GB", de: "de-DE" };

/** The language of an optional first segment: absent means English, unknown means none (a 404). */
export function languageOfSegment(segment: string | undefined): Language | null {
  if (segment === undefined) return "en";
  return segment !== "en" && isLanguage(segment) ? segment : null;
}

/** The address segment of a language, for `href("/:lang?/prints", { lang: segmentOf(language) })`. */
export function segmentOf(language: Language): string | undefined {
  return language === "en" ? undefined : language;
}

export function isLanguage(value: string): value is Language {
  return LANGUAGES.some((l) => l === value);
}
