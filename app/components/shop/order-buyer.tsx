import { Form } from "react-router";
import { Field } from "~/components/form/field";
import { formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { addressLines } from "~/components/shop/order-words";
import { Facts } from "~/components/ui/facts";
import { Press } from "~/components/ui/press";
import type { BuyersOrder } from "~/domain/orders/order-page.server";
import { LANGUAGE_TAG } from "~/languages/language";
import { fill, useLanguage, useMessages } from "~/languages/messages";
import type { FormProblem } from "~/platform/form-fields";

type Props = { order: BuyersOrder; problem: FormProblem | undefined };

/** Who bought it and where it goes, for those who may know; a question for the postcode for the others. */
export function OrderBuyer({ order, problem }: Props) {
  return order.buyer === null ? (
    <AskPostcode order={order} problem={problem} />
  ) : (
    <div className="flow">
      <BuyerFacts order={order} buyer={order.buyer} />
      {order.access === "paid" && order.state === "paid" ? <CorrectEmail problem={problem} /> : null}
    </div>
  );
}

function BuyerFacts({ order, buyer }: { order: BuyersOrder; buyer: NonNullable<BuyersOrder["buyer"]> }) {
  const { order: words } = useMessages().checkout;
  const tag = LANGUAGE_TAG[useLanguage()];
  const lines = buyer.address === null ? [] : addressLines(buyer.address, tag);
  return (
    <Facts
      items={[
        { term: words.nameTerm, detail: buyer.name },
        ...(buyer.email === null ? [] : [{ term: words.emailTerm, detail: buyer.email }]),
        lines.length > 0
          ? {
              term: words.addressTerm,
              detail: lines.map((line) => (
                <span key={line}>
                  {line}
                  <br />
                </span>
              )),
            }
          : {
              term: words.collectTerm,
              detail: fill(words.collectText, { address: order.studio.address }),
            },
        ...(buyer.note === "" ? [] : [{ term: words.noteTerm, detail: buyer.note }]),
      ]}
    />
  );
}

function AskPostcode({ order, problem }: Props) {
  const { order: words } = useMessages().checkout;
  const asked = problem !== undefined && "postcode" in problem.answers ? problem : undefined;
  const form = formState(asked, {}, { form: "postcode" });
  if (order.deliveryMethod !== "delivery") return <p>{words.buyerHiddenCollect}</p>;
  return (
    <div className="flow">
      <p>{words.buyerHidden}</p>
      <Problems form={form} />
      <Form method="post" className="ask">
        <Field
          {...form.field("postcode")}
          label={words.postcode}
          autoComplete="off"
          maxLength={16}
          required
        />
        <Press variant="outlined" name="intent" value="postcode">
          {words.postcodePress}
        </Press>
      </Form>
    </div>
  );
}

function CorrectEmail({ problem }: Pick<Props, "problem">) {
  const { order: words, email } = useMessages().checkout;
  const asked = problem !== undefined && "email" in problem.answers ? problem : undefined;
  const form = formState(asked, {}, { form: "email" });
  return (
    <>
      <h3>{words.correctTitle}</h3>
      <p>{words.correctText}</p>
      <Problems form={form} />
      <Form method="post" className="ask" noValidate>
        <Field {...form.field("email")} label={email} type="email" autoComplete="email" required />
        <Press variant="outlined" name="intent" value="email">
          {words.correctPress}
        </Press>
      </Form>
    </>
  );
}
