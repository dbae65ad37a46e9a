import { StorageError } from "./errors";

/**
 * Percent-encodes everything but the unreserved characters of RFC 3986 section 2.3, as UTF-8 with upper-case hex.
 * `encodeURIComponent` leaves five more characters alone; signatures and listings need those encoded too.
 */
export function encodeUri(text: string): string {
  return encodeURIComponent(text).replace(
    /[!'()*]/g,
    (character) => `%${character.charCodeAt(0).toString(16).toUpperCase()}`,
  );
}

/** The same, leaving `/` as it is: the form of a key in a path and in `encoding-type=url` listings. */
export function encodeUriPath(text: string): string {
  return text.split("/").map(encodeUri).join("/");
}

/**
 * Decodes percent-encoded UTF-8.
 * @throws StorageError InvalidURI when an escape is broken or the bytes are not UTF-8.
 */
export function decodeUri(text: string): string {
  try {
    return decodeURIComponent(text);
  } catch {
    throw new StorageError("InvalidURI", "The address holds an escape that is not percent-encoded UTF-8.");
  }
}
