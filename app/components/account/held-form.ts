/**
 * A form that was sent after its session had ended. It travels through signing in inside the pages themselves
 * (nothing of it is kept on the server) and is sent again by one press.
 */
export type HeldForm = {
  /** Path and search it was sent to. */
  action: string;
  /** Names and values in their order; no passwords, no files. */
  fields: [name: string, value: string][];
  /** Whether something was left out that has to be given again. */
  incomplete: boolean;
};

/** The held form in an error's data or a hidden field's JSON, or null if there is none. */
export function heldFormIn(value: unknown): HeldForm | null {
  if (typeof value !== "object" || value === null) return null;
  const held = "held" in value ? value.held : value;
  if (typeof held !== "object" || held === null) return null;
  if (!("action" in held && "fields" in held && "incomplete" in held)) return null;
  const { action, fields, incomplete } = held;
  if (typeof action !== "string" || !Array.isArray(fields) || typeof incomplete !== "boolean") return null;
  const pairs = fields.filter(isPair);
  return pairs.length === fields.length ? { action, fields: pairs, incomplete } : null;
}

function isPair(value: unknown): value is [string, string] {
  return Array.isArray(value) && value.length === 2 && value.every((part) => typeof part === "string");
}

/** Reads what `JSON.stringify` made of a held form. */
export function heldFormFrom(text: string | undefined): HeldForm | null {
  if (text === undefined || text === "") return null;
  try {
    return heldFormIn(JSON.parse(text));
  } catch {
    return null;
  }
}
