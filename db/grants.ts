/** Tables the application may only add to. */
const APPEND_ONLY = ["ledger_entries", "payments", "order_events"];

/** Tables in which the application may also change rows, but never remove them. */
const NO_DELETE = [
  "ledger_private",
  "parties",
  "accounts",
  "invitations",
  "studio",
  "rolls",
  "series",
  "sheets",
  "holds",
  "number_offers",
  "papers",
  "vat_registrations",
  "tax_rates",
  "delivery_rates",
  "orders",
  "order_lines",
  "payment_sessions",
  "refunds",
  "dispatches",
  "webhook_events",
  "emails",
  "setup_codes",
];

/** Tables of working state, and those whose guards (triggers) allow removal only while nothing was promised. */
const ALL = [
  "account_roles",
  "account_tokens",
  "sessions",
  "frames",
  "scans",
  "prints",
  "print_pictures",
  "proofs",
  "editions",
  "formats",
  "price_steps",
  "copies",
  "rate_limits",
];

/**
 * The privileges of the application's role: it owns nothing, and gets no more than it needs.
 * `migrate` runs these as the owner after every migration.
 */
export function grantStatements(appRole: string): string[] {
  const role = `"${appRole.replaceAll('"', '""')}"`;
  return [
    `GRANT USAGE ON SCHEMA public TO ${role}`,
    `REVOKE ALL ON ALL TABLES IN SCHEMA public FROM ${role}`,
    `GRANT SELECT, INSERT ON ${APPEND_ONLY.join(", ")} TO ${role}`,
    `GRANT SELECT, INSERT, UPDATE ON ${NO_DELETE.join(", ")} TO ${role}`,
    `GRANT SELECT, INSERT, UPDATE, DELETE ON ${ALL.join(", ")} TO ${role}`,
    `GRANT USAGE, SELECT ON ALL SEQUENCES IN SCHEMA public TO ${role}`,
    `GRANT USAGE ON SCHEMA pgboss TO ${role}`,
    `GRANT SELECT, INSERT, UPDATE, DELETE ON ALL TABLES IN SCHEMA pgboss TO ${role}`,
    `GRANT EXECUTE ON ALL FUNCTIONS IN SCHEMA pgboss TO ${role}`,
  ];
}
