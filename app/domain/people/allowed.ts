import { AppError } from "~/platform/errors";
import { type Capability, can, type Role } from "./permissions";

/** Who gives a command: an account and its roles. What the session middleware found (`SignedIn`) is one. */
export type Actor = { accountId: string; roles: readonly Role[] };

/** The command's own check, behind the route's. Throws AppError `not_allowed`. */
export function mustBeAllowed(actor: Actor, capability: Capability): void {
  if (!can(actor.roles, capability)) throw new AppError("not_allowed", capability);
}
