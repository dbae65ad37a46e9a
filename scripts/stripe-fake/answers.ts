import type Stripe from "stripe";
import { badParameter } from "./faults";
import type { WireLineItem } from "./objects";
import type { Changes } from "./store";

type JsonObject = { [name: string]: unknown };
type Listed = { id: string };

function isObject(value: unknown): value is JsonObject {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}

/** One page of a list, newest first unless it is given in an order of its own. */
export function listOf<Item extends Listed>(
  items: readonly Item[],
  asked: {
    limit?: number | undefined;
    starting_after?: string | undefined;
    ending_before?: string | undefined;
  },
  url: string,
): Omit<Stripe.ApiList<Item>, "data"> & { data: Item[] } {
  const limit = asked.limit ?? 10;
  const place = (id: string, param: string) => {
    const at = items.findIndex((item) => item.id === id);
    if (at === -1)
      throw badParameter(`The list has no entry '${id}' to go on from.`, param, "resource_missing");
    return at;
  };
  if (asked.ending_before !== undefined) {
    const end = place(asked.ending_before, "ending_before");
    const begin = Math.max(0, end - limit);
    return { object: "list", data: items.slice(begin, end), has_more: begin > 0, url };
  }
  const begin = asked.starting_after === undefined ? 0 : place(asked.starting_after, "starting_after") + 1;
  const data = items.slice(begin, begin + limit);
  return { object: "list", data, has_more: begin + limit < items.length, url };
}

/** Line items of a session as Stripe puts them into the session itself: the first ten. */
function lineItemsOf(changes: Changes, id: string): unknown {
  const items: WireLineItem[] = changes.get("sessions", id)?.lineItems ?? [];
  return listOf(items, {}, `/v1/checkout/sessions/${id}/line_items`);
}

function refundsOf(charge: string, all: readonly Stripe.Refund[]): unknown {
  return listOf(
    all.filter((refund) => refund.charge === charge),
    {},
    `/v1/charges/${charge}/refunds`,
  );
}

function byId(changes: Changes, id: string): unknown {
  return (
    changes.get("sessions", id)?.session ??
    changes.get("intents", id) ??
    changes.get("charges", id)?.charge ??
    changes.get("refunds", id)?.refund ??
    changes.get("events", id)
  );
}

/**
 * The object with what the request asked to see in full put in the place of its id.
 * @param refunds all refunds, newest first: a charge shows its own when asked for them.
 */
export function expanded(
  changes: Changes,
  answer: object,
  paths: readonly string[] | undefined,
  refunds: () => readonly Stripe.Refund[],
): object {
  if (!paths || paths.length === 0) return answer;
  const copy = structuredClone(answer);
  for (const path of paths) {
    const steps = path.split(".");
    if (steps.length > 4) throw badParameter("Properties can be expanded four levels deep.", "expand");
    open(copy, steps, path);
  }
  return copy;

  function open(value: unknown, steps: readonly string[], path: string): void {
    const [step, ...rest] = steps;
    if (step === undefined) return;
    if (Array.isArray(value)) {
      for (const each of value) open(each, steps, path);
      return;
    }
    if (!isObject(value)) throw badParameter(`The property '${path}' cannot be expanded.`, "expand");
    if (value.object === "checkout.session" && step === "line_items") {
      value.line_items ??= lineItemsOf(changes, String(value.id));
    } else if (value.object === "charge" && step === "refunds") {
      value.refunds ??= refundsOf(String(value.id), refunds());
    } else if (typeof value[step] === "string") {
      const found = byId(changes, value[step]);
      if (!found) throw badParameter(`The property '${path}' cannot be expanded.`, "expand");
      value[step] = structuredClone(found);
    } else if (value[step] === null) {
      return;
    } else if (!isObject(value[step]) && !Array.isArray(value[step])) {
      throw badParameter(`The property '${path}' cannot be expanded.`, "expand");
    }
    open(value[step], rest, path);
  }
}
