import { Form, href, Link } from "react-router";
import { Choices } from "~/components/form/choices";
import { Field, TextArea } from "~/components/form/field";
import { type FormState, formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { price } from "~/components/shop/edition-view";
import { BenchHead, Block } from "~/components/studio/bench";
import { Facts } from "~/components/ui/facts";
import { CopyNumber } from "~/components/ui/money";
import { Notice } from "~/components/ui/notice";
import { Press } from "~/components/ui/press";
import { Table } from "~/components/ui/table";
import { MAKING_WORDS } from "~/domain/editions/transitions";
import type { OrderLineView, OrderStands } from "~/domain/orders/order-view.server";
import { attentionWords, eventWords, refundWords, STANDS_WORDS } from "~/domain/orders/studio-words";
import type { FormProblem } from "~/platform/form-fields";

type Method = "card" | "transfer" | "cash";

export type OrderPageProps = {
  order: {
    number: number;
    stands: OrderStands;
    state: string;
    channel: string;
    attention: string | null;
    buyer: string;
    buyerPartyId: string;
    email: string | null;
    deliveryMethod: "delivery" | "collection" | "handed_over";
    deliveryAddress: {
      name: string;
      line1: string;
      line2?: string;
      city: string;
      region?: string;
      postcode?: string;
    } | null;
    country: string;
    currency: string;
    deliveryAmount: number;
    totalAmount: number;
    totalTax: number;
    refunded: number;
    buyerNote: string;
    studioNote: string;
    madeAt: string | null;
    heldUntil: string | null;
    link: string | null;
    lines: OrderLineView[];
    events: {
      id: number;
      kind: string;
      detail: Record<string, string | number | boolean | null>;
      at: string;
    }[];
    payments: { id: string; method: Method; amount: number; reference: string; at: string }[];
    refunds: {
      id: string;
      method: Method;
      state: string;
      amount: number;
      reason: string;
      failure: string | null;
      at: string;
    }[];
    dispatches: { id: string; carrier: string; reference: string; at: string }[];
  };
  done: string | null;
  may: { send: boolean; cancel: boolean; refund: boolean; make: boolean };
  problem?: FormProblem | undefined;
};

const DONE: Record<string, string> = {
  send: "Recorded as sent. The buyer has been told.",
  cancel: "Cancelled. The money goes back in full.",
  "money-came": "Recorded. The numbers are sold.",
  "refunded-by-hand": "Recorded as given back.",
  note: "The note has been kept.",
  "looked-at": "Noted.",
  made: "The order has been made.",
};

const METHOD: Record<Method, string> = { card: "by card", transfer: "by transfer", cash: "in cash" };
const REACHES = {
  delivery: "is sent",
  collection: "is collected at the studio",
  handed_over: "was handed over",
};

/** One order: its copies, money, delivery and history, and what can be done about it. */
export function OrderPage({ order, done, may, problem }: OrderPageProps) {
  const form = formState(problem, { studioNote: order.studioNote, carrier: "", reference: "" });
  const sum = (amount: number) => price(amount, { currency: order.currency, language: "en" });
  const said = DONE[done ?? ""];
  const tax = order.lines.find((l) => l.taxLabel !== "")?.taxLabel ?? null;
  return (
    <>
      <title>{`Order ${order.number}`}</title>
      <BenchHead
        title={`Order ${order.number}`}
        says={`${STANDS_WORDS[order.stands]}. Made ${order.madeAt}${order.channel === "studio" ? " by hand" : " in the shop"}.`}
        acts={<Link to={href("/studio/orders")}>All orders</Link>}
      />
      <Problems form={form} />
      {said ? <Notice kind="done" title={said} role="status" /> : null}
      {order.attention === null ? null : (
        <Notice kind="attention" title="This order needs a look">
          <p>{attentionWords(order.attention)}</p>
          {may.refund ? <Act intent="looked-at" label="I have looked at it" /> : null}
        </Notice>
      )}
      <div className="day">
        <div>
          <Block title="Copies">
            <Table
              caption="Copies of this order"
              variant="dense"
              rows={order.lines}
              rowKey={(l) => l.id}
              columns={[
                { key: "mark", head: "Copy", place: "first", cell: (l) => <CopyNumber>{l.mark}</CopyNumber> },
                {
                  key: "title",
                  head: "Print",
                  names: true,
                  place: "main",
                  cell: (l) => (
                    <Link to={href("/studio/editions/:editionId", { editionId: l.editionId })}>
                      {l.title}
                    </Link>
                  ),
                },
                {
                  key: "paper",
                  head: "Paper, sheet in mm",
                  cell: (l) => `${l.paper}, ${l.sheet.width} × ${l.sheet.height}`,
                },
                { key: "making", head: "Making", cell: (l) => lineWords(l) },
                { key: "code", head: "Check code", says: true, cell: (l) => l.checkCode ?? "" },
                {
                  key: "amount",
                  head: "Sum",
                  numeric: true,
                  place: "sum",
                  cell: (l) =>
                    l.reductionAmount > 0
                      ? `${sum(l.amount)} (less ${sum(l.reductionAmount)}: ${l.reductionReason})`
                      : sum(l.amount),
                },
              ]}
            />
            <Facts
              variant="leaders"
              items={[
                { term: "Delivery", detail: sum(order.deliveryAmount) },
                ...(tax === null ? [] : [{ term: `of which ${tax}`, detail: sum(order.totalTax) }]),
                { term: "Total", detail: sum(order.totalAmount) },
                ...(order.refunded > 0 ? [{ term: "given back", detail: sum(order.refunded) }] : []),
              ]}
            />
          </Block>
          <Money order={order} sum={sum} may={may} form={form} />
          <Block title="History">
            <Table
              caption="What happened to this order"
              rows={order.events}
              rowKey={(e) => e.id}
              columns={[
                { key: "at", head: "When", cell: (e) => e.at },
                { key: "what", head: "What", names: true, cell: (e) => eventWords(e.kind) },
                { key: "detail", head: "More", cell: (e) => details(e.detail, sum) },
              ]}
            />
          </Block>
        </div>
        <div>
          <Block title="Buyer">
            <p>
              <Link to={href("/studio/people/:partyId", { partyId: order.buyerPartyId })}>{order.buyer}</Link>
              {order.email === null ? null : (
                <>
                  <br />
                  <a href={`mailto:${order.email}`}>{order.email}</a>
                </>
              )}
            </p>
            <p>
              It {REACHES[order.deliveryMethod]}
              {order.deliveryAddress === null ? ` (${order.country}).` : ":"}
            </p>
            {order.deliveryAddress === null ? null : (
              <address>
                {[
                  order.deliveryAddress.name,
                  order.deliveryAddress.line1,
                  order.deliveryAddress.line2,
                  [order.deliveryAddress.city, order.deliveryAddress.region, order.deliveryAddress.postcode]
                    .filter(Boolean)
                    .join(" "),
                  order.country,
                ]
                  .filter((line) => line !== undefined && line !== "")
                  .map((line) => (
                    <span key={line}>
                      {line}
                      <br />
                    </span>
                  ))}
              </address>
            )}
            {order.buyerNote === "" ? null : <p className="pencil">{order.buyerNote}</p>}
          </Block>
          <Sending order={order} may={may} form={form} />
          {order.link === null ? null : (
            <Block title="Link to pay">
              <p className="note">
                {order.heldUntil === null
                  ? "The numbers are held until somebody cancels."
                  : `The numbers are held until ${order.heldUntil}.`}{" "}
                Whoever has this link can see where the order stands and pay it.
              </p>
              <Field label="Address of the order's page" name="link" readOnly defaultValue={order.link} />
            </Block>
          )}
          {may.send ? (
            <Block title="Note of the studio">
              <Form method="post" className="flow" preventScrollReset>
                <input type="hidden" name="intent" value="note" />
                <TextArea label="Seen by the studio only" rows={3} {...form.field("studioNote")} />
                <Press variant="outlined" small>
                  Keep the note
                </Press>
              </Form>
            </Block>
          ) : null}
          {may.cancel && (order.state === "paid" || order.state === "awaiting_payment") ? (
            <Block title="Cancel">
              <Form method="post" className="flow" preventScrollReset>
                <input type="hidden" name="intent" value="cancel" />
                <p className="note">
                  {order.state === "paid"
                    ? `All of ${sum(order.totalAmount)} goes back to the buyer. Copies that have left the studio count as coming back until their sheet has been seen.`
                    : "The payment page is closed first; if it was paid in the meantime, the order stands."}
                </p>
                <Field label="Why" {...form.field("reason")} required />
                <Press variant="outlined">
                  {order.state === "paid"
                    ? `Cancel and give back ${sum(order.totalAmount)}`
                    : "Cancel the order"}
                </Press>
              </Form>
            </Block>
          ) : null}
        </div>
      </div>
    </>
  );
}

function lineWords(line: OrderLineView): string {
  if (line.state !== "sold") {
    return {
      held: "held",
      offered: "another number offered",
      released: "let go",
      refunded: "money given back",
      sold: "",
    }[line.state];
  }
  return line.makings.map((m) => MAKING_WORDS[m]).join(", ");
}

function details(
  detail: Record<string, string | number | boolean | null>,
  sum: (n: number) => string,
): string {
  return Object.entries(detail)
    .filter(([, value]) => value !== null && value !== "")
    .map(([key, value]) =>
      key === "amount" && typeof value === "number"
        ? sum(value)
        : key === "reason"
          ? refundWords(String(value))
          : String(value),
    )
    .join(", ");
}

function Act({ intent, label }: { intent: string; label: string }) {
  return (
    <Form method="post" preventScrollReset>
      <input type="hidden" name="intent" value={intent} />
      <Press variant="outlined" small>
        {label}
      </Press>
    </Form>
  );
}

function Money({
  order,
  sum,
  may,
  form,
}: {
  order: OrderPageProps["order"];
  sum: (n: number) => string;
  may: OrderPageProps["may"];
  form: FormState;
}) {
  const owedByHand = order.refunds.filter(
    (r) => r.state !== "succeeded" && (r.method !== "card" || r.state === "failed"),
  );
  return (
    <Block title="Money">
      <Table
        caption="Payments and refunds"
        rows={[
          ...order.payments.map((p) => ({
            key: p.id,
            at: p.at,
            what: `paid ${METHOD[p.method]}`,
            reference: p.reference,
            amount: sum(p.amount),
          })),
          ...order.refunds.map((r) => ({
            key: r.id,
            at: r.at,
            what: `${r.state === "succeeded" ? "given back" : r.state === "failed" ? "refund refused" : "to be given back"} ${METHOD[r.method]}: ${refundWords(r.reason)}`,
            reference: r.failure ?? "",
            amount: `−${sum(r.amount)}`,
          })),
        ]}
        rowKey={(r) => r.key}
        empty={<p className="quiet">Nothing has been paid yet.</p>}
        columns={[
          { key: "at", head: "When", cell: (r) => r.at },
          { key: "what", head: "What", names: true, cell: (r) => r.what },
          { key: "reference", head: "Reference", cell: (r) => r.reference },
          { key: "amount", head: "Sum", numeric: true, cell: (r) => r.amount },
        ]}
      />
      {may.refund
        ? owedByHand.map((r) => (
            <Form method="post" className="flow" key={r.id} preventScrollReset>
              <input type="hidden" name="intent" value="refunded-by-hand" />
              <input type="hidden" name="refundId" value={r.id} />
              <Field
                id={`ref-${r.id}`}
                label={`Give back ${sum(r.amount)} ${METHOD[r.method]}, then write its reference`}
                name="reference"
                required
              />
              <Press variant="outlined" small>
                It has been given back
              </Press>
            </Form>
          ))
        : null}
      {may.make && order.state === "awaiting_payment" ? (
        <Form method="post" className="flow" preventScrollReset>
          <input type="hidden" name="intent" value="money-came" />
          <Choices
            name="method"
            legend="The money came"
            defaultValue={form.value("method") ?? "transfer"}
            options={[
              { value: "transfer", name: "by transfer" },
              { value: "cash", name: "in cash" },
            ]}
          />
          <Field
            label="Reference of the bank, or number of the receipt"
            {...form.field("reference")}
            required
          />
          <Press>{`Record ${sum(order.totalAmount)}`}</Press>
        </Form>
      ) : null}
    </Block>
  );
}

function Sending({
  order,
  may,
  form,
}: {
  order: OrderPageProps["order"];
  may: OrderPageProps["may"];
  form: FormState;
}) {
  const waits = order.state === "paid" && order.stands !== "sent" && order.stands !== "arrived";
  const personally = order.deliveryMethod !== "delivery";
  return (
    <Block title={personally ? "Handing over" : "Sending"}>
      {order.dispatches.map((d) => (
        <p key={d.id}>
          {d.at}: {d.carrier}
          {d.reference === "" ? null : `, ${d.reference}`}
        </p>
      ))}
      {order.dispatches.length === 0 && !waits ? <p className="quiet">Nothing has been sent.</p> : null}
      {waits && may.send ? (
        <Form method="post" className="flow" preventScrollReset>
          <input type="hidden" name="intent" value="send" />
          <Field label={personally ? "By whom, or where" : "Carrier"} {...form.field("carrier")} required />
          {personally ? null : <Field label="Carrier's reference" {...form.field("reference")} />}
          <Press>{personally ? "Mark as handed over" : "Mark as sent"}</Press>
        </Form>
      ) : null}
    </Block>
  );
}
