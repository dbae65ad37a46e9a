import { data, Form, href, Link, redirect } from "react-router";
import { NarrowSheet } from "~/components/account/narrow-sheet";
import { Field } from "~/components/form/field";
import { formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { useBusy } from "~/components/form/use-busy";
import { Press } from "~/components/ui/press";
import { languageContext, requestInfoContext, visitorContext } from "~/context";
import { SHORTEST_PASSWORD, signUpForm } from "~/domain/people/account-forms";
import { firstPage } from "~/domain/people/next-path";
import { signUp } from "~/domain/people/sign-up.server";
import { fill, messagesOf, useMessages } from "~/languages/messages";
import { limitOrWait } from "~/middleware/rate-limit.server";
import { formProblem, parseForm } from "~/platform/forms.server";
import type { Route } from "./+types/sign-up";

export const handle = { still: true };

export function loader({ context, params }: Route.LoaderArgs) {
  const visitor = context.get(visitorContext);
  if (visitor !== null) throw redirect(firstPage(visitor.roles, params.lang));
  return null;
}

export async function action({ request, context }: Route.ActionArgs) {
  const language = context.get(languageContext);
  const form = await parseForm(request, signUpForm, {
    language,
    words: messagesOf(language).account.problems,
  });
  if (!form.ok) return formProblem(form);
  const limit = await limitOrWait(
    "sign_up",
    [context.get(requestInfoContext).clientIp, form.value.email],
    language,
  );
  if (!limit.ok) return limit.problem(form);
  await signUp({ ...form.value, language });
  return data({ sentTo: form.value.email });
}

export function headers({ actionHeaders }: Route.HeadersArgs) {
  return actionHeaders;
}

export default function SignUp({ actionData, params: { lang } }: Route.ComponentProps) {
  const words = useMessages().account;
  const busy = useBusy();
  if (actionData !== undefined && "sentTo" in actionData) {
    return (
      <NarrowSheet title={words.signUp.sentTitle}>
        <p>{fill(words.signUp.sentText, { email: actionData.sentTo })}</p>
        <p className="quiet">{words.signUp.notCome}</p>
      </NarrowSheet>
    );
  }
  const form = formState(actionData?.problem, {}, { form: "email" });
  return (
    <NarrowSheet title={words.signUp.title}>
      <p>{words.signUp.intro}</p>
      <Problems form={form} />
      <Form method="post">
        <div className="fields">
          <Field
            {...form.field("name")}
            label={words.name}
            hint={words.nameHint}
            autoComplete="name"
            required
          />
          <Field {...form.field("email")} label={words.email} type="email" autoComplete="username" required />
          <Field
            {...form.field("newPassword")}
            label={words.choosePassword}
            hint={words.newPasswordHint}
            type="password"
            autoComplete="new-password"
            minLength={SHORTEST_PASSWORD}
            required
          />
        </div>
        <p className="form-acts">
          <Press busy={busy}>{words.signUp.press}</Press>
        </p>
      </Form>
      <p className="after">
        {words.signUp.haveOne} <Link to={href("/:lang?/sign-in", { lang })}>{words.signIn.title}</Link>
      </p>
    </NarrowSheet>
  );
}
