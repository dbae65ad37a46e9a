import type { Tx } from "db/client.server";
import { copies, holds, ledgerEntries } from "db/schema/schema";
import { and, count, eq, inArray, isNotNull, isNull } from "drizzle-orm";
import { ISSUING_KINDS } from "./transitions";

/** Ids of copies that were issued at some time, whether or not they have come back: the ledger says so. */
export async function issuedCopies(db: Tx["db"], editionId: string): Promise<Set<string>> {
  const rows = await db
    .selectDistinct({ id: ledgerEntries.copyId })
    .from(ledgerEntries)
    .where(
      and(
        eq(ledgerEntries.editionId, editionId),
        isNotNull(ledgerEntries.copyId),
        inArray(ledgerEntries.kind, [...ISSUING_KINDS]),
      ),
    );
  const coded = await db
    .select({ id: copies.id })
    .from(copies)
    .where(and(eq(copies.editionId, editionId), isNotNull(copies.checkCode)));
  return new Set([...rows.flatMap((row) => row.id ?? []), ...coded.map((row) => row.id)]);
}

/** How many copies of an edition are held for a checkout now. */
export async function heldCopies(db: Tx["db"], editionId: string): Promise<number> {
  const [row] = await db
    .select({ n: count() })
    .from(holds)
    .innerJoin(copies, eq(copies.id, holds.copyId))
    .where(and(eq(copies.editionId, editionId), isNull(holds.endedAt)));
  return row?.n ?? 0;
}
