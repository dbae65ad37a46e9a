import { href, redirect } from "react-router";
import { PeoplePage } from "~/components/studio/people-page";
import { signedInContext } from "~/context";
import { formatInstant } from "~/domain/dates";
import { studioAccounts } from "~/domain/people/accounts.server";
import {
  invite,
  openInvitations,
  resendInvitation,
  withdrawInvitation,
} from "~/domain/people/invitations.server";
import { findParties } from "~/domain/people/parties.server";
import { peopleForm } from "~/domain/people/people-forms";
import { can } from "~/domain/people/permissions";
import { theStudio } from "~/domain/studio/studio.server";
import { formProblem, parseForm } from "~/platform/forms.server";
import type { Route } from "./+types/people";

export async function loader({ context, url }: Route.LoaderArgs) {
  const { roles } = context.get(signedInContext);
  const q = (url.searchParams.get("q") ?? "").trim().slice(0, 100);
  const page = Number(url.searchParams.get("page") ?? 1) || 1;
  const [{ zone }, accounts, invitations, parties] = await Promise.all([
    theStudio(),
    studioAccounts(),
    openInvitations(),
    findParties({ q, page }),
  ]);
  return {
    q,
    parties,
    done: url.searchParams.get("done"),
    mayChange: can(roles, "people.change"),
    accounts: accounts.map((account) => ({
      ...account,
      lastSeenAt: account.lastSeenAt === null ? null : formatInstant(account.lastSeenAt, zone, "en"),
    })),
    invitations: invitations.map(({ createdAt: _, expiresAt, ...invitation }) => ({
      ...invitation,
      until: formatInstant(expiresAt, zone, "en"),
    })),
  };
}

export async function action({ request, context }: Route.ActionArgs) {
  const actor = context.get(signedInContext);
  const form = await parseForm(request, peopleForm);
  if (!form.ok) return formProblem(form);
  const done = (what: string) => redirect(`${href("/studio/people")}?done=${what}`);
  const { value } = form;
  switch (value.intent) {
    case "invite": {
      const outcome = await invite(actor, value);
      if (outcome.code === "invited") return done("invited");
      if (outcome.code === "has_account") {
        return redirect(`${href("/studio/people/:partyId", outcome)}?done=has-account`);
      }
      return formProblem(form, {
        email: ["This address has been invited already. Send that invitation again, or withdraw it first."],
      });
    }
    case "withdraw":
      await withdrawInvitation(actor, value.invitationId);
      return done("withdrawn");
    case "resend":
      await resendInvitation(actor, value.invitationId);
      return done("resent");
  }
}

export default function People({ loaderData, actionData }: Route.ComponentProps) {
  return <PeoplePage people={loaderData} problem={actionData?.problem} />;
}
