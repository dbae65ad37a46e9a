import { data, href, redirect } from "react-router";
import { SetupPage } from "~/components/account/setup-page";
import { PlainLayout } from "~/components/layout/plain-layout";
import { PressLink } from "~/components/ui/press";
import { requestInfoContext, visitorContext } from "~/context";
import { countriesByName } from "~/domain/people/countries";
import { setUp, setupIsOpen } from "~/domain/studio/setup.server";
import { setupForm } from "~/domain/studio/setup-form";
import { messagesOf } from "~/languages/messages";
import { limitOrWait } from "~/middleware/rate-limit.server";
import { signedInCookie } from "~/middleware/session.server";
import { formProblem, parseForm } from "~/platform/forms.server";
import { currencyCodes } from "~/platform/money";
import type { Route } from "./+types/setup";

export async function loader({ context }: Route.LoaderArgs) {
  if (!(await setupIsOpen())) {
    if (context.get(visitorContext)?.roles.includes("photographer")) throw redirect(href("/studio"));
    return data(null, { status: 410 });
  }
  const names = new Intl.DisplayNames("en-GB", { type: "currency" });
  return data({
    zones: ["UTC", ...Intl.supportedValuesOf("timeZone")],
    currencies: currencyCodes().map((code) => ({ code, name: names.of(code) ?? code })),
    countries: countriesByName("en-GB"),
  });
}

export async function action({ request, context }: Route.ActionArgs) {
  const { account } = messagesOf("en");
  const form = await parseForm(request, setupForm, {
    words: { ...account.problems, ...account.addressProblems },
  });
  if (!form.ok) return formProblem(form);
  const limit = await limitOrWait("setup", [context.get(requestInfoContext).clientIp], "en");
  if (!limit.ok) return limit.problem(form);
  const outcome = await setUp(form.value);
  switch (outcome.code) {
    case "set_up":
      throw redirect(href("/studio"), {
        headers: { "Set-Cookie": await signedInCookie(outcome.session.secret) },
      });
    case "closed":
      throw redirect(href("/setup"));
    case "wrong_code":
      return formProblem(form, {
        code: ["This is not the code, or it has been used. It was printed by the start command."],
      });
    case "rate_needed":
      return formProblem(form, {
        vatRate: ["Please give the standard rate: it is not known here for this country."],
      });
  }
}

export default function Setup({ loaderData, actionData }: Route.ComponentProps) {
  const title = loaderData === null ? "The studio has been set up" : "Set up your studio";
  return (
    <PlainLayout studioName="Numberleaf" skipLabel="Skip to the page">
      <title>{title}</title>
      {loaderData === null ? (
        <div className="flow">
          <h1>{title}</h1>
          <p>This page works once, before a studio has a photographer. Sign in to go on.</p>
          <p>
            <PressLink variant="filled" to={href("/:lang?/sign-in")}>
              Sign in
            </PressLink>
          </p>
        </div>
      ) : (
        <SetupPage title={title} lists={loaderData} problem={actionData?.problem} />
      )}
    </PlainLayout>
  );
}
