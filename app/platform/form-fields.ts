import { z } from "zod";

/**
 * Building blocks of form schemas, in the browser as on the server. A message is either a sentence or the key of
 * one in the words given to `parseForm` (see `forms.server.ts`): schemas of the shop use keys, so that one schema serves
 * every language.
 */

/** What is wrong with a form, by field name ("email", "address.line1", "steps[2].amount"). */
export type FieldErrors = Record<string, string[] | undefined>;

/** What was typed, by field name, to be shown again. Never holds a password or a file. */
export type Answers = Record<string, string | string[]>;

/** What an action answers when a form was not taken. */
export type FormProblem = { errors: FieldErrors; answers: Answers };

/** One line that must be filled in, at most `max` characters. */
export function line(message: string, max = 200, tooLong = message) {
  return z.string(message).min(1, message).max(max, tooLong);
}

/** Text that may be left out; "" when it is. */
export function optionalText(max = 2000, tooLong?: string) {
  return z.string().max(max, tooLong).default("");
}

/** A box that is ticked or not; an unticked one sends nothing. */
export function ticked() {
  return z
    .string()
    .optional()
    .transform((value) => value !== undefined && value !== "");
}

/** A field that may be sent any number of times (several boxes of one name). */
export function many<S extends z.ZodType>(inner: S, max = 1000) {
  return z.preprocess(
    (value) => (value === undefined ? [] : Array.isArray(value) ? value : [value]),
    z.array(inner).max(max),
  );
}

/** A whole number written in figures. */
export function wholeNumber(message: string, min: number, max: number) {
  return z
    .string(message)
    .regex(/^\d{1,15}$/, message)
    .transform(Number)
    .refine((value) => value >= min && value <= max, message);
}

/** An e-mail address, as typed but without the space around it; at most 254 characters (RFC 5321, 4.5.3.1.3). */
export function emailAddress(message: string) {
  return z.string(message).min(1, message).max(254, message).pipe(z.email(message));
}
