import type { Role } from "~/domain/people/permissions";
import type { Actor } from "./ledger.server";

/** Who acts from the studio: as what, by which account, with which roles. */
export type StudioActor = Actor & { accountId: string; roles: readonly Role[] };

/** Somebody signed in, as commands on the book want to know who acts. */
export function studioActor(signedIn: { accountId: string; roles: readonly Role[] }): StudioActor {
  return {
    as: signedIn.roles.includes("photographer") ? "photographer" : "assistant",
    accountId: signedIn.accountId,
    roles: signedIn.roles,
  };
}
