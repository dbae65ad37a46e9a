import { href, redirect } from "react-router";
import { OrderPage } from "~/components/studio/order-page";
import { signedInContext } from "~/context";
import { formatInstant } from "~/domain/dates";
import { cancelOrder } from "~/domain/orders/cancel-order.server";
import { dispatchOrder } from "~/domain/orders/dispatch-order.server";
import { endHold } from "~/domain/orders/end-hold.server";
import { orderAddress } from "~/domain/orders/links.server";
import { recordTransfer } from "~/domain/orders/order-by-hand.server";
import { clearAttention, noteOrder, recordRefundByHand } from "~/domain/orders/order-notes.server";
import { orderView } from "~/domain/orders/order-view.server";
import { orderPageForm } from "~/domain/orders/studio-forms";
import { acting } from "~/domain/people/acting";
import { countryName } from "~/domain/people/countries";
import { partyName } from "~/domain/people/party-name.server";
import { can } from "~/domain/people/permissions";
import { theStudio } from "~/domain/studio/studio.server";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { formProblem, parseForm } from "~/platform/forms.server";
import { linkToken } from "~/platform/ids.server";
import { isUuid } from "~/platform/uuid";
import type { Route } from "./+types/order";

export async function loader({ params, context, url }: Route.LoaderArgs) {
  const { roles } = context.get(signedInContext);
  const [{ zone }, order] = await Promise.all([
    theStudio(),
    isUuid(params.orderId) ? orderView(params.orderId) : null,
  ]);
  if (order === null) throw new AppError("not_found");
  const time = (at: Date | null) => (at === null ? null : formatInstant(at, zone, "en-GB"));
  const {
    tokenSeed,
    tokenHash: _,
    submissionKey: __,
    events,
    payments,
    refunds,
    dispatches,
    ...rest
  } = order;
  return {
    order: {
      ...rest,
      buyer: await partyName(order.buyerPartyId),
      madeAt: time(order.createdAt),
      heldUntil: time(order.holdUntil),
      country: countryName(order.deliveryCountry, "en-GB"),
      link:
        order.state === "awaiting_payment"
          ? orderAddress(order.language, linkToken("order", tokenSeed))
          : null,
      events: events.map((e) => ({ id: e.id, kind: e.kind, detail: e.detail, at: time(e.at) ?? "" })),
      payments: payments.map((p) => ({
        id: p.id,
        method: p.method,
        amount: p.amount,
        reference: p.reference,
        at: time(p.receivedAt) ?? "",
      })),
      refunds: refunds.map((r) => ({
        id: r.id,
        method: r.method,
        state: r.state,
        amount: r.amount,
        reason: r.reason,
        failure: r.failure,
        at: time(r.settledAt ?? r.createdAt) ?? "",
      })),
      dispatches: dispatches.map((d) => ({
        id: d.id,
        carrier: d.carrier,
        reference: d.reference,
        at: time(d.sentAt) ?? "",
      })),
    },
    done: url.searchParams.get("done"),
    may: {
      send: can(roles, "orders.send"),
      cancel: can(roles, "orders.cancel"),
      refund: can(roles, "refunds.make"),
      make: can(roles, "orders.make"),
    },
  };
}

export async function action({ request, params, context }: Route.ActionArgs) {
  if (!isUuid(params.orderId)) throw new AppError("not_found");
  const { orderId } = params;
  const visitor = context.get(signedInContext);
  const actor = acting(visitor);
  const form = await parseForm(request, orderPageForm);
  if (!form.ok) return formProblem(form);
  const { value } = form;
  const done = () => redirect(`${href("/studio/orders/:orderId", { orderId })}?done=${value.intent}`);
  switch (value.intent) {
    case "send": {
      const outcome = await dispatchOrder(orderId, actor, {
        carrier: value.carrier,
        reference: value.reference,
        sentAt: now(),
      });
      if (outcome.kind === "sent" || outcome.kind === "already") throw done();
      const sentence =
        outcome.kind === "not_signed"
          ? `${outcome.marks.join(", ")} has not been printed and signed yet: record that in the print room first.`
          : "Nothing of this order is to be sent.";
      return formProblem(form, { carrier: [sentence] });
    }
    case "cancel": {
      const outcome = await cancelOrder(orderId, actor, value.reason);
      if (outcome === "offer_open") {
        return formProblem(form, {
          reason: ["Another number is offered to the buyer; it must be answered or run out first."],
        });
      }
      throw done();
    }
    case "money-came": {
      // A payment page that is still open is closed first, so that the order cannot be paid twice.
      const outcome = await recordTransfer(orderId, actor, {
        method: value.method,
        reference: value.reference,
        receivedAt: now(),
      });
      if (outcome === "page_open") {
        const ended = await endHold(orderId, "expired");
        return formProblem(form, {
          reference: [
            ended === "paid"
              ? "The buyer has just paid by card; give this money back."
              : "The buyer has a card payment page open. Wait until its hold ends, then record the money.",
          ],
        });
      }
      if (outcome === "not_waiting")
        return formProblem(form, { reference: ["This order no longer waits for money."] });
      throw done();
    }
    case "refunded-by-hand":
      await recordRefundByHand(visitor, orderId, value.refundId, value.reference);
      throw done();
    case "note":
      await noteOrder(visitor, orderId, value.studioNote);
      throw done();
    case "looked-at":
      await clearAttention(visitor, orderId);
      throw done();
  }
}

export default function Order({ loaderData, actionData }: Route.ComponentProps) {
  return <OrderPage {...loaderData} problem={actionData?.problem} />;
}
