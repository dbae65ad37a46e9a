import { z } from "zod";
import { addressSchema } from "~/domain/people/address";
import { emailAddress, line, optionalText } from "~/platform/form-fields";

/** Ways an order of the shop reaches its buyer. */
export const WAYS = ["delivery", "collection"] as const;
export type Way = (typeof WAYS)[number];

/** The way of travel named by an address or a form; delivery when it names none. */
export function wayOf(text: string | null | undefined): Way {
  return text === "collection" ? "collection" : "delivery";
}

/** What the sums of a page were worked out for, as its form carries it: a country, or that it is collected. */
export function reckonedFor(way: Way, country: string): string {
  return way === "collection" ? "collection" : country;
}

const MOST_LINES = 12;

const telephone = optionalText(40, "telephoneWrong").refine(
  (text) => text === "" || /^\+?[\d\s()/.-]{5,}$/.test(text),
  "telephoneWrong",
);

const orderLine = z.object({
  formatId: z.uuid("linesMissing"),
  /** The ladder price the page showed for the line, minor units. */
  seenAmount: z
    .string("linesMissing")
    .regex(/^\d{1,12}$/, "linesMissing")
    .transform(Number),
});

const common = {
  submissionKey: z.string("keyMissing").regex(/^[\w-]{16,64}$/, "keyMissing"),
  seenFor: z.string().max(20).default(""),
  lines: z.array(orderLine, "linesMissing").min(1, "linesMissing").max(MOST_LINES, "linesMissing"),
  email: emailAddress("emailWrong"),
  name: line("nameMissing", 100, "nameLong"),
  telephone,
  note: optionalText(1000, "noteLong"),
};

const byWay = z.discriminatedUnion("method", [
  z.object({ ...common, method: z.literal("delivery"), address: addressSchema }),
  z.object({ ...common, method: z.literal("collection") }),
]);

const loose = z.looseObject({
  method: z.unknown().optional(),
  name: z.unknown().optional(),
  address: z.looseObject({ name: z.unknown().optional() }).optional(),
});

/**
 * The checkout's form. The parcel carries the buyer's own name unless another is given, so that nobody writes it twice;
 * an address left from before choosing collection is not looked at. Messages are keys of `checkoutProblems`.
 */
export const checkoutForm = z.preprocess((input) => {
  const form = loose.safeParse(input);
  if (!form.success) return input;
  const { name, address } = form.data;
  const method = wayOf(typeof form.data.method === "string" ? form.data.method : null);
  const given = typeof address?.name === "string" ? address.name.trim() : "";
  // A missing name is said once, at the buyer's own field.
  const own = typeof name === "string" && name.trim() !== "" ? name : "-";
  return { ...form.data, method, address: { ...address, name: given === "" ? own : given } };
}, byWay);

export type CheckoutAnswers = z.output<typeof checkoutForm>;

/** A postcode given to see who bought an order. */
export const postcodeForm = z.object({ postcode: line("postcodeMissing", 16) });

/** A mistyped e-mail address put right. */
export const correctEmailForm = z.object({ email: emailAddress("emailWrong") });
