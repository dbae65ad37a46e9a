import { href, redirect } from "react-router";
import { OrderPage } from "~/components/shop/order-page";
import { languageContext, requestInfoContext, visitorContext } from "~/context";
import { correctEmailForm, postcodeForm } from "~/domain/orders/checkout-form";
import { correctEmail } from "~/domain/orders/correct-email.server";
import { orderIdOfToken } from "~/domain/orders/links.server";
import { decideOffer } from "~/domain/orders/offers.server";
import { buyersOrder, postcodeOfOrder } from "~/domain/orders/order-page.server";
import { returnFromPayment } from "~/domain/orders/return-from-payment.server";
import { isSamePostcode } from "~/domain/people/address";
import { messagesOf } from "~/languages/messages";
import { readOwnOrders, rememberOrder } from "~/middleware/own-orders.server";
import { limitOrWait } from "~/middleware/rate-limit.server";
import { secretPageMiddleware } from "~/middleware/secret-page.server";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { formProblem, parseForm, readForm } from "~/platform/forms.server";
import { isUuid } from "~/platform/uuid";
import type { Route } from "./+types/order";

export const middleware: Route.MiddlewareFunction[] = [secretPageMiddleware];

async function idOf(token: string): Promise<string> {
  const id = await orderIdOfToken(token);
  if (id === null) throw new AppError("not_found");
  return id;
}

export async function loader({ request, url, params, context }: Route.LoaderArgs) {
  const orderId = await idOf(params.token);
  const session = url.searchParams.get("paid");
  if (session !== null) {
    const came = await returnFromPayment(orderId, session);
    if (came !== "waiting") {
      throw redirect(href("/:lang?/orders/:token", params), {
        headers: came === "paid" ? { "Set-Cookie": await rememberOrder(request, "made", orderId) } : {},
      });
    }
  }
  const asking = { ...(await readOwnOrders(request)), visitor: context.get(visitorContext) };
  const order = await buyersOrder(orderId, asking);
  if (order === null) throw new AppError("not_found");
  return {
    order,
    hearing: session !== null,
    corrected: url.searchParams.has("corrected"),
    signedIn: asking.visitor !== null,
    seenAt: now(),
  };
}

/** `postcode` shows who bought it, `email` corrects a mistyped address, `accept` and `decline` answer an offer. */
export async function action({ request, params, context }: Route.ActionArgs) {
  const orderId = await idOf(params.token);
  const language = context.get(languageContext);
  const words = messagesOf(language);
  const sent = await readForm(request);
  const intent = sent.get("intent");
  const here = href("/:lang?/orders/:token", params);
  const options = { language, words: { ...words.account.problems, ...words.checkout.formProblems } };

  if (intent === "accept" || intent === "decline") {
    const offerId = sent.get("offer");
    if (typeof offerId !== "string" || !isUuid(offerId)) throw new AppError("bad_request");
    const decided = await decideOffer(offerId, orderId, intent === "accept" ? "accepted" : "declined");
    if (!decided) return formProblem({ answers: {} }, { offer: [words.checkout.order.offerOver] }, 409);
    throw redirect(here);
  }
  if (intent === "postcode") {
    const form = await parseForm(sent, postcodeForm, options);
    if (!form.ok) return formProblem(form);
    const limit = await limitOrWait(
      "postcode",
      [context.get(requestInfoContext).clientIp, orderId],
      language,
    );
    if (!limit.ok) return limit.problem(form);
    const postcode = await postcodeOfOrder(orderId);
    if (postcode === null || !isSamePostcode(postcode, form.value.postcode)) {
      return formProblem(form, { postcode: [words.checkout.order.postcodeWrong] });
    }
    await limit.giveBack();
    throw redirect(here, { headers: { "Set-Cookie": await rememberOrder(request, "opened", orderId) } });
  }
  if (intent === "email") {
    const { made } = await readOwnOrders(request);
    if (!made.includes(orderId)) throw new AppError("not_allowed");
    const form = await parseForm(sent, correctEmailForm, options);
    if (!form.ok) return formProblem(form);
    const limit = await limitOrWait("checkout", [context.get(requestInfoContext).clientIp], language);
    if (!limit.ok) return limit.problem(form);
    const token = await correctEmail(orderId, form.value.email);
    if (token === null) throw new AppError("gone");
    throw redirect(`${href("/:lang?/orders/:token", { lang: params.lang, token })}?corrected=1`);
  }
  throw new AppError("bad_request");
}

export function headers({ actionHeaders }: Route.HeadersArgs) {
  return actionHeaders;
}

export default function Order({ loaderData, actionData, params }: Route.ComponentProps) {
  return <OrderPage {...loaderData} problem={actionData?.problem} token={params.token} />;
}
