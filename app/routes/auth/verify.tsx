import { data, Form, href, Link, redirect } from "react-router";
import { NarrowSheet } from "~/components/account/narrow-sheet";
import { Field } from "~/components/form/field";
import { formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { useBusy } from "~/components/form/use-busy";
import { Press } from "~/components/ui/press";
import { languageContext, requestInfoContext, visitorContext } from "~/context";
import { verifyForm } from "~/domain/people/account-forms";
import { findToken } from "~/domain/people/tokens.server";
import { verifyEmail } from "~/domain/people/verify-email.server";
import { fill, messagesOf, useMessages } from "~/languages/messages";
import { limitOrWait } from "~/middleware/rate-limit.server";
import { secretPageMiddleware } from "~/middleware/secret-page.server";
import { signedInCookie } from "~/middleware/session.server";
import { formProblem, parseForm } from "~/platform/forms.server";
import type { Route } from "./+types/verify";

export const handle = { still: true };

export const middleware: Route.MiddlewareFunction[] = [secretPageMiddleware];

export async function loader({ context, params }: Route.LoaderArgs) {
  const holder = await findToken("verify_email", params.token);
  if (holder === null) return data(null, { status: 410 });
  const signedIn = context.get(visitorContext)?.accountId === holder.accountId;
  return data({ email: holder.email, name: holder.name, signedIn });
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const language = context.get(languageContext);
  const words = messagesOf(language).account;
  const visitor = context.get(visitorContext);
  const form = await parseForm(request, verifyForm, { language, words: words.problems });
  if (!form.ok) return formProblem(form);
  const limit = await limitOrWait(
    "sign_in",
    [context.get(requestInfoContext).clientIp, params.token],
    language,
  );
  if (!limit.ok) return limit.problem(form);
  const outcome = await verifyEmail(params.token, {
    accountId: visitor?.accountId ?? null,
    password: form.value.password,
  });
  if (outcome.code === "wrong_password") return formProblem(form, { password: [words.verify.wrongPassword] });
  await limit.giveBack();
  if (outcome.code === "gone") throw redirect(href("/:lang?/verify/:token", params));
  throw redirect(href("/:lang?/account/orders", { lang: params.lang }), {
    headers: outcome.session === null ? {} : { "Set-Cookie": await signedInCookie(outcome.session.secret) },
  });
}

export function headers({ actionHeaders }: Route.HeadersArgs) {
  return actionHeaders;
}

export default function Verify({ loaderData, actionData, params: { lang } }: Route.ComponentProps) {
  const words = useMessages().account;
  const busy = useBusy();
  const form = formState(actionData?.problem, {}, { form: "password" });
  if (loaderData === null) {
    return (
      <NarrowSheet title={words.verify.goneTitle}>
        <p>{words.verify.goneText}</p>
        <p>
          <Link to={href("/:lang?/sign-in", { lang })}>{words.signIn.title}</Link>
        </p>
      </NarrowSheet>
    );
  }
  return (
    <NarrowSheet title={words.verify.title}>
      <p>{fill(words.verify.text, { email: loaderData.email, name: loaderData.name })}</p>
      {loaderData.signedIn ? null : <p>{words.verify.passwordText}</p>}
      <Problems form={form} />
      <Form method="post">
        {loaderData.signedIn ? null : (
          <div className="fields">
            <Field
              {...form.field("password")}
              label={words.password}
              type="password"
              autoComplete="current-password"
              required
            />
          </div>
        )}
        <p className="form-acts">
          <Press busy={busy}>{words.verify.press}</Press>
        </p>
      </Form>
      <p className="quiet">{words.verify.notMine}</p>
    </NarrowSheet>
  );
}
