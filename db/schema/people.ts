import { sql } from "drizzle-orm";
import {
  boolean,
  check,
  index,
  integer,
  jsonb,
  pgEnum,
  pgTable,
  primaryKey,
  text,
  uniqueIndex,
  uuid,
} from "drizzle-orm/pg-core";
import { id, instant, recordedAt } from "./columns";

export const partyKind = pgEnum("party_kind", ["person", "firm"]);
export const role = pgEnum("role", [
  "photographer",
  "assistant",
  "printer",
  "stockist",
  "bookkeeper",
  "collector",
]);
export const tokenPurpose = pgEnum("token_purpose", ["verify_email", "reset_password"]);

/** A postal address as it is written on a parcel; checked by `app/domain/people/address.ts`. */
export type AddressJson = {
  name: string;
  line1: string;
  line2?: string;
  city: string;
  region?: string;
  postcode?: string;
  country: string;
};

/** A person or firm in the book. Needs no account: a fair's buyer has none, a gallery may have several. */
export const parties = pgTable(
  "parties",
  {
    id: id(),
    kind: partyKind().notNull().default("person"),
    name: text().notNull(),
    email: text(),
    telephone: text(),
    address: jsonb().$type<AddressJson>(),
    notes: text().notNull().default(""),
    createdAt: recordedAt(),
  },
  (t) => [index("parties_email").on(sql`lower(${t.email})`), index("parties_name").on(sql`lower(${t.name})`)],
);

export const accounts = pgTable(
  "accounts",
  {
    id: id(),
    partyId: uuid()
      .notNull()
      .references(() => parties.id),
    email: text().notNull(),
    passwordHash: text(),
    emailVerifiedAt: instant(),
    disabledAt: instant(),
    createdAt: recordedAt(),
  },
  (t) => [uniqueIndex("accounts_email").on(sql`lower(${t.email})`), index("accounts_party").on(t.partyId)],
);

export const accountRoles = pgTable(
  "account_roles",
  {
    accountId: uuid()
      .notNull()
      .references(() => accounts.id, { onDelete: "cascade" }),
    role: role().notNull(),
    grantedBy: uuid().references(() => accounts.id),
    grantedAt: recordedAt(),
  },
  (t) => [primaryKey({ columns: [t.accountId, t.role] })],
);

/** A signed-in browser. Only the SHA-256 of the cookie's secret is kept. */
export const sessions = pgTable(
  "sessions",
  {
    id: id(),
    secretHash: text().notNull().unique(),
    accountId: uuid()
      .notNull()
      .references(() => accounts.id, { onDelete: "cascade" }),
    createdAt: recordedAt(),
    lastSeenAt: recordedAt(),
    expiresAt: instant().notNull(),
  },
  (t) => [index("sessions_account").on(t.accountId)],
);

/** Single-use links sent by e-mail to the holder of an account; only hashes are kept. */
export const accountTokens = pgTable(
  "account_tokens",
  {
    id: id(),
    accountId: uuid()
      .notNull()
      .references(() => accounts.id, { onDelete: "cascade" }),
    purpose: tokenPurpose().notNull(),
    tokenSeed: text().notNull(),
    tokenHash: text().notNull().unique(),
    createdAt: recordedAt(),
    expiresAt: instant().notNull(),
    usedAt: instant(),
  },
  (t) => [index("account_tokens_account").on(t.accountId, t.purpose)],
);

export const invitations = pgTable(
  "invitations",
  {
    id: id(),
    email: text().notNull(),
    name: text().notNull(),
    role: role().notNull(),
    partyId: uuid().references(() => parties.id),
    invitedBy: uuid()
      .notNull()
      .references(() => accounts.id),
    tokenSeed: text().notNull(),
    tokenHash: text().notNull().unique(),
    createdAt: recordedAt(),
    expiresAt: instant().notNull(),
    acceptedAt: instant(),
    withdrawnAt: instant(),
  },
  (t) => [check("invitation_email", sql`position('@' in ${t.email}) > 1`)],
);

/** One row: the studio itself. Made by /setup or by the demo seed. */
export const studio = pgTable(
  "studio",
  {
    only: boolean().primaryKey().default(true),
    name: text().notNull(),
    photographer: text().notNull(),
    signature: text().notNull(),
    email: text().notNull(),
    telephone: text().notNull().default(""),
    address: jsonb().$type<AddressJson>().notNull(),
    country: text().notNull(),
    zone: text().notNull(),
    zoneName: text().notNull().default(""),
    currency: text().notNull(),
    statement: text().notNull().default(""),
    holdMinutes: integer().notNull().default(10),
    pixelLimitMegapixels: integer().notNull().default(200),
    createdAt: recordedAt(),
  },
  (t) => [
    check("studio_only_one", sql`${t.only}`),
    check("studio_currency", sql`${t.currency} ~ '^[A-Z]{3}$'`),
  ],
);
