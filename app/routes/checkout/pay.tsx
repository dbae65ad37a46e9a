import { data, href, redirect, redirectDocument } from "react-router";
import { PayPage } from "~/components/shop/order-pay";
import { visitorContext } from "~/context";
import { endHold } from "~/domain/orders/end-hold.server";
import { orderIdOfToken } from "~/domain/orders/links.server";
import { buyersOrder, formatsOfOrder } from "~/domain/orders/order-page.server";
import { acceptPrices, openPaymentPage } from "~/domain/orders/payment-session.server";
import { basketHeader, readBasket } from "~/middleware/basket.server";
import { readOwnOrders } from "~/middleware/own-orders.server";
import { secretPageMiddleware } from "~/middleware/secret-page.server";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { readForm } from "~/platform/forms.server";
import { logger } from "~/platform/logger.server";
import type { Route } from "./+types/pay";

export const middleware: Route.MiddlewareFunction[] = [secretPageMiddleware];

async function idOf(token: string): Promise<string> {
  const id = await orderIdOfToken(token);
  if (id === null) throw new AppError("not_found");
  return id;
}

export async function loader({ request, url, params, context }: Route.LoaderArgs) {
  const id = await idOf(params.token);
  const order = await buyersOrder(id, {
    ...(await readOwnOrders(request)),
    visitor: context.get(visitorContext),
  });
  if (order === null) throw new AppError("not_found");
  if (order.state === "paid") throw redirect(href("/:lang?/orders/:token", params));
  const seenAt = now();
  // The end of a hold is carried out by a job; the page does not wait for it.
  const over =
    order.state !== "awaiting_payment" ||
    (order.holdUntil !== null && order.holdUntil.getTime() <= seenAt.getTime());
  const seen = (url.searchParams.get("seen") ?? "").split("-").map(Number);
  return {
    order: { ...order, buyer: null },
    seenAt,
    over,
    left: url.searchParams.has("left"),
    unavailable: url.searchParams.has("unavailable"),
    /** Prices the buyer had seen, in the order of the lines; empty when the address does not say. */
    seen:
      seen.length === order.lines.length && seen.every((n) => Number.isSafeInteger(n) && n > 0) ? seen : [],
  };
}

/** `pay` leads to the payment page, `accept` says yes to the prices first; `give-up` and `refill` speak for themselves. */
export async function action({ request, params }: Route.ActionArgs) {
  const orderId = await idOf(params.token);
  const intent = (await readForm(request)).get("intent");
  const here = href("/:lang?/orders/:token/pay", params);
  if (intent === "refill") {
    const again = await formatsOfOrder(orderId);
    const basket = await readBasket(request);
    throw redirect(href("/:lang?/basket", { lang: params.lang }), {
      headers: {
        "Set-Cookie": await basketHeader([...again, ...basket.filter((id) => !again.includes(id))]),
      },
    });
  }
  if (intent === "give-up") {
    try {
      const ended = await endHold(orderId, "cancelled");
      if (ended === "not_yet") return data({ problem: "not_yet" as const }, { status: 409 });
      throw redirect(ended === "paid" ? href("/:lang?/orders/:token", params) : here);
    } catch (error) {
      if (error instanceof Response) throw error;
      const err = error instanceof Error ? error.message : "unknown";
      logger.warn({ orderId, err }, "the hold could not be given up");
      return data({ problem: "unavailable" as const }, { status: 503 });
    }
  }
  if (intent !== "pay" && intent !== "accept") throw new AppError("bad_request");
  if (intent === "accept") await acceptPrices(orderId);
  const page = await openPaymentPage(orderId);
  switch (page.kind) {
    case "open":
      throw redirectDocument(page.url, { status: 303 });
    case "unavailable":
      return data({ problem: "unavailable" as const }, { status: 503 });
    case "paid":
      throw redirect(href("/:lang?/orders/:token", params));
    default:
      throw redirect(here);
  }
}

export default function Pay({ loaderData, actionData, params }: Route.ComponentProps) {
  return <PayPage {...loaderData} problem={actionData?.problem ?? null} token={params.token} />;
}
