import type Stripe from "stripe";
import { z } from "zod";
import { expanded, listOf } from "./answers";
import { noSuchObject } from "./faults";
import type { WireEvent } from "./objects";
import { checkParameters, dated, expandable, isWithin, type Parameters, paging } from "./parameters";
import { cancelIntent } from "./payments";
import { createRefund, createRefundParameters, updateRefund, updateRefundParameters } from "./refunds";
import {
  createSession,
  createSessionParameters,
  expireSession,
  requireSession,
  sessionNow,
} from "./sessions";
import type { Changes, Store } from "./store";

/** What the routes of the API need besides the request. */
export type ApiContext = {
  store: Store;
  paymentPage: (sessionId: string) => string;
  refundSettleMs: number;
};

/**
 * One route: checks its parameters, then returns what is to be done.
 * The check comes first, apart, because only what begins to be done is kept under an idempotency key.
 */
type Route = {
  method: "GET" | "POST";
  path: RegExp;
  prepare: (context: ApiContext, parameters: Parameters, id: string) => (changes: Changes) => object;
};

const nothingMore = z.strictObject(expandable);
const listSessions = z.strictObject({
  ...paging,
  ...dated,
  payment_intent: z.string().optional(),
  status: z.enum(["open", "complete", "expired"]).optional(),
  customer_details: z.strictObject({ email: z.string() }).optional(),
});
const listLines = z.strictObject(paging);
const listIntents = z.strictObject({ ...paging, ...dated });
const listOfIntent = z.strictObject({
  ...paging,
  ...dated,
  payment_intent: z.string().optional(),
  charge: z.string().optional(),
});
const listEvents = z.strictObject({
  ...paging,
  ...dated,
  type: z.string().optional(),
  types: z.array(z.string()).max(20).optional(),
});
const cancelParameters = z.strictObject({
  ...expandable,
  cancellation_reason: z.enum(["abandoned", "duplicate", "fraudulent", "requested_by_customer"]).optional(),
});

function newestFirst<Row>(rows: readonly Row[]): Row[] {
  return [...rows].reverse();
}

function shown(context: ApiContext, changes: Changes, answer: object, expand: string[] | undefined): object {
  return expanded(changes, answer, expand, () =>
    newestFirst(context.store.all("refunds")).map((row) => row.refund),
  );
}

function shownEvent(context: ApiContext, event: WireEvent): WireEvent {
  const waiting = context.store.get("deliveries", event.id)?.state === "pending";
  return { ...event, pending_webhooks: waiting ? 1 : 0 };
}

/** A route that shows one object. */
function show(
  path: RegExp,
  kind: string,
  find: (context: ApiContext, changes: Changes, id: string) => object | undefined,
  param = "id",
): Route {
  return {
    method: "GET",
    path,
    prepare: (context, parameters, id) => {
      const { expand } = checkParameters(nothingMore, parameters);
      return (changes) => {
        const found = find(context, changes, id);
        if (!found) throw noSuchObject(kind, id, param);
        return shown(context, changes, found, expand);
      };
    },
  };
}

