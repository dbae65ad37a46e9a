import { type Capability, can, type Role } from "./permissions";

/**
 * Who may open which address: one row for every route of `app/routes.ts`, by its pattern. The guards read this table
 * and refuse what it does not name; a generated test asks every route as every role. Commands check again, and
 * where one form holds several acts (an order: send, cancel, refund) theirs is the finer check.
 */

/** Anyone; nobody, because the route has no such method; or whoever has one of these capabilities. */
export type Access = "anyone" | "nobody" | readonly Capability[];

export type RoutePermission = {
  /** The address with its parameters: "/studio/orders/:orderId". */
  pattern: string;
  /** GET and HEAD. */
  see: Access;
  /** Everything else. */
  change: Access;
};

const open = (pattern: string, change: "anyone" | "nobody" = "nobody"): RoutePermission => ({
  pattern,
  see: "anyone",
  change,
});

const kept = (
  pattern: string,
  see: readonly Capability[],
  change: readonly Capability[] | "nobody" = "nobody",
): RoutePermission => ({ pattern, see, change });

export const ROUTE_PERMISSIONS: readonly RoutePermission[] = [
  open("/healthz"),
  open("/readyz"),
  { pattern: "/hooks/stripe", see: "nobody", change: "anyone" },
  open("/api/v1/openapi.json"),
  open("/api/v1/prints"),
  open("/api/v1/prints/:slug"),
  open("/api/v1/editions/:id"),
  { pattern: "/theme", see: "nobody", change: "anyone" },
  open("/setup", "anyone"),

  kept("/studio", ["today.see"], ["today.see"]),
  kept("/studio/rolls", ["rolls.see"], ["rolls.change"]),
  kept("/studio/rolls/new", ["rolls.change"], ["rolls.change"]),
  kept("/studio/rolls/:rollId", ["rolls.see"], ["rolls.change"]),
  kept("/studio/rolls/:rollId/uploads", ["rolls.change"], ["rolls.change"]),
  kept("/studio/rolls/:rollId/frames/:frameId", ["rolls.see"], ["rolls.change"]),
  kept("/studio/proofs/:proofId", ["rolls.see", "prints.see"]),
  kept("/studio/prints", ["prints.see"], ["prints.change"]),
  kept("/studio/prints/new", ["prints.change"], ["prints.change"]),
  kept("/studio/prints/:printId", ["prints.see"], ["prints.change"]),
  kept("/studio/series", ["prints.see"], ["prints.change"]),
  kept("/studio/editions", ["editions.see"], ["editions.change"]),
  kept("/studio/editions/new", ["editions.open"], ["editions.open"]),
  kept("/studio/editions/figures", ["editions.open"], ["editions.open"]),
  kept(
    "/studio/editions/:editionId",
    ["editions.see"],
    ["editions.open", "editions.change", "copies.place", "prices.change"],
  ),
  kept("/studio/print-room", ["printroom.see"], ["printroom.work"]),
  kept("/studio/orders", ["orders.see"], ["orders.send"]),
  kept("/studio/orders/new", ["orders.make"], ["orders.make"]),
  kept(
    "/studio/orders/:orderId",
    ["orders.see"],
    ["orders.make", "orders.send", "orders.cancel", "refunds.make", "reductions.make"],
  ),
  kept("/studio/papers", ["papers.see"], ["papers.change"]),
  kept("/studio/papers/:paperId", ["papers.see"], ["papers.change"]),
  kept("/studio/people", ["people.see"], ["people.change"]),
  kept("/studio/people/:partyId", ["people.see"], ["people.change"]),
  kept("/studio/settings", ["settings.see"], ["settings.change"]),

  open("/:lang?"),
  open("/:lang?/prints"),
  open("/:lang?/prints/:slug", "anyone"),
  open("/:lang?/series"),
  open("/:lang?/series/:slug"),
  open("/:lang?/check", "anyone"),
  open("/:lang?/check/:code"),
  open("/:lang?/basket", "anyone"),
  open("/:lang?/checkout", "anyone"),
  open("/:lang?/orders/:token", "anyone"),
  open("/:lang?/orders/:token/pay", "anyone"),
  open("/:lang?/sign-in", "anyone"),
  open("/:lang?/sign-up", "anyone"),
  open("/:lang?/sign-out", "anyone"),
  open("/:lang?/forgotten", "anyone"),
  open("/:lang?/reset/:token", "anyone"),
  open("/:lang?/verify/:token", "anyone"),
  open("/:lang?/invitation/:token", "anyone"),
  kept("/:lang?/account", ["account.own"], ["account.own"]),
  kept("/:lang?/account/orders", ["orders.own"]),
  open("/:lang?/*"),
];

const BY_PATTERN = new Map(ROUTE_PERMISSIONS.map((row) => [row.pattern, row]));

const READS = new Set(["GET", "HEAD"]);

/** Who may ask a route with a method; nobody where the table does not name it. */
export function accessTo(pattern: string, method: string): Access {
  // React Router joins the paths of the routes as they stand in `routes.ts`, without a slash before the first.
  const row = BY_PATTERN.get(pattern.startsWith("/") ? pattern : `/${pattern}`);
  if (row === undefined) return "nobody";
  return READS.has(method.toUpperCase()) ? row.see : row.change;
}

/** Whether somebody with these roles (none for a visitor) has that access. */
export function allows(access: Access, roles: readonly Role[]): boolean {
  if (access === "anyone") return true;
  if (access === "nobody") return false;
  return access.some((capability) => can(roles, capability));
}
