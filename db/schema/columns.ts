import { sql } from "drizzle-orm";
import { timestamp, uuid } from "drizzle-orm/pg-core";

/** Primary key: a UUID made by the application (`app/platform/ids.server.ts`), time-ordered. */
export const id = () => uuid().primaryKey();

/** An instant in UTC; Drizzle hands it out as a Date. */
export const instant = () => timestamp({ withTimezone: true, mode: "date" });

/** When a row was recorded, by the database's clock unless the application says otherwise. */
export const recordedAt = () => instant().notNull().default(sql`now()`);
