import { data, href, redirect, redirectDocument } from "react-router";
import { z } from "zod";
import { Counter, type CounterAnswer } from "~/components/shop/checkout-counter";
import { languageContext, requestInfoContext, visitorContext } from "~/context";
import { checkoutForm, reckonedFor, wayOf } from "~/domain/orders/checkout-form";
import { counterView } from "~/domain/orders/checkout-page.server";
import { openPaymentPage } from "~/domain/orders/payment-session.server";
import { placeOrder } from "~/domain/orders/place-order.server";
import { countriesByName } from "~/domain/people/countries";
import { theStudio } from "~/domain/studio/studio.server";
import { LANGUAGE_TAG } from "~/languages/language";
import { messagesOf, useMessages } from "~/languages/messages";
import { basketHeader, readBasket } from "~/middleware/basket.server";
import { rememberOrder } from "~/middleware/own-orders.server";
import { limitOrWait } from "~/middleware/rate-limit.server";
import type { Answers, FieldErrors } from "~/platform/form-fields";
import { parseForm, readForm } from "~/platform/forms.server";
import type { Route } from "./+types/checkout";

export async function loader({ request, url, context }: Route.LoaderArgs) {
  return {
    view: await counterView({
      basket: await readBasket(request),
      country: url.searchParams.get("to"),
      method: wayOf(url.searchParams.get("by")),
      visitor: context.get(visitorContext),
    }),
    countries: countriesByName(LANGUAGE_TAG[context.get(languageContext)]),
  };
}

/**
 * Orders what the form names and leads to the payment page. Everything else comes back with every answer kept: a mistake,
 * other sums (`intent=reckon`), a line taken out (`remove`), a number that has gone.
 */
export async function action({ request, context, params }: Route.ActionArgs) {
  const language = context.get(languageContext);
  const words = messagesOf(language);
  const visitor = context.get(visitorContext);
  const basket = await readBasket(request);
  const sent = await readForm(request);
  const { answers } = await parseForm(sent, z.unknown());
  const text = (name: string) => (typeof answers[name] === "string" ? answers[name] : "");
  const method = wayOf(text("method"));
  const again = async (
    status: number,
    more: { errors?: FieldErrors; gone?: string[]; basket?: string[]; headers?: HeadersInit } = {},
  ) => {
    const page = await counterView({
      basket: more.basket ?? basket,
      country: text("address.country"),
      method,
      visitor,
    });
    const answer: CounterAnswer = {
      problem: { errors: more.errors ?? {}, answers: withoutLines(answers) },
      page,
      gone: more.gone ?? [],
    };
    return data(answer, { status, ...(more.headers === undefined ? {} : { headers: more.headers }) });
  };

  const remove = text("remove");
  if (remove !== "") {
    const rest = basket.filter((_, position) => String(position) !== remove);
    return again(200, { basket: rest, headers: { "Set-Cookie": await basketHeader(rest) } });
  }
  if (text("intent") === "reckon") return again(200);

  const form = await parseForm(sent, checkoutForm, {
    language,
    words: { ...words.account.problems, ...words.account.addressProblems, ...words.checkout.formProblems },
  });
  if (!form.ok) return again(400, { errors: form.errors });
  const value = form.value;
  const country = value.method === "delivery" ? value.address.country : (await theStudio()).country;
  if (value.seenFor !== reckonedFor(value.method, country)) {
    return again(400, { errors: { form: [words.checkout.sumsChanged] } });
  }
  const limit = await limitOrWait("checkout", [context.get(requestInfoContext).clientIp], language);
  if (!limit.ok) return again(429, { errors: limit.problem(form).data.problem.errors });

  const outcome = await placeOrder({
    submissionKey: value.submissionKey,
    lines: value.lines,
    buyer: {
      name: value.name,
      email: value.email,
      ...(value.telephone === "" ? {} : { telephone: value.telephone }),
    },
    delivery:
      value.method === "delivery" ? { method: "delivery", address: value.address } : { method: "collection" },
    country,
    language,
    accountId: visitor?.accountId ?? null,
    note: value.note,
  });
  if (outcome.kind === "empty")
    return again(400, { errors: { form: [words.checkout.formProblems.linesMissing] } });
  if (outcome.kind === "gone") return again(409, { gone: outcome.gone.map((g) => g.title) });
  if (outcome.kind === "not_delivered") {
    const said = words.checkout.notDelivered;
    const { reason } = outcome;
    const sentence = reason === "country_not_served" || reason === "too_heavy" ? said[reason] : said.other;
    return again(400, { errors: { "address.country": [sentence] } });
  }

  const ordered = new Set(value.lines.map((l) => l.formatId));
  const headers = new Headers();
  headers.append("Set-Cookie", await basketHeader(basket.filter((id) => !ordered.has(id))));
  headers.append("Set-Cookie", await rememberOrder(request, "made", outcome.orderId));
  const page = await openPaymentPage(outcome.orderId);
  if (page.kind === "open") throw redirectDocument(page.url, { status: 303, headers });
  const pay = href("/:lang?/orders/:token/pay", { lang: params.lang, token: outcome.token });
  const seen = new URLSearchParams(
    page.kind === "prices_to_accept"
      ? { seen: value.lines.map((l) => l.seenAmount).join("-") }
      : page.kind === "unavailable"
        ? { unavailable: "1" }
        : {},
  );
  throw redirect(`${pay}?${seen}`, { status: 303, headers });
}

/** The page names its lines anew; those of the form that came are not to be shown again. */
function withoutLines(answers: Answers): Answers {
  return Object.fromEntries(
    Object.entries(answers).filter(([name]) => !/^(lines\[|intent$|remove$|seenFor$)/.test(name)),
  );
}

export function headers({ actionHeaders }: Route.HeadersArgs) {
  const kept = new Headers(actionHeaders);
  kept.set("Cache-Control", "private, no-store");
  return kept;
}

export default function Checkout({ loaderData, actionData }: Route.ComponentProps) {
  const { checkout } = useMessages();
  return (
    <>
      <title>{checkout.orderTitle}</title>
      <Counter
        view={loaderData.view}
        answer={actionData}
        countries={loaderData.countries}
        title={checkout.orderTitle}
      />
    </>
  );
}
