import { data, Form, href, Link } from "react-router";
import { NarrowSheet } from "~/components/account/narrow-sheet";
import { Field } from "~/components/form/field";
import { formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { useBusy } from "~/components/form/use-busy";
import { Press } from "~/components/ui/press";
import { languageContext, requestInfoContext } from "~/context";
import { forgottenForm } from "~/domain/people/account-forms";
import { requestReset } from "~/domain/people/reset-password.server";
import { fill, messagesOf, useMessages } from "~/languages/messages";
import { limitOrWait } from "~/middleware/rate-limit.server";
import { formProblem, parseForm } from "~/platform/forms.server";
import type { Route } from "./+types/forgotten";

export const handle = { still: true };

export async function action({ request, context }: Route.ActionArgs) {
  const language = context.get(languageContext);
  const form = await parseForm(request, forgottenForm, {
    language,
    words: messagesOf(language).account.problems,
  });
  if (!form.ok) return formProblem(form);
  const limit = await limitOrWait(
    "reset",
    [context.get(requestInfoContext).clientIp, form.value.email],
    language,
  );
  if (!limit.ok) return limit.problem(form);
  await requestReset(form.value.email, language);
  return data({ sentTo: form.value.email });
}

export function headers({ actionHeaders }: Route.HeadersArgs) {
  return actionHeaders;
}

export default function Forgotten({ actionData, params: { lang } }: Route.ComponentProps) {
  const words = useMessages().account;
  const busy = useBusy();
  if (actionData !== undefined && "sentTo" in actionData) {
    return (
      <NarrowSheet title={words.forgotten.sentTitle}>
        <p>{fill(words.forgotten.sentText, { email: actionData.sentTo })}</p>
        <p className="quiet">{words.signUp.notCome}</p>
      </NarrowSheet>
    );
  }
  const form = formState(actionData?.problem, {}, { form: "email" });
  return (
    <NarrowSheet title={words.forgotten.title}>
      <p>{words.forgotten.intro}</p>
      <Problems form={form} />
      <Form method="post">
        <div className="fields">
          <Field {...form.field("email")} label={words.email} type="email" autoComplete="username" required />
        </div>
        <p className="form-acts">
          <Press busy={busy}>{words.forgotten.press}</Press>
          <Link to={href("/:lang?/sign-in", { lang })}>{words.signIn.title}</Link>
        </p>
      </Form>
    </NarrowSheet>
  );
}
