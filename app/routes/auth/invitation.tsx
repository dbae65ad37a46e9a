import { data, Form, href, redirect } from "react-router";
import { NarrowSheet } from "~/components/account/narrow-sheet";
import { Field } from "~/components/form/field";
import { formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { useBusy } from "~/components/form/use-busy";
import { Press } from "~/components/ui/press";
import { languageContext } from "~/context";
import { acceptInvitationForm, SHORTEST_PASSWORD } from "~/domain/people/account-forms";
import { acceptInvitation, findInvitation } from "~/domain/people/invitations.server";
import { firstPage } from "~/domain/people/next-path";
import { theStudio } from "~/domain/studio/studio.server";
import { fill, messagesOf, useMessages } from "~/languages/messages";
import { secretPageMiddleware } from "~/middleware/secret-page.server";
import { signedInCookie } from "~/middleware/session.server";
import { formProblem, parseForm } from "~/platform/forms.server";
import type { Route } from "./+types/invitation";

export const handle = { still: true };

export const middleware: Route.MiddlewareFunction[] = [secretPageMiddleware];

export async function loader({ params }: Route.LoaderArgs) {
  const invited = await findInvitation(params.token);
  if (invited === null) return data(null, { status: 410 });
  const { name, email, role, invitedBy } = invited;
  return data({ name, email, role, inviter: invitedBy, studio: (await theStudio()).name });
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const language = context.get(languageContext);
  const form = await parseForm(request, acceptInvitationForm, {
    language,
    words: messagesOf(language).account.problems,
  });
  if (!form.ok) return formProblem(form);
  const outcome = await acceptInvitation(params.token, form.value);
  if (outcome.code === "gone") throw redirect(href("/:lang?/invitation/:token", params));
  throw redirect(firstPage([outcome.role], params.lang), {
    headers: { "Set-Cookie": await signedInCookie(outcome.session.secret) },
  });
}

export default function Invitation({ loaderData, actionData }: Route.ComponentProps) {
  const words = useMessages().account;
  const busy = useBusy();
  if (loaderData === null) {
    return (
      <NarrowSheet title={words.invitation.goneTitle}>
        <p>{words.invitation.goneText}</p>
      </NarrowSheet>
    );
  }
  const { name, email, role, inviter, studio } = loaderData;
  const form = formState(actionData?.problem, { name });
  return (
    <NarrowSheet title={fill(words.invitation.title, { studio })}>
      <p>{fill(words.invitation.text, { inviter, email, role: words.roles[role] })}</p>
      <Problems form={form} />
      <Form method="post">
        <input type="hidden" name="username" autoComplete="username" value={email} />
        <div className="fields">
          <Field
            {...form.field("name")}
            label={words.name}
            hint={words.nameHint}
            autoComplete="name"
            required
          />
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
          <Press busy={busy}>{words.invitation.press}</Press>
        </p>
      </Form>
    </NarrowSheet>
  );
}
