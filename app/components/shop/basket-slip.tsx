import { href, Link } from "react-router";
import { price } from "~/components/shop/edition-view";
import { OrderSlip, type SlipLine } from "~/components/shop/order-slip";
import { lineWords, orderSums } from "~/components/shop/order-words";
import { Press } from "~/components/ui/press";
import { Window } from "~/components/ui/window";
import type { CounterLine, CounterView } from "~/domain/orders/checkout-page.server";
import { countryName } from "~/domain/people/countries";
import { LANGUAGE_TAG, segmentOf } from "~/languages/language";
import { fill, useLanguage, useMessages } from "~/languages/messages";

/** What lies in the basket, what each line would be, and the sums. Its presses belong to the checkout's form. */
export function BasketSlip({ view, form }: { view: CounterView; form: string }) {
  const { checkout } = useMessages();
  const language = useLanguage();
  const { sums } = view;
  const shown = { language, currency: view.currency };
  const delivery = sums?.delivery;
  return (
    <Window as="aside" pad="slip" labelledBy="slip">
      <h2 id="slip">{checkout.slip}</h2>
      <OrderSlip
        lines={[
          ...view.lines.map((line) => slipLine(line, { view, form, language })),
          ...view.unknown.map(
            (position): SlipLine => ({
              key: `unknown-${position}`,
              picture: { proofs: [] },
              title: checkout.unknownPrint,
              words: (
                <>
                  {checkout.problems.unknown} {checkout.skipped}
                  <br />
                </>
              ),
              sum: "",
              act: <TakeOut position={position} title={checkout.unknownPrint} form={form} />,
            }),
          ),
        ]}
        sums={
          sums === null
            ? []
            : orderSums(
                {
                  ...sums,
                  method: view.method,
                  country: view.country,
                  delivery: sums.delivery.kind === "quoted" ? sums.delivery.amount : null,
                },
                shown,
              )
        }
      />
      {delivery?.kind === "quoted" && view.method === "delivery" ? (
        <p className="note">{fill(checkout.days, { from: delivery.daysFrom, to: delivery.daysTo })}</p>
      ) : null}
      {sums?.taxes.some((t) => t.treatment === "export") ? (
        <p className="note">
          {fill(checkout.exportNote, { country: countryName(view.country, LANGUAGE_TAG[language]) })}
        </p>
      ) : null}
    </Window>
  );
}

function slipLine(
  line: CounterLine,
  { view, form, language }: { view: CounterView; form: string; language: "en" | "de" },
): SlipLine {
  return {
    key: String(line.position),
    picture: { proofs: line.proofs, width: line.sheet.width, height: line.sheet.height },
    ...(line.mark === null ? {} : { number: line.mark }),
    title: <SlipTitle line={line} />,
    words: <SlipWords line={line} language={language} />,
    sum: line.amount === null ? "" : price(line.amount, { language, currency: view.currency }),
    act: <TakeOut position={line.position} title={line.title} form={form} />,
  };
}

function SlipTitle({ line }: { line: CounterLine }) {
  const lang = segmentOf(useLanguage());
  return <Link to={href("/:lang?/prints/:slug", { lang, slug: line.slug })}>{line.title}</Link>;
}

function SlipWords({ line, language }: { line: CounterLine; language: "en" | "de" }) {
  const { checkout } = useMessages();
  return (
    <>
      {lineWords(line, language)}
      <br />
      {line.problem === null ? null : (
        <>
          <strong>{checkout.problems[line.problem]}</strong> {checkout.skipped}
          <br />
        </>
      )}
    </>
  );
}

function TakeOut({ position, title, form }: { position: number; title: string; form: string }) {
  const { checkout } = useMessages();
  return (
    <Press
      variant="word"
      form={form}
      name="remove"
      value={position}
      formNoValidate
      aria-label={fill(checkout.letGoOf, { title })}
    >
      {checkout.letGo}
    </Press>
  );
}
