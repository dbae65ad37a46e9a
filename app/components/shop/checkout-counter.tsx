import { useRef } from "react";
import { Form, href, Link, useSearchParams } from "react-router";
import { Choices } from "~/components/form/choices";
import { Field, TextArea } from "~/components/form/field";
import { Fieldset } from "~/components/form/fieldset";
import { formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { useBusy } from "~/components/form/use-busy";
import { BasketSlip } from "~/components/shop/basket-slip";
import { CheckoutAddress } from "~/components/shop/checkout-address";
import { price } from "~/components/shop/edition-view";
import { deliveryName } from "~/components/shop/order-words";
import { EmptyState } from "~/components/ui/empty-state";
import { Notice } from "~/components/ui/notice";
import { Press, PressLink } from "~/components/ui/press";
import { Window } from "~/components/ui/window";
import { reckonedFor } from "~/domain/orders/checkout-form";
import type { CounterView } from "~/domain/orders/checkout-page.server";
import { segmentOf } from "~/languages/language";
import { count, fill, useLanguage, useMessages } from "~/languages/messages";
import type { FormProblem } from "~/platform/form-fields";

const FORM = "checkout";

/** What the checkout answers to a form that did not lead to the payment page. */
export type CounterAnswer = {
  problem?: FormProblem;
  /** The page anew: another country, another way, a line taken out. */
  page?: CounterView;
  /** Titles of prints that had gone when the form came; "" for one that is not known at all. */
  gone?: string[];
};

type CounterProps = {
  view: CounterView;
  answer: CounterAnswer | undefined;
  countries: readonly { code: string; name: string }[];
  title: string;
};

/** Basket and checkout on one page: the slip, the form, and the one press that orders. */
export function Counter({ view: loaded, answer, countries, title }: CounterProps) {
  const { checkout } = useMessages();
  const lang = segmentOf(useLanguage());
  const view = answer?.page ?? loaded;
  if (view.lines.length === 0 && view.unknown.length === 0) {
    return (
      <Window>
        <div className="flow">
          <h1>{checkout.emptyTitle}</h1>
          <EmptyState
            action={<PressLink to={href("/:lang?/prints", { lang })}>{checkout.toPrints}</PressLink>}
          >
            {checkout.empty}
          </EmptyState>
        </div>
      </Window>
    );
  }
  return (
    <div className="counter">
      <CounterForm view={view} answer={answer} countries={countries} title={title} />
      <BasketSlip view={view} form={FORM} />
    </div>
  );
}

function CounterForm({ view, answer, countries, title }: CounterProps) {
  const { checkout } = useMessages();
  const language = useLanguage();
  const lang = segmentOf(language);
  const busy = useBusy();
  const [, setSearch] = useSearchParams();
  // An answer is gone with the next change of country; what it kept must outlast it.
  const kept = useRef<FormProblem | undefined>(undefined);
  if (answer?.problem !== undefined) kept.current = answer.problem;
  const form = formState(
    kept.current,
    { ...view.known, method: view.method },
    { form: "order", lines: "order", submissionKey: "order" },
  );
  const { sums } = view;
  const gone = answer?.gone ?? [];
  const total = sums === null ? "" : price(sums.total, { language, currency: view.currency });
  const look = (change: Record<string, string>) =>
    setSearch(
      (now) => {
        for (const [name, value] of Object.entries(change)) now.set(name, value);
        return now;
      },
      { replace: true, preventScrollReset: true },
    );
  return (
    <Window>
      <div className="flow">
        <h1>{title}</h1>
        {sums === null ? null : (
          <>
            <p className="lead">{checkout.intro}</p>
            <p>
              {fill(checkout.inAll, {
                prints: count(language, checkout.sheets, sums.count),
                way: deliveryName(view.method, view.country, language),
                total,
              })}{" "}
              <a href="#slip">{checkout.seeSlip}</a>
            </p>
          </>
        )}
        <Problems form={form} />
        {gone.length === 0 ? null : <Gone titles={gone} total={total} rest={sums !== null} />}
      </div>
      <Form
        method="post"
        action={href("/:lang?/checkout", { lang })}
        id={FORM}
        className="steps checkout"
        noValidate
        preventScrollReset={false}
      >
        {sums === null ? (
          <p>
            {checkout.restNone} <Link to={href("/:lang?/prints", { lang })}>{checkout.otherPrints}</Link>
          </p>
        ) : (
          <>
            <Hidden view={view} submissionKey={form.value("submissionKey") ?? view.submissionKey} />
            <Fieldset legend={checkout.whoTitle} columns={2}>
              {view.signedInAs === null ? null : (
                <p className="note span">{fill(checkout.signedInAs, { name: view.signedInAs })}</p>
              )}
              <Field
                {...form.field("email")}
                label={checkout.email}
                hint={checkout.emailHint}
                type="email"
                autoComplete="email"
                required
                span
              />
              <Field
                {...form.field("name")}
                label={checkout.name}
                hint={checkout.nameHint}
                autoComplete="name"
                required
                span
              />
            </Fieldset>
            <Choices
              name="method"
              legend={checkout.howTitle}
              defaultValue={form.value("method") ?? view.method}
              onChange={(event) => look({ by: event.currentTarget.value })}
              options={[
                {
                  value: "delivery",
                  name: checkout.byDelivery,
                  more: checkout.byDeliveryMore,
                  ...(view.method === "delivery" && sums.delivery.kind === "quoted"
                    ? { price: price(sums.delivery.amount, { language, currency: view.currency }) }
                    : {}),
                },
                {
                  value: "collection",
                  name: checkout.byCollection,
                  price: checkout.free,
                  more: fill(checkout.byCollectionMore, { address: view.studioAddress }),
                },
              ]}
            />
            <CheckoutAddress
              form={form}
              country={view.country}
              countries={countries}
              notDelivered={notDelivered(view, checkout.notDelivered)}
              onCountry={(country) => look({ to: country })}
            />
            <Fieldset legend={checkout.moreTitle}>
              <Field
                {...form.field("telephone")}
                label={checkout.telephone}
                hint={checkout.telephoneHint}
                type="tel"
                autoComplete="tel"
              />
              <TextArea {...form.field("note")} label={checkout.note} rows={3} maxLength={1000} />
            </Fieldset>
            <section aria-labelledby="pay" className="flow">
              <h2 id="pay">{checkout.payTitle}</h2>
              <p>{checkout.payText}</p>
              <p>{fill(checkout.holdText, { minutes: view.holdMinutes })}</p>
              <p className="note">{checkout.totalText}</p>
              <Press id="order" name="intent" value="order" busy={busy} busyLabel={checkout.busy}>
                {fill(checkout.press, { total })}
              </Press>
              <p className="note">{checkout.withdrawal}</p>
            </section>
          </>
        )}
      </Form>
    </Window>
  );
}

/** What the form must say besides the answers: which lines, at the prices seen, and what the sums were for. */
function Hidden({ view, submissionKey }: { view: CounterView; submissionKey: string }) {
  const lines = view.lines.filter((l) => l.problem === null);
  return (
    <>
      <input type="hidden" name="submissionKey" value={submissionKey} />
      <input type="hidden" name="seenFor" value={reckonedFor(view.method, view.country)} />
      {lines.map((line, at) => (
        <span key={line.position} hidden>
          <input type="hidden" name={`lines[${at}].formatId`} value={line.formatId} />
          <input type="hidden" name={`lines[${at}].seenAmount`} value={line.ladderAmount ?? ""} />
        </span>
      ))}
    </>
  );
}

/** Somebody was faster: what has gone, and the rest with one press. */
function Gone({ titles, total, rest }: { titles: readonly string[]; total: string; rest: boolean }) {
  const { checkout } = useMessages();
  const lang = segmentOf(useLanguage());
  return (
    <Notice kind="attention" title={checkout.goneTitle} role="alert" tabIndex={-1} autoFocus>
      <ul>
        {titles.map((title, at) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: the list never changes, and titles may repeat
          <li key={at}>{title === "" ? checkout.goneUnknown : fill(checkout.goneOne, { title })}</li>
        ))}
      </ul>
      <p>{checkout.goneText}</p>
      {rest ? (
        <>
          <p>{checkout.restText}</p>
          <p className="acts">
            <Press form={FORM} name="intent" value="order">
              {fill(checkout.pressRest, { total })}
            </Press>
          </p>
        </>
      ) : (
        <p>
          {checkout.restNone} <Link to={href("/:lang?/prints", { lang })}>{checkout.otherPrints}</Link>
        </p>
      )}
    </Notice>
  );
}

/** Why the basket cannot be sent to the country of the page, in the words given; null when it can. */
function notDelivered(
  view: CounterView,
  words: { country_not_served: string; too_heavy: string; other: string },
): string | null {
  if (view.method === "collection" || view.sums === null || view.sums.delivery.kind === "quoted") return null;
  const { reason } = view.sums.delivery;
  return reason === "country_not_served" || reason === "too_heavy" ? words[reason] : words.other;
}
