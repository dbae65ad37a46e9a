/** What somebody who holds an order's link may see of it. */

/** Of the order: its buyer, and where it goes. */
export type OrderForAccess = {
  id: string;
  accountId: string | null;
  buyerPartyId: string;
  email: string | null;
  deliveryAddress: { postcode?: string } | null;
};

/** Of whoever asks: what their browser remembers, and who is signed in. */
export type Asking = {
  /** Orders this browser has made or paid. */
  made: readonly string[];
  /** Orders whose delivery postcode this browser has given. */
  opened: readonly string[];
  visitor: { accountId: string; partyId: string; email: string; emailVerified: boolean } | null;
};

/**
 * `link`: where the order stands, its numbers and sums. `details`: name, address and e-mail too. `paid`: this browser made
 * or paid it, and may correct the e-mail address as well.
 */
export type Access = "link" | "details" | "paid";

/**
 * How much of an order may be shown to somebody who has its link. An account sees its own orders, and once its e-mail
 * address is confirmed those made with that address or for its party: an address that anybody could claim proves nothing.
 */
export function accessToOrder(order: OrderForAccess, asking: Asking): Access {
  if (asking.made.includes(order.id)) return "paid";
  if (asking.opened.includes(order.id)) return "details";
  const { visitor } = asking;
  if (visitor === null) return "link";
  if (order.accountId === visitor.accountId) return "details";
  if (!visitor.emailVerified) return "link";
  const same = order.email !== null && order.email.toLowerCase() === visitor.email.toLowerCase();
  return same || order.buyerPartyId === visitor.partyId ? "details" : "link";
}
