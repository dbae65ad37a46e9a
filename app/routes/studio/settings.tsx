import { href, redirect } from "react-router";
import { SettingsPage } from "~/components/studio/settings-page";
import { signedInContext } from "~/context";
import { isoDayInZone } from "~/domain/dates";
import { countriesByName, countryName } from "~/domain/people/countries";
import { percentText } from "~/domain/pricing/tax";
import { changeSettings, settingsPage } from "~/domain/studio/settings.server";
import { settingsForm } from "~/domain/studio/settings-form";
import { messagesOf } from "~/languages/messages";
import { now } from "~/platform/clock";
import { formProblem, parseForm } from "~/platform/forms.server";
import { currencyCode, decimalText } from "~/platform/money";
import type { Route } from "./+types/settings";

export async function loader({ url }: Route.LoaderArgs) {
  const { studio, registrations, rates, delivery } = await settingsPage();
  return {
    done: url.searchParams.get("done"),
    today: isoDayInZone(now(), studio.zone),
    studio: { ...studio, createdAt: null },
    registrations: registrations.map((r) => ({ ...r, name: countryName(r.country, "en-GB") })),
    rates: rates.map((r) => ({
      ...r,
      name: countryName(r.country, "en-GB"),
      percent: percentText(r.basisPoints),
    })),
    delivery: delivery.map((d) => ({
      ...d,
      sum: decimalText({ amount: d.amount, currency: currencyCode(d.currency) }),
    })),
    zones: ["UTC", ...Intl.supportedValuesOf("timeZone")],
    countries: countriesByName("en-GB"),
  };
}

export async function action({ request, context }: Route.ActionArgs) {
  const { account } = messagesOf("en");
  const form = await parseForm(request, settingsForm, { words: account.addressProblems });
  if (!form.ok) return formProblem(form);
  const outcome = await changeSettings(context.get(signedInContext), form.value);
  if (outcome.code === "refused") return formProblem(form, { [outcome.field]: [outcome.sentence] });
  throw redirect(`${href("/studio/settings")}?done=${form.value.intent}`);
}

export default function Settings({ loaderData, actionData }: Route.ComponentProps) {
  return <SettingsPage {...loaderData} problem={actionData?.problem} />;
}
