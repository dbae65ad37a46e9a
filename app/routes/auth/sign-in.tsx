import { data, href, Link, redirect } from "react-router";
import { heldFormFrom } from "~/components/account/held-form";
import { SendHeldForm } from "~/components/account/held-form-page";
import { NarrowSheet } from "~/components/account/narrow-sheet";
import { SignInForm } from "~/components/account/sign-in-form";
import { formState } from "~/components/form/form-state";
import { languageContext, requestInfoContext, visitorContext } from "~/context";
import { signInForm } from "~/domain/people/account-forms";
import { firstPage, safePath } from "~/domain/people/next-path";
import { messagesOf, useMessages } from "~/languages/messages";
import { authenticator } from "~/middleware/authenticator.server";
import { limitOrWait } from "~/middleware/rate-limit.server";
import { signedInCookie } from "~/middleware/session.server";
import { formProblem, parseForm } from "~/platform/forms.server";
import type { Route } from "./+types/sign-in";

export const handle = { still: true };

export function loader({ url, context, params }: Route.LoaderArgs) {
  const next = safePath(url.searchParams.get("next"));
  const visitor = context.get(visitorContext);
  if (visitor !== null) throw redirect(next ?? firstPage(visitor.roles, params.lang));
  return { next };
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const language = context.get(languageContext);
  const words = messagesOf(language).account;
  const form = await parseForm(request.clone(), signInForm, { language, words: words.problems });
  if (!form.ok) return formProblem(form);
  const limit = await limitOrWait(
    "sign_in",
    [context.get(requestInfoContext).clientIp, form.value.email],
    language,
  );
  if (!limit.ok) return limit.problem(form);
  const outcome = await authenticator.authenticate("form", request);
  if (outcome.code !== "signed_in") return formProblem(form, { form: [words.signIn[outcome.code]] });
  // Only what went wrong is counted, so that a household or a studio behind one address is not kept out.
  await limit.giveBack();
  const headers = { "Set-Cookie": await signedInCookie(outcome.session.secret) };
  const held = heldFormFrom(form.value.held);
  const action = safePath(held?.action);
  if (held !== null && action !== null) return data({ held: { ...held, action } }, { headers });
  throw redirect(safePath(form.value.next) ?? firstPage(outcome.roles, params.lang), { headers });
}

export function headers({ actionHeaders }: Route.HeadersArgs) {
  return actionHeaders;
}

export default function SignIn({ loaderData, actionData, params: { lang } }: Route.ComponentProps) {
  const words = useMessages().account;
  if (actionData !== undefined && "held" in actionData) return <SendHeldForm held={actionData.held} />;
  const form = formState(actionData?.problem, {}, { form: "email" });
  return (
    <NarrowSheet title={words.signIn.title}>
      <SignInForm
        form={form}
        next={form.value("next") ?? loaderData.next ?? undefined}
        held={heldFormFrom(form.value("held"))}
      />
      <p className="after">
        {words.signIn.newHere} <Link to={href("/:lang?/sign-up", { lang })}>{words.signIn.signUp}</Link>
      </p>
    </NarrowSheet>
  );
}
