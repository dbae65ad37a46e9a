import type Stripe from "stripe";
import { type CardMistakes, TEST_CARDS, type TestCard } from "./cards";
import { html, Markup } from "./markup";
import type { SessionRecord } from "./store";
import { filled, type Language, WORDINGS, type Wording } from "./wording";

/** What was filled in, as it is shown again. */
export type Answers = {
  card_number: string;
  card_expiry: string;
  card_cvc: string;
  card_name: string;
  email: string;
  shipping_option: string;
};
export type Mistakes = CardMistakes & { name?: true; email?: true };
export type PageState = {
  answers?: Partial<Answers>;
  mistakes?: Mistakes;
  /** The decline of the last try, as Stripe's decline code. */
  declined?: string | null;
};

/** An amount in minor units, written in its currency. */
export function money(amount: number, currency: string, language: Language): string {
  const format = new Intl.NumberFormat(language === "de" ? "de-DE" : "en-GB", {
    style: "currency",
    currency: currency.toUpperCase(),
  });
  const digits = format.resolvedOptions().maximumFractionDigits ?? 2;
  return format.format(amount / 10 ** digits);
}

function conductOf(card: TestCard): keyof Wording {
  const { conduct } = card;
  if (conduct.kind === "authenticate") return "does_authenticate";
  if (conduct.kind === "success") {
    return conduct.refund ? (`does_refund_${conduct.refund}` as const) : "does_success";
  }
  return named(`does_${conduct.declineCode}`, "does_generic_decline");
}

function named(name: string, otherwise: keyof Wording): keyof Wording {
  return name in WORDINGS.en ? (name as keyof Wording) : otherwise;
}

function grouped(digits: string): string {
  return digits.length === 15
    ? `${digits.slice(0, 4)} ${digits.slice(4, 10)} ${digits.slice(10)}`
    : digits.replace(/(.{4})(?=.)/g, "$1 ");
}

function page(language: Language, title: string, body: Markup, kind: "full" | "short" = "short"): string {
  const words = WORDINGS[language];
  return html`<!doctype html>
<html lang="${language}">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="robots" content="noindex">
<title>${title}</title>
<link rel="icon" href="data:,">
<link rel="stylesheet" href="/assets/payment-page.css">
</head>
<body>
<header class="test"><p><strong>${words.test}.</strong> ${words.testMore}</p></header>
<main class="${kind}">
${body}
</main>
</body>
</html>
`.text;
}

function total(session: Stripe.Checkout.Session, language: Language): string {
  return money(session.amount_total ?? 0, session.currency ?? "", language);
}

function orderOf(record: SessionRecord, language: Language): Markup {
  const words = WORDINGS[language];
  const { session, lineItems, shippingRates } = record;
  const currency = session.currency ?? "";
  // With several ways of delivery the choice stands in the form, and the sum cannot be known yet.
  const rate = shippingRates.length === 1 ? shippingRates[0] : undefined;
  return html`<section class="order" aria-labelledby="order-head">
<h2 id="order-head">${words.yourOrder}</h2>
<table>
<tbody>
${lineItems.map(
  (line) => html`<tr><th scope="row">${line.description}${
    (line.quantity ?? 1) > 1 &&
    html` <small>${filled(words.quantity, {
      count: line.quantity ?? 1,
      each: money(line.price.unit_amount ?? 0, currency, language),
    })}</small>`
  }</th><td>${money(line.amount_total, currency, language)}</td></tr>
`,
)}${
  rate
    ? html`<tr><th scope="row">${words.delivery} <small>${rate.display_name ?? ""}</small></th><td>${money(
        rate.fixed_amount?.amount ?? 0,
        currency,
        language,
      )}</td></tr>`
    : null
}
</tbody>
${
  shippingRates.length > 1
    ? null
    : html`<tfoot><tr><th scope="row">${words.total}</th><td>${total(session, language)}</td></tr></tfoot>`
}
</table>
</section>`;
}

