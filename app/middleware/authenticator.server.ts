import { Authenticator } from "remix-auth";
import { FormStrategy } from "remix-auth-form";
import { signInForm } from "~/domain/people/account-forms";
import { type SignInOutcome, signIn } from "~/domain/people/sign-in.server";
import { parseForm } from "~/platform/forms.server";

/** Finds out who somebody is. The form strategy takes `email` and `password`; others (passkeys) would stand beside it. */
export const authenticator = new Authenticator<SignInOutcome>();

authenticator.use(
  new FormStrategy(async ({ form }) => {
    const parsed = await parseForm(form, signInForm);
    if (!parsed.ok) return { code: "wrong" };
    return signIn(parsed.value.email, parsed.value.password);
  }),
  "form",
);
