import { useParams } from "react-router";
import { de } from "./de";
import { en, type Messages } from "./en";
import { LANGUAGE_TAG, type Language, languageOfSegment } from "./language";

const ALL: Record<Language, Messages> = { en, de };

/** All words of a language, by area: `messagesOf("de").shop.prints`. */
export function messagesOf(language: Language): Messages {
  return ALL[language];
}

/** The language of the page's address; English outside the shop. */
export function useLanguage(): Language {
  return languageOfSegment(useParams().lang) ?? "en";
}

export function useMessages(): Messages {
  return messagesOf(useLanguage());
}

/** Puts values into a sentence: `fill("{n} of {limit} left", { n: 3, limit: 25 })`. Unknown names stay visible. */
export function fill(sentence: string, values: Record<string, string | number>): string {
  return sentence.replace(/\{(\w+)\}/g, (whole, name: string) => {
    const value = values[name];
    return value === undefined ? whole : String(value);
  });
}

/** A sentence that depends on a count. */
export type Plural = { one: string; other: string };

/** Chooses by the language's plural rules and fills `{n}` (formatted) and further values. */
export function count(
  language: Language,
  forms: Plural,
  n: number,
  values: Record<string, string | number> = {},
): string {
  const tag = LANGUAGE_TAG[language];
  const form = new Intl.PluralRules(tag).select(n) === "one" ? forms.one : forms.other;
  return fill(form, { n: new Intl.NumberFormat(tag).format(n), ...values });
}