type Field = {
  name: string;
  label: string;
  hint?: string;
  mistake?: string | undefined;
  value: string;
  autocomplete: string;
  numeric?: boolean;
};

function field({ name, label, hint, mistake, value, autocomplete, numeric }: Field): Markup {
  const described = [hint ? `${name}-hint` : "", mistake ? `${name}-wrong` : ""].filter(Boolean).join(" ");
  return html`<p class="field${mistake ? " is-wrong" : ""}">
<label for="${name}">${label}</label>
${hint ? html`<span class="hint" id="${name}-hint">${hint}</span>` : null}
${mistake ? html`<span class="wrong" id="${name}-wrong">${mistake}</span>` : null}
<input id="${name}" name="${name}" value="${value}" autocomplete="${autocomplete}"${
    numeric ? new Markup(' inputmode="numeric"') : null
  }${described ? html` aria-describedby="${described}"` : null}${
    mistake ? new Markup(' aria-invalid="true"') : null
  } required>
</p>`;
}

function deliveries(record: SessionRecord, language: Language, chosen: string): Markup | null {
  if (record.shippingRates.length < 2) return null;
  const words = WORDINGS[language];
  const { session } = record;
  const currency = session.currency ?? "";
  return html`<fieldset>
<legend>${words.chooseDelivery}</legend>
${record.shippingRates.map((rate, at) => {
  const amount = rate.fixed_amount?.amount ?? 0;
  const sum = money((session.amount_subtotal ?? 0) + amount, currency, language);
  return html`<label class="choice"><input type="radio" name="shipping_option" value="${at}"${
    String(at) === chosen ? new Markup(" checked") : null
  }> <span>${rate.display_name ?? ""} <small>${filled(words.inAll, { amount: sum })}</small></span> <span>${money(
    amount,
    currency,
    language,
  )}</span></label>
`;
})}
</fieldset>`;
}

function cards(sessionId: string, language: Language): Markup {
  const words = WORDINGS[language];
  return html`<details>
<summary>${words.tryCards}</summary>
<p class="hint">${words.tryCardsHint}</p>
<table class="cards">
<thead><tr><th scope="col">${words.cardNumber}</th><th scope="col">${words.cardDoes}</th></tr></thead>
<tbody>
${TEST_CARDS.map(
  (card) =>
    html`<tr><td><a href="/pay/${sessionId}?card=${card.number}">${grouped(card.number)}</a></td><td>${
      words[conductOf(card)]
    }</td></tr>
`,
)}
</tbody>
</table>
</details>`;
}

/** The answers a link in the list of test cards fills in. `now` is in milliseconds. */
export function answersFor(number: string, now: number): Partial<Answers> | null {
  const card = TEST_CARDS.find((known) => known.number === number);
  if (!card) return null;
  const year = (new Date(now).getUTCFullYear() + 3) % 100;
  return {
    card_number: grouped(card.number),
    card_expiry: `12/${String(year).padStart(2, "0")}`,
    card_cvc: card.brand === "amex" ? "1234" : "123",
  };
}

