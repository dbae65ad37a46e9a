import { href, redirect } from "react-router";
import { AccountPage } from "~/components/account/account-page";
import { languageContext, requestInfoContext, signedInContext } from "~/context";
import { formatInstant } from "~/domain/dates";
import { accountPageForm } from "~/domain/people/account-page-form";
import {
  changeEmail,
  changeName,
  changePassword,
  endOwnSession,
  ownAccount,
  signOutEverywhere,
} from "~/domain/people/own-account.server";
import { can } from "~/domain/people/permissions";
import { sendVerificationAgain } from "~/domain/people/verify-email.server";
import { theStudio } from "~/domain/studio/studio.server";
import { LANGUAGE_TAG } from "~/languages/language";
import { messagesOf } from "~/languages/messages";
import { limitOrWait } from "~/middleware/rate-limit.server";
import { signedOutCookie } from "~/middleware/session.server";
import { formProblem, parseForm } from "~/platform/forms.server";
import type { Route } from "./+types/account";

export async function loader({ context, url }: Route.LoaderArgs) {
  const own = context.get(signedInContext);
  const tag = LANGUAGE_TAG[context.get(languageContext)];
  const [account, { zone }] = await Promise.all([ownAccount(own), theStudio()]);
  return {
    ...account,
    ownsOrders: can(own.roles, "orders.own"),
    done: url.searchParams.get("done"),
    sessions: account.sessions.map(({ id, isThis, createdAt, lastSeenAt }) => ({
      id,
      isThis,
      since: formatInstant(createdAt, zone, tag),
      lastSeen: formatInstant(lastSeenAt, zone, tag),
    })),
  };
}

export async function action({ request, context, params: { lang } }: Route.ActionArgs) {
  const own = context.get(signedInContext);
  const language = context.get(languageContext);
  const words = messagesOf(language).account;
  const form = await parseForm(request, accountPageForm, { language, words: words.problems });
  if (!form.ok) return formProblem(form);
  const done = (what: string) => redirect(`${href("/:lang?/account", { lang })}?done=${what}`);
  const { value } = form;
  if (value.intent === "email" || value.intent === "password") {
    const limit = await limitOrWait(
      "sign_in",
      [context.get(requestInfoContext).clientIp, own.accountId],
      language,
    );
    if (!limit.ok) return limit.problem(form);
    const outcome =
      value.intent === "email" ? await changeEmail(own, value, language) : await changePassword(own, value);
    if (outcome.code === "wrong_password") return formProblem(form, { password: [words.page.wrongPassword] });
    if (outcome.code === "taken") return formProblem(form, { email: [words.page.emailTaken] });
    await limit.giveBack();
    return done(value.intent);
  }
  switch (value.intent) {
    case "name":
      await changeName(own, value.name);
      return done("name");
    case "send-again": {
      const limit = await limitOrWait(
        "reset",
        [context.get(requestInfoContext).clientIp, own.accountId],
        language,
      );
      if (!limit.ok) return limit.problem(form);
      await sendVerificationAgain(own.accountId, language);
      return done("sent");
    }
    case "end-session":
      await endOwnSession(own, value.sessionId);
      return done("ended");
    case "everywhere":
      await signOutEverywhere(own);
      return redirect(href("/:lang?/sign-in", { lang }), {
        headers: { "Set-Cookie": await signedOutCookie() },
      });
  }
}

export default function Account({ loaderData, actionData }: Route.ComponentProps) {
  return <AccountPage account={loaderData} problem={actionData?.problem} />;
}
