import { z } from "zod";
import { addressSchema } from "~/domain/people/address";
import { isCountryCode } from "~/domain/people/countries";
import { emailAddress, line, optionalText } from "~/platform/form-fields";

/** The forms of an order's page in the studio, told apart by `intent`. */
export const orderPageForm = z.discriminatedUnion("intent", [
  z.object({
    intent: z.literal("send"),
    carrier: line("Say who carries it, for example the carrier's name, or “by hand”.", 80),
    reference: optionalText(80),
  }),
  z.object({
    intent: z.literal("cancel"),
    reason: line("Say why the order is cancelled; the book keeps the reason.", 300),
  }),
  z.object({
    intent: z.literal("money-came"),
    method: z.enum(["transfer", "cash"], "Choose how the money came."),
    reference: line("Give the bank's reference or the receipt's number.", 80),
  }),
  z.object({
    intent: z.literal("refunded-by-hand"),
    refundId: z.uuid(),
    reference: line("Give the reference of the transfer, or of the receipt.", 80),
  }),
  z.object({ intent: z.literal("note"), studioNote: optionalText(2_000) }),
  z.object({ intent: z.literal("looked-at") }),
]);

const chosen = z.string().regex(/^[0-9a-f-]{36}$/, "Choose an edition and its format.");
const emptyOr = <S extends z.ZodType>(inner: S) => z.union([z.literal("").transform(() => null), inner]);

/** An order made by hand. One line; a second copy is a second order, or the next line of it. */
export const orderByHandForm = z
  .object({
    submissionKey: z.string().min(8).max(64),
    lines: z
      .array(
        z.object({
          formatId: z.string().default(""),
          number: z.string().default(""),
          reduction: z.string().default(""),
          reason: optionalText(200),
        }),
      )
      .max(6)
      .transform((lines) => lines.filter((l) => l.formatId !== "")),
    partyId: emptyOr(chosen).default(null),
    name: optionalText(120),
    email: emptyOr(
      emailAddress("Write the e-mail address like name@place.example, or leave it empty."),
    ).default(null),
    telephone: optionalText(40),
    method: z.enum(["delivery", "collection", "handed_over"], "Choose how it reaches the buyer."),
    address: z
      .object({ country: z.string().refine(isCountryCode, "Choose a country.") })
      .catchall(z.string()),
    payment: z.enum(["pay_link", "transfer", "cash"], "Choose how it is paid."),
    days: z.string().default("7"),
    receipt: optionalText(80),
    studioNote: optionalText(2_000),
  })
  .superRefine((form, context) => {
    const problem = (path: (string | number)[], message: string) =>
      context.addIssue({ code: "custom", path, message });
    if (form.lines.length === 0) problem(["lines", 0, "formatId"], "Choose an edition and its format.");
    for (const [index, line] of form.lines.entries()) {
      if (line.number !== "" && !/^[1-9]\d{0,4}$/.test(line.number)) {
        problem(
          ["lines", index, "number"],
          "Write the number in figures, or leave it empty for the lowest free one.",
        );
      }
      if (line.reduction !== "" && line.reason.trim() === "") {
        problem(["lines", index, "reason"], "Say why the price is reduced; the book keeps the reason.");
      }
    }
    if (form.partyId === null && form.name === "")
      problem(["name"], "Choose somebody from the book, or write a name.");
    if (form.payment === "pay_link" && form.email === null && form.partyId === null) {
      problem(["email"], "A link to pay needs an e-mail address to be sent to.");
    }
    if (form.payment === "cash" && form.receipt === "") problem(["receipt"], "Give the receipt's number.");
    if (form.payment !== "cash" && !/^([1-9]|[1-8]\d|90)$/.test(form.days)) {
      problem(["days"], "Hold the numbers for 1 to 90 days.");
    }
  });

/** The delivery address of an order by hand, when it is sent. */
export const handAddress = addressSchema;