/** The page on which an open session is paid. */
export function payPage(record: SessionRecord, language: Language, state: PageState): string {
  const words = WORDINGS[language];
  const { session } = record;
  const answers = state.answers ?? {};
  const mistakes = state.mistakes ?? {};
  const said: { name: string; message: string }[] = [];
  const note = (name: string, message: string | undefined | false) => {
    if (message) said.push({ name, message });
    return message || undefined;
  };
  const wrong = {
    email: note("email", mistakes.email && words.emailWrong),
    number: note(
      "card_number",
      mistakes.number && (mistakes.number === "unknown" ? words.numberUnknown : words.numberWrong),
    ),
    expiry: note(
      "card_expiry",
      mistakes.expiry && (mistakes.expiry === "past" ? words.expiryPast : words.expiryWrong),
    ),
    cvc: note("card_cvc", mistakes.cvc && words.cvcWrong),
    name: note("card_name", mistakes.name && words.nameMissing),
  };
  // Without scripts the sum cannot follow the choice of a delivery: each choice names its own.
  const title =
    record.shippingRates.length > 1
      ? words.payChosen
      : filled(words.pay, { amount: total(session, language) });
  const submit = session.custom_text.submit?.message;
  const until = new Intl.DateTimeFormat(language === "de" ? "de-DE" : "en-GB", {
    dateStyle: "long",
    timeStyle: "long",
    timeZone: "UTC",
  }).format(session.expires_at * 1000);
  const summary =
    said.length > 0
      ? html`<div class="summary" role="alert" tabindex="-1" autofocus>
<h2>${words.wrongHead}</h2>
<ul>${said.map(({ name, message }) => html`<li><a href="#${name}">${message}</a></li>`)}</ul>
</div>`
      : state.declined
        ? html`<div class="summary" role="alert" tabindex="-1" autofocus data-declined="${state.declined}">
<h2>${words.declinedHead}</h2>
<p>${words[named(`declined_${state.declined}`, "declined_generic_decline")]} ${words.declinedAgain}</p>
</div>`
        : null;
  const body = html`<h1>${title}</h1>
${summary}
<div class="columns">
${orderOf(record, language)}
<section aria-labelledby="card-head">
<h2 id="card-head">${words.card}</h2>
<form method="post" action="/pay/${session.id}" novalidate>
${deliveries(record, language, answers.shipping_option ?? "0")}
${
  session.customer_email === null
    ? field({
        name: "email",
        label: words.email,
        mistake: wrong.email,
        value: answers.email ?? "",
        autocomplete: "email",
      })
    : null
}
${field({
  name: "card_number",
  label: words.number,
  hint: words.numberHint,
  mistake: wrong.number,
  value: answers.card_number ?? "",
  autocomplete: "cc-number",
  numeric: true,
})}
<div class="pair">
${field({
  name: "card_expiry",
  label: words.expiry,
  hint: words.expiryHint,
  mistake: wrong.expiry,
  value: answers.card_expiry ?? "",
  autocomplete: "cc-exp",
})}
${field({
  name: "card_cvc",
  label: words.cvc,
  hint: words.cvcHint,
  mistake: wrong.cvc,
  value: answers.card_cvc ?? "",
  autocomplete: "cc-csc",
  numeric: true,
})}
</div>
${field({
  name: "card_name",
  label: words.name,
  mistake: wrong.name,
  value: answers.card_name ?? "",
  autocomplete: "cc-name",
})}
<p class="deadline">${submit ?? filled(words.payUntil, { time: until })}</p>
<button type="submit">${title}</button>
</form>
${session.cancel_url ? html`<p class="leave"><a href="${session.cancel_url}">${words.leave}</a></p>` : null}
</section>
</div>
${cards(session.id, language)}`;
  return page(language, title, body, "full");
}

/** The question of the card's bank. */
export function authenticationPage(record: SessionRecord, last4: string, language: Language): string {
  const words = WORDINGS[language];
  const asks = filled(words.bankAsks, { last4, amount: total(record.session, language) });
  return page(
    language,
    words.bankHead,
    html`<h1>${words.bankHead}</h1>
<p>${asks}</p>
<form method="post" action="/pay/${record.id}/authenticate" class="answers">
<button type="submit" name="answer" value="approve">${words.approve}</button>
<button type="submit" name="answer" value="refuse" class="second">${words.refuse}</button>
</form>`,
  );
}

/** What is shown where nothing can be paid: paid already, ended, or never there. */
export function closedPage(
  kind: "complete" | "expired" | "unknown",
  link: string | null,
  language: Language,
): string {
  const words = WORDINGS[language];
  const linkWords = kind === "complete" ? words.completeLink : words.expiredLink;
  return page(
    language,
    words[`${kind}Head`],
    html`<h1>${words[`${kind}Head`]}</h1>
<p>${words[`${kind}More`]}</p>
${link ? html`<p><a href="${link}">${linkWords}</a></p>` : null}`,
  );
}
