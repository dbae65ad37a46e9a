import { data } from "react-router";
import type { z } from "zod";
import type { Language } from "~/languages/language";
import { messagesOf } from "~/languages/messages";
import { AppError } from "./errors";
import type { Answers, FieldErrors, FormProblem } from "./form-fields";

/** Far more than any form of ours sends; files never come through the web server. */
const MOST_BYTES = 512 * 1024;
const MOST_FIELDS = 2_000;
const LARGEST_INDEX = 999;

/** Never sent back to the browser. */
const SECRET = /password/i;

export type ParsedForm<T> =
  | { ok: true; value: T; answers: Answers }
  | { ok: false; errors: FieldErrors; answers: Answers };

export type ParseOptions = {
  /** Language of the sentences that are not the schema's own; English unless given. */
  language?: Language;
  /** Sentences by key: a schema whose message is `emailMissing` is answered with `words.emailMissing`. */
  words?: Record<string, string>;
};

/**
 * Reads a form and checks it: the one parse helper of every action.
 *
 * Names may say where a value belongs: `address.line1`, `steps[2].amount`. A name sent more than once becomes a list
 * (see `many` in `form-fields.ts`). Text is trimmed, except passwords, and line breaks become "\n"; the answers are
 * kept as typed, without passwords and files. Errors carry the same names as the fields.
 *
 * ```ts
 * const form = await parseForm(request, signUpForm, { language, words: messages.account.problems });
 * if (!form.ok) return formProblem(form);
 * const outcome = await signUp(form.value);
 * if (outcome.code === "taken") return formProblem(form, { email: [words.taken] });
 * throw redirect(...);
 * ```
 *
 * Throws AppError `bad_request` for a body that is no form or is beyond any size of ours.
 */
export async function parseForm<S extends z.ZodType>(
  from: Request | FormData,
  schema: S,
  options: ParseOptions = {},
): Promise<ParsedForm<z.output<S>>> {
  const form = from instanceof FormData ? from : await readForm(from);
  const { answers, input, typedNames } = take(form);
  const { errors: words } = messagesOf(options.language ?? "en");
  const result = await schema.safeParseAsync(input, {
    error: (issue) =>
      issue.input === undefined || issue.input === "" ? words.answerMissing : words.answerWrong,
  });
  if (result.success) return { ok: true, value: result.data, answers };
  const errors: FieldErrors = {};
  for (const issue of result.error.issues) {
    const path = nameOf(issue.path);
    const name = typedNames.get(path) ?? path;
    const sentence =
      options.words !== undefined && Object.hasOwn(options.words, issue.message)
        ? (options.words[issue.message] ?? issue.message)
        : issue.message;
    const list = errors[name] ?? [];
    errors[name] = list.includes(sentence) ? list : [...list, sentence];
  }
  return { ok: false, errors, answers };
}

/**
 * The answer to a form that was not taken: status 400, what is wrong, and what was typed. For a form that was well
 * filled in but refused by the command, give the errors: `formProblem(form, { email: ["…"] })`. An error that belongs
 * to no field has the name `form`.
 */
export function formProblem(
  parsed: { answers: Answers; errors?: FieldErrors },
  errors: FieldErrors = parsed.errors ?? {},
  status = 400,
) {
  const problem: FormProblem = { errors, answers: parsed.answers };
  return data({ problem }, { status });
}

/** Reads a form's body within our bounds. Throws AppError `bad_request`. */
export async function readForm(request: Request): Promise<FormData> {
  if (Number(request.headers.get("content-length") ?? 0) > MOST_BYTES) {
    throw new AppError("bad_request", "the form is too large");
  }
  try {
    return await request.formData();
  } catch (cause) {
    throw new AppError("bad_request", "the body is not a form", { cause });
  }
}

/** `typedNames` leads from a value's place in `input` to the name of its field. */
function take(form: FormData): { answers: Answers; input: unknown; typedNames: Map<string, string> } {
  const answers: Answers = {};
  const values = new Map<string, unknown>();
  let fields = 0;
  for (const name of new Set(form.keys())) {
    const all = form.getAll(name);
    fields += all.length;
    if (fields > MOST_FIELDS) throw new AppError("bad_request", "the form has too many fields");
    const texts = all.filter((value) => typeof value === "string");
    if (texts.length < all.length) {
      values.set(name, all.length === 1 ? all[0] : all);
      continue;
    }
    if (!SECRET.test(name)) answers[name] = texts.length === 1 ? (texts[0] ?? "") : texts;
    const clean = texts.map((text) => (SECRET.test(name) ? text : text.replace(/\r\n?/g, "\n").trim()));
    values.set(name, clean.length === 1 ? clean[0] : clean);
  }
  const typedNames = new Map<string, string>();
  return { answers, input: nested(values, typedNames), typedNames };
}

/** A tree whose branches have no prototype, so that no field name can reach one. */
type Branch = { [name: string]: unknown };
const newBranch = (): Branch => Object.create(null);

function nested(values: Map<string, unknown>, typedNames: Map<string, string>): unknown {
  const root = newBranch();
  for (const [name, value] of values) {
    const path = pathOf(name);
    let branch = root;
    for (const part of path.slice(0, -1)) {
      const next = branch[part];
      if (isBranch(next)) {
        branch = next;
      } else {
        const made = newBranch();
        branch[part] = made;
        branch = made;
      }
    }
    branch[path[path.length - 1] ?? name] = value;
  }
  return withLists(root, [], [], typedNames);
}

function isBranch(value: unknown): value is Branch {
  return typeof value === "object" && value !== null && Object.getPrototypeOf(value) === null;
}

/** Branches whose names are all indices are lists; gaps (a removed row) close up. */
function withLists(
  value: unknown,
  typed: readonly string[],
  place: readonly PropertyKey[],
  typedNames: Map<string, string>,
): unknown {
  if (typed.length > 0) typedNames.set(nameOf(place), typed.join(".").replaceAll(".[", "["));
  if (!isBranch(value)) return value;
  const entries = Object.entries(value);
  if (entries.length > 0 && entries.every(([key]) => /^\[\d+\]$/.test(key))) {
    return entries
      .sort(([a], [b]) => Number(a.slice(1, -1)) - Number(b.slice(1, -1)))
      .map(([key, inner], at) => withLists(inner, [...typed, key], [...place, at], typedNames));
  }
  return Object.fromEntries(
    entries.map(([key, inner]) => [key, withLists(inner, [...typed, key], [...place, key], typedNames)]),
  );
}

/** "steps[2].amount" is "steps", "[2]", "amount". */
function pathOf(name: string): string[] {
  const parts = name.split(".").flatMap((part) => {
    const match = /^([^[\]]+)((?:\[\d+\])*)$/.exec(part);
    if (match === null) return [part];
    return [match[1] ?? part, ...(match[2]?.match(/\[\d+\]/g) ?? [])];
  });
  const beyond = parts.some((part) => /^\[\d+\]$/.test(part) && Number(part.slice(1, -1)) > LARGEST_INDEX);
  if (beyond || parts.length > 8) throw new AppError("bad_request", "a field's name is out of bounds");
  return parts;
}

function nameOf(path: readonly PropertyKey[]): string {
  if (path.length === 0) return "form";
  return path.reduce<string>(
    (name, part) =>
      typeof part === "number" ? `${name}[${part}]` : name === "" ? String(part) : `${name}.${String(part)}`,
    "",
  );
}