const ROUTES: readonly Route[] = [
  {
    method: "POST",
    path: /^\/v1\/checkout\/sessions$/,
    prepare: (context, parameters) => {
      const asked = checkParameters(createSessionParameters, parameters);
      return (changes) => {
        const { session } = createSession(changes, asked, context.paymentPage);
        return shown(context, changes, session, asked.expand);
      };
    },
  },
  {
    method: "GET",
    path: /^\/v1\/checkout\/sessions$/,
    prepare: (context, parameters) => {
      const asked = checkParameters(listSessions, parameters);
      return (changes) => {
        const sessions = newestFirst(context.store.all("sessions"))
          .map(({ id, session }) => sessionNow(changes, id)?.session ?? session)
          .filter(
            (session) =>
              isWithin(session.created, asked.created) &&
              (asked.payment_intent === undefined || session.payment_intent === asked.payment_intent) &&
              (asked.status === undefined || session.status === asked.status) &&
              (asked.customer_details === undefined ||
                session.customer_details?.email === asked.customer_details.email),
          );
        return shown(context, changes, listOf(sessions, asked, "/v1/checkout/sessions"), asked.expand);
      };
    },
  },
  show(
    /^\/v1\/checkout\/sessions\/([^/]+)$/,
    "checkout.session",
    (_context, changes, id) => requireSession(changes, id).session,
  ),
  {
    method: "GET",
    path: /^\/v1\/checkout\/sessions\/([^/]+)\/line_items$/,
    prepare: (context, parameters, id) => {
      const asked = checkParameters(listLines, parameters);
      return (changes) => {
        const { lineItems } = requireSession(changes, id);
        const list = listOf(lineItems, asked, `/v1/checkout/sessions/${id}/line_items`);
        return shown(context, changes, list, asked.expand);
      };
    },
  },
  {
    method: "POST",
    path: /^\/v1\/checkout\/sessions\/([^/]+)\/expire$/,
    prepare: (context, parameters, id) => {
      const { expand } = checkParameters(nothingMore, parameters);
      return (changes) => shown(context, changes, expireSession(changes, id).session, expand);
    },
  },
  {
    method: "GET",
    path: /^\/v1\/payment_intents$/,
    prepare: (context, parameters) => {
      const asked = checkParameters(listIntents, parameters);
      return (changes) => {
        const intents = newestFirst(context.store.all("intents")).filter((intent) =>
          isWithin(intent.created, asked.created),
        );
        return shown(context, changes, listOf(intents, asked, "/v1/payment_intents"), asked.expand);
      };
    },
  },
  show(
    /^\/v1\/payment_intents\/([^/]+)$/,
    "payment_intent",
    (_context, changes, id) => changes.get("intents", id),
    "intent",
  ),
  {
    method: "POST",
    path: /^\/v1\/payment_intents\/([^/]+)\/cancel$/,
    prepare: (_context, parameters, id) => {
      checkParameters(cancelParameters, parameters);
      return (changes) => cancelIntent(changes, id);
    },
  },
  {
    method: "GET",
    path: /^\/v1\/charges$/,
    prepare: (context, parameters) => {
      const asked = checkParameters(listOfIntent, parameters);
      return (changes) => {
        const charges = newestFirst(context.store.all("charges"))
          .map(({ charge }) => charge)
          .filter(
            (charge) =>
              isWithin(charge.created, asked.created) &&
              (asked.payment_intent === undefined || charge.payment_intent === asked.payment_intent),
          );
        return shown(context, changes, listOf(charges, asked, "/v1/charges"), asked.expand);
      };
    },
  },
  show(/^\/v1\/charges\/([^/]+)$/, "charge", (_context, changes, id) => changes.get("charges", id)?.charge),
  {
    method: "POST",
    path: /^\/v1\/refunds$/,
    prepare: (context, parameters) => {
      const asked = checkParameters(createRefundParameters, parameters);
      return (changes) =>
        shown(context, changes, createRefund(changes, asked, context.refundSettleMs), asked.expand);
    },
  },
  {
    method: "GET",
    path: /^\/v1\/refunds$/,
    prepare: (context, parameters) => {
      const asked = checkParameters(listOfIntent, parameters);
      return (changes) => {
        const refunds: Stripe.Refund[] = newestFirst(context.store.all("refunds"))
          .map(({ refund }) => refund)
          .filter(
            (refund) =>
              isWithin(refund.created, asked.created) &&
              (asked.payment_intent === undefined || refund.payment_intent === asked.payment_intent) &&
              (asked.charge === undefined || refund.charge === asked.charge),
          );
        return shown(context, changes, listOf(refunds, asked, "/v1/refunds"), asked.expand);
      };
    },
  },
  show(/^\/v1\/refunds\/([^/]+)$/, "refund", (_context, changes, id) => changes.get("refunds", id)?.refund),
  {
    method: "POST",
    path: /^\/v1\/refunds\/([^/]+)$/,
    prepare: (context, parameters, id) => {
      const asked = checkParameters(updateRefundParameters, parameters);
      return (changes) => shown(context, changes, updateRefund(changes, id, asked), asked.expand);
    },
  },
  {
    method: "GET",
    path: /^\/v1\/events$/,
    prepare: (context, parameters) => {
      const asked = checkParameters(listEvents, parameters);
      return (changes) => {
        const events = newestFirst(context.store.all("events"))
          .filter(
            (event) =>
              isWithin(event.created, asked.created) &&
              (asked.type === undefined || event.type === asked.type) &&
              (asked.types === undefined || asked.types.includes(event.type)),
          )
          .map((event) => shownEvent(context, event));
        return shown(context, changes, listOf(events, asked, "/v1/events"), asked.expand);
      };
    },
  },
  show(/^\/v1\/events\/([^/]+)$/, "event", (context, changes, id) => {
    const event = changes.get("events", id);
    return event && shownEvent(context, event);
  }),
];

/** The route of a request, with its parameters still to be checked; undefined where there is none. */
export function routeFor(
  method: string,
  path: string,
): ((context: ApiContext, parameters: Parameters) => (changes: Changes) => object) | undefined {
  for (const route of ROUTES) {
    const match = route.method === method ? route.path.exec(path) : null;
    if (match) {
      return (context, parameters) => route.prepare(context, parameters, match[1] ?? "");
    }
  }
  return undefined;
}
