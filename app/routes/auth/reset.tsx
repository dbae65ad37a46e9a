import { data, Form, href, Link, redirect } from "react-router";
import { NarrowSheet } from "~/components/account/narrow-sheet";
import { Field } from "~/components/form/field";
import { formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { useBusy } from "~/components/form/use-busy";
import { Press } from "~/components/ui/press";
import { languageContext } from "~/context";
import { resetForm, SHORTEST_PASSWORD } from "~/domain/people/account-forms";
import { firstPage } from "~/domain/people/next-path";
import { resetPassword } from "~/domain/people/reset-password.server";
import { rolesOf } from "~/domain/people/sign-in.server";
import { findToken } from "~/domain/people/tokens.server";
import { fill, messagesOf, useMessages } from "~/languages/messages";
import { secretPageMiddleware } from "~/middleware/secret-page.server";
import { signedInCookie } from "~/middleware/session.server";
import { formProblem, parseForm } from "~/platform/forms.server";
import type { Route } from "./+types/reset";

export const handle = { still: true };

export const middleware: Route.MiddlewareFunction[] = [secretPageMiddleware];

export async function loader({ params }: Route.LoaderArgs) {
  const holder = await findToken("reset_password", params.token);
  return data({ email: holder?.email ?? null }, { status: holder === null ? 410 : 200 });
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const language = context.get(languageContext);
  const form = await parseForm(request, resetForm, {
    language,
    words: messagesOf(language).account.problems,
  });
  if (!form.ok) return formProblem(form);
  const outcome = await resetPassword(params.token, form.value.newPassword);
  // The page itself says that the link no longer works.
  if (outcome.code === "gone") throw redirect(href("/:lang?/reset/:token", params));
  const roles = await rolesOf(outcome.accountId);
  throw redirect(firstPage(roles, params.lang), {
    headers: { "Set-Cookie": await signedInCookie(outcome.session.secret) },
  });
}

export default function Reset({ loaderData: { email }, actionData, params: { lang } }: Route.ComponentProps) {
  const words = useMessages().account;
  const busy = useBusy();
  const form = formState(actionData?.problem);
  if (email === null) {
    return (
      <NarrowSheet title={words.reset.goneTitle}>
        <p>{words.reset.goneText}</p>
        <p>
          <Link to={href("/:lang?/forgotten", { lang })}>{words.reset.again}</Link>
        </p>
      </NarrowSheet>
    );
  }
  return (
    <NarrowSheet title={words.reset.title}>
      <p>{fill(words.reset.text, { email })}</p>
      <Problems form={form} />
      <Form method="post">
        <input type="hidden" name="username" autoComplete="username" value={email} />
        <div className="fields">
          <Field
            {...form.field("newPassword")}
            label={words.newPassword}
            hint={words.newPasswordHint}
            type="password"
            autoComplete="new-password"
            minLength={SHORTEST_PASSWORD}
            required
          />
        </div>
        <p className="form-acts">
          <Press busy={busy}>{words.reset.press}</Press>
        </p>
      </Form>
    </NarrowSheet>
  );
}
