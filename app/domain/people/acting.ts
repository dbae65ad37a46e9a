import type { Actor } from "~/domain/editions/ledger.server";
import type { Role } from "./permissions";

/** Somebody signed in, as commands that write the ledger want to know who acts: a role in public, the account in private. */
export function acting(visitor: {
  accountId: string;
  roles: readonly Role[];
}): Actor & { roles: readonly Role[] } {
  const as = visitor.roles.includes("photographer") ? "photographer" : "assistant";
  return { as, accountId: visitor.accountId, roles: visitor.roles };
}
