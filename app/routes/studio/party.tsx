import { href, redirect } from "react-router";
import { z } from "zod";
import { PartyPage } from "~/components/studio/party-page";
import { signedInContext } from "~/context";
import { formatInstant } from "~/domain/dates";
import {
  type AccountChange,
  accountsOfParty,
  disableAccount,
  enableAccount,
  endAccountSessions,
  grantRole,
  revokeRole,
} from "~/domain/people/accounts.server";
import { countriesByName } from "~/domain/people/countries";
import { changeParty, findParty } from "~/domain/people/parties.server";
import { partyPageForm } from "~/domain/people/people-forms";
import { can } from "~/domain/people/permissions";
import { theStudio } from "~/domain/studio/studio.server";
import { messagesOf } from "~/languages/messages";
import { AppError } from "~/platform/errors";
import { formProblem, parseForm } from "~/platform/forms.server";
import { currencyCode, formatMoney } from "~/platform/money";
import type { Route } from "./+types/party";

async function partyOf(partyId: string) {
  const party = z.uuid().safeParse(partyId).success ? await findParty(partyId) : null;
  if (party === null) throw new AppError("not_found");
  return party;
}

export async function loader({ context, params, url }: Route.LoaderArgs) {
  const { roles } = context.get(signedInContext);
  const [party, accounts, { zone }] = await Promise.all([
    partyOf(params.partyId),
    accountsOfParty(params.partyId),
    theStudio(),
  ]);
  return {
    party: {
      ...party,
      createdAt: formatInstant(party.createdAt, zone, "en"),
      orders: party.orders.map(({ createdAt, totalAmount, currency, ...order }) => ({
        ...order,
        madeOn: formatInstant(createdAt, zone, "en"),
        total: formatMoney({ amount: totalAmount, currency: currencyCode(currency) }, "en-GB"),
      })),
    },
    accounts: accounts.map((account) => ({
      ...account,
      lastSeenAt: account.lastSeenAt === null ? null : formatInstant(account.lastSeenAt, zone, "en"),
    })),
    countries: countriesByName("en-GB"),
    done: url.searchParams.get("done"),
    mayChange: can(roles, "people.change"),
  };
}

const REFUSED: Record<Exclude<AccountChange["code"], "changed">, string> = {
  last_photographer:
    "This is the only photographer: without one nobody could open the studio’s settings again.",
  yourself: "You cannot disable the account you are signed in with.",
  unknown: "This account is not there any more, or has been changed meanwhile.",
};

export async function action({ request, context, params }: Route.ActionArgs) {
  const actor = context.get(signedInContext);
  const { id: partyId } = await partyOf(params.partyId);
  const form = await parseForm(request, partyPageForm, { words: messagesOf("en").account.addressProblems });
  if (!form.ok) return formProblem(form);
  const { value } = form;
  const done = (what: string) => redirect(`${href("/studio/people/:partyId", { partyId })}?done=${what}`);
  if (value.intent === "party") {
    await changeParty(actor, partyId, value);
    return done("saved");
  }
  // Ids from a form are looked up again within what this page is about.
  const accounts = await accountsOfParty(partyId);
  if (!accounts.some((account) => account.id === value.accountId)) throw new AppError("not_found");
  const change = await changeAccount();
  return change.code === "changed" ? done("saved") : formProblem(form, { form: [REFUSED[change.code]] });

  async function changeAccount(): Promise<AccountChange> {
    switch (value.intent) {
      case "party":
        return { code: "unknown" };
      case "grant":
        return grantRole(actor, value.accountId, value.role);
      case "revoke":
        return revokeRole(actor, value.accountId, value.role);
      case "disable":
        return disableAccount(actor, value.accountId);
      case "enable":
        return enableAccount(actor, value.accountId);
      case "end-sessions":
        await endAccountSessions(actor, value.accountId);
        return { code: "changed" };
    }
  }
}

export default function Party({ loaderData, actionData }: Route.ComponentProps) {
  return <PartyPage {...loaderData} problem={actionData?.problem} />;
}
