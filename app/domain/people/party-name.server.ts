import { db } from "db/client.server";
import { parties } from "db/schema/schema";
import { eq } from "drizzle-orm";

/** A party's name as the book has it; "" for one that is not there. */
export async function partyName(partyId: string): Promise<string> {
  const [party] = await db.select({ name: parties.name }).from(parties).where(eq(parties.id, partyId));
  return party?.name ?? "";
}
