import { createContext } from "react-router";
import type { Role } from "~/domain/people/permissions";
import type { Language } from "~/languages/language";

/** Who is signed in, as the session middleware found them. */
export type SignedIn = {
  sessionId: string;
  accountId: string;
  partyId: string;
  email: string;
  name: string;
  roles: Role[];
  emailVerified: boolean;
};

/** Facts of the request that every handler may need; set by the root middleware. */
export type RequestInfo = { requestId: string; clientIp: string; nonce: string; secure: boolean };

// None has a default: reading one that no middleware has set throws, so a missing guard is seen at once.
export const requestInfoContext = createContext<RequestInfo>();
/** null for a visitor. */
export const visitorContext = createContext<SignedIn | null>();
/** Set only below a guard that lets nobody else pass. */
export const signedInContext = createContext<SignedIn>();
export const languageContext = createContext<Language>();
