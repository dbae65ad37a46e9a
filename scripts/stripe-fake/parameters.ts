import { z } from "zod";
import { badParameter } from "./faults";

/** What a form-encoded body or query becomes: text, lists and nested objects. */
export type Parameter = string | Parameter[] | { [name: string]: Parameter };
export type Parameters = { [name: string]: Parameter };

type Node = { text?: string; children?: Map<string, Node> };

function pathOf(name: string): string[] {
  const open = name.indexOf("[");
  if (open < 1) return [name];
  const steps = [...name.slice(open).matchAll(/\[([^\]]*)\]/g)].map((match) => match[1] ?? "");
  return [name.slice(0, open), ...steps];
}

function settle(node: Node): Parameter {
  if (!node.children) return node.text ?? "";
  const names = [...node.children.keys()];
  if (names.every((name) => /^\d+$/.test(name))) {
    return names.sort((a, b) => Number(a) - Number(b)).map((name) => settle(node.children?.get(name) ?? {}));
  }
  // A null prototype: a field called "__proto__" is then only a field.
  const object: Parameters = Object.create(null);
  for (const [name, child] of node.children) object[name] = settle(child);
  return object;
}

/**
 * Reads a form-encoded text whose names are nested with brackets: `a[b][0]=x`, `a[]=x`.
 * Later values replace earlier ones, except in lists written with `[]`.
 */
export function readParameters(encoded: string): Parameters {
  const root: Node = { children: new Map() };
  for (const [name, value] of new URLSearchParams(encoded)) {
    let node = root;
    for (const step of pathOf(name)) {
      node.children ??= new Map();
      const key = step === "" ? String(node.children.size) : step;
      let next = node.children.get(key);
      if (!next) {
        next = {};
        node.children.set(key, next);
      }
      node = next;
    }
    node.text = value;
  }
  const object: Parameters = Object.create(null);
  for (const [name, child] of root.children ?? []) object[name] = settle(child);
  return object;
}

function nameOf(path: readonly PropertyKey[]): string {
  return path.map((step, at) => (at === 0 ? String(step) : `[${String(step)}]`)).join("");
}

function valueAt(parameters: unknown, path: readonly PropertyKey[]): unknown {
  return path.reduce<unknown>(
    (value, step) => (value && typeof value === "object" ? Reflect.get(value, step) : undefined),
    parameters,
  );
}

/**
 * Checks parameters against a schema of form texts and returns what it makes of them.
 * The first mistake is thrown as Stripe's `invalid_request_error`, naming the parameter in brackets.
 */
export function checkParameters<Schema extends z.ZodType>(
  schema: Schema,
  parameters: Parameters,
): z.output<Schema> {
  const result = schema.safeParse(parameters);
  if (result.success) return result.data;
  const issue = result.error.issues[0];
  if (!issue) throw new Error("a failed check names no mistake");
  if (issue.code === "unrecognized_keys") {
    const name = nameOf([...issue.path, issue.keys[0] ?? ""]);
    throw badParameter(`This fake knows no parameter ${name} here.`, name, "parameter_unknown");
  }
  const name = nameOf(issue.path);
  if (valueAt(parameters, issue.path) === undefined) {
    throw badParameter(`The parameter ${name} is required.`, name, "parameter_missing");
  }
  const code =
    issue.code === "custom" && typeof issue.params?.code === "string" ? issue.params.code : undefined;
  throw badParameter(`${name}: ${issue.message}`, name, code);
}

/** A text that is not empty, at most `longest` characters. */
export const text = (longest: number) =>
  z
    .string()
    .refine((value) => value !== "", {
      error: "may not be empty",
      params: { code: "parameter_invalid_empty" },
    })
    .refine((value) => value.length <= longest, { error: `may have at most ${longest} characters` });

/** A whole number of at least `least`. */
export const whole = (least: number) =>
  z
    .string()
    .refine((value) => /^-?\d{1,15}$/.test(value) && Number(value) >= least, {
      error: `must be a whole number of at least ${least}`,
      params: { code: "parameter_invalid_integer" },
    })
    .transform(Number);

/** A time in whole seconds since 1970. */
export const instant = whole(0);

export const flag = z.enum(["true", "false"]).transform((value) => value === "true");

/** Only "switched off" is understood: what it would switch on is not part of this fake. */
export const off = z.strictObject({ enabled: z.literal("false") });

const CURRENCIES = new Set(Intl.supportedValuesOf("currency"));

export const currencyCode = z
  .string()
  .transform((value) => value.toLowerCase())
  .refine((value) => CURRENCIES.has(value.toUpperCase()), {
    error: "must be an ISO 4217 currency code",
  });

export const webAddress = z.string().refine(
  (value) => {
    try {
      return ["http:", "https:"].includes(new URL(value).protocol);
    } catch {
      return false;
    }
  },
  { error: "must be a whole http or https address", params: { code: "url_invalid" } },
);

export const mailAddress = z.string().refine((value) => /^[^\s@]+@[^\s@]+\.[^\s@]+$/.test(value), {
  error: "must be an e-mail address",
  params: { code: "email_invalid" },
});

/** Stripe's limits on metadata: 50 keys of 40 characters, values of 500. */
export const metadata = z.preprocess(
  // Keys that are all numbers were read as a list.
  (value) => (Array.isArray(value) ? { ...value } : value),
  z
    .record(z.string().max(40), z.string().max(500))
    .refine((value) => Object.keys(value).length <= 50, { error: "may have at most 50 keys" }),
);

const created = z.union([
  instant,
  z.strictObject({
    gt: instant.optional(),
    gte: instant.optional(),
    lt: instant.optional(),
    lte: instant.optional(),
  }),
]);

/** What every request may ask to be shown in full. */
export const expandable = { expand: z.array(z.string()).max(20).optional() };

/** What every list may be asked. */
export const paging = {
  ...expandable,
  limit: whole(1)
    .refine((value) => value <= 100, { error: "may be at most 100" })
    .optional(),
  starting_after: z.string().optional(),
  ending_before: z.string().optional(),
};

export const dated = { created: created.optional() };
export type Created = z.output<typeof created>;

/** Whether a time (seconds) lies where a `created` filter wants it. */
export function isWithin(seconds: number, filter: Created | undefined): boolean {
  if (filter === undefined) return true;
  if (typeof filter === "number") return seconds === filter;
  return (
    (filter.gt === undefined || seconds > filter.gt) &&
    (filter.gte === undefined || seconds >= filter.gte) &&
    (filter.lt === undefined || seconds < filter.lt) &&
    (filter.lte === undefined || seconds <= filter.lte)
  );
}
