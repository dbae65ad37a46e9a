/**
 * Who may do what: the one table. Whatever it does not say is refused.
 */

/** What a person's account is in the studio. A person may have several. */
export const ROLES = ["photographer", "assistant", "printer", "stockist", "bookkeeper", "collector"] as const;
export type Role = (typeof ROLES)[number];

/** Whether a text is a role. */
export function isRole(text: string): text is Role {
  return ROLES.some((role) => role === text);
}

/**
 * Everything that can be allowed. "see" reads; "own" reaches only what belongs to the person's own party, which the
 * query has to ensure with the ids it reads.
 */
export const CAPABILITIES = [
  /** Enter the studio's pages at all. */
  "studio.see",
  /** What needs doing today. */
  "today.see",
  "rolls.see",
  "rolls.change",
  /** Prints and series: words, crop, publishing, withdrawing. */
  "prints.see",
  "prints.change",
  "editions.see",
  /** Plan and open an edition; it sets the limit and the prices. */
  "editions.open",
  /** Lower a limit, close early, move a release. */
  "editions.change",
  /** Set aside, give, keep, retire, bring back a copy. */
  "copies.place",
  /** The ledger with its private parts. */
  "ledger.see",
  "prices.change",
  /** Orders with buyers' names and addresses. */
  "orders.see",
  /** An order made by hand, at the book's prices. */
  "orders.make",
  "orders.send",
  /** Cancel with the money given back. */
  "orders.cancel",
  /** An agreed reduction. */
  "reductions.make",
  "refunds.see",
  "refunds.make",
  "invoices.see",
  "tax.see",
  "papers.see",
  "papers.change",
  /** Parties and accounts. */
  "people.see",
  "people.change",
  "settings.see",
  "settings.change",
  "printroom.see",
  "printroom.work",
  "figures.see",
  "figures.export",
  /** The jobs given to an outside printer: file, paper, size, number; never a buyer. */
  "printjobs.own",
  /** A stockist's consigned sheets, its reports of sales and its statements. */
  "consignments.own",
  /** A buyer's own orders. */
  "orders.own",
  /** A buyer's own certificates. */
  "certificates.own",
  /** Passing one's own print on to a new owner. */
  "copies.pass_on",
  /** One's own account: address, password, sessions. */
  "account.own",
] as const;
export type Capability = (typeof CAPABILITIES)[number];

const GRANTS: Record<Role, readonly Capability[]> = {
  photographer: CAPABILITIES,
  assistant: [
    "studio.see",
    "today.see",
    "rolls.see",
    "rolls.change",
    "prints.see",
    "prints.change",
    "editions.see",
    "ledger.see",
    "orders.see",
    "orders.make",
    "orders.send",
    "papers.see",
    "printroom.see",
    "printroom.work",
    "account.own",
  ],
  printer: ["printjobs.own", "account.own"],
  stockist: ["consignments.own", "account.own"],
  bookkeeper: [
    "studio.see",
    "orders.see",
    "invoices.see",
    "refunds.see",
    "tax.see",
    "figures.see",
    "figures.export",
    "account.own",
  ],
  collector: ["orders.own", "certificates.own", "copies.pass_on", "account.own"],
};

/** Whether any of a person's roles allows it. No role, no permission: a visitor may do nothing that is listed. */
export function can(roles: readonly Role[], capability: Capability): boolean {
  return roles.some((role) => GRANTS[role].includes(capability));
}

/** Everything a person's roles allow together, in the order of the table. */
export function capabilitiesOf(roles: readonly Role[]): Capability[] {
  return CAPABILITIES.filter((capability) => can(roles, capability));
}
