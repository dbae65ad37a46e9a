import { AppError } from "./errors";

/** Whether a text from an address or a form can be an id at all; PostgreSQL would answer anything else with an error. */
export function isUuid(text: string | null | undefined): text is string {
  return (
    typeof text === "string" && /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i.test(text)
  );
}

/** The id in an address. Throws AppError `not_found` for a text that can be none. */
export function idFrom(text: string | null | undefined): string {
  if (!isUuid(text)) throw new AppError("not_found");
  return text;
}
