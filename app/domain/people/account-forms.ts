import { z } from "zod";
import { emailAddress, line, optionalText } from "~/platform/form-fields";
import { ROLES } from "./permissions";

/*
 * The forms of accounts. Messages are keys of `account.problems` in the languages.
 */

/**
 * Shortest password (characters). NIST SP 800-63B (revision 4), section 3.1.1.2, asks for 15 where a password is the
 * only factor; 12 here, with attempts limited, is a choice of this shop.
 */
export const SHORTEST_PASSWORD = 12;
const LONGEST_PASSWORD = 200;

/** A password that is being chosen. */
export const newPassword = z
  .string("passwordMissing")
  .min(1, "passwordMissing")
  .min(SHORTEST_PASSWORD, "passwordShort")
  .max(LONGEST_PASSWORD, "passwordLong")
  .refine((text) => new Set(text).size >= 5, "passwordPlain");

/** Long enough for any password there is; a longer one is wrong in any case and not worth hashing. */
const password = z.string("passwordMissing").min(1, "passwordMissing").max(LONGEST_PASSWORD, "passwordLong");

const next = z.string().max(2_000).optional();

export const signInForm = z.object({
  email: emailAddress("emailWrong"),
  password,
  next,
  /** JSON of a form that is carried through signing in. */
  held: z.string().max(400_000).optional(),
});

export const signUpForm = z.object({
  name: line("nameMissing", 120, "nameLong"),
  email: emailAddress("emailWrong"),
  newPassword,
});

export const forgottenForm = z.object({ email: emailAddress("emailWrong") });
export const resetForm = z.object({ newPassword });
/** The password is asked of whoever is not signed in. */
export const verifyForm = z.object({ password: password.optional() });
export const acceptInvitationForm = z.object({ name: line("nameMissing", 120, "nameLong"), newPassword });

export const nameForm = z.object({ name: line("nameMissing", 120, "nameLong") });
export const emailForm = z.object({ email: emailAddress("emailWrong"), password });
export const passwordForm = z.object({ password, newPassword });

/** English sentences: the studio's pages have no other language. */
export const inviteForm = z.object({
  name: line("Please write the name of the person you invite.", 120),
  email: emailAddress("Please write an e-mail address like name@place.example."),
  role: z.enum(ROLES, "Please choose what they are to be."),
});

export const partyForm = z.object({
  kind: z.enum(["person", "firm"], "Please choose whether this is a person or a firm."),
  name: line("Please write a name.", 120),
  email: z.union([z.literal(""), emailAddress("Please write an e-mail address like name@place.example.")]),
  telephone: optionalText(40, "A telephone number has at most 40 characters."),
  notes: optionalText(5_000, "Please keep the notes to 5,000 characters."),
});
