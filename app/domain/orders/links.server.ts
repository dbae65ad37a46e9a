import { db } from "db/client.server";
import { orders } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { href } from "react-router";
import { type Language, segmentOf } from "~/languages/language";
import { env } from "~/platform/env.server";
import { sha256 } from "~/platform/ids.server";

/** The path of an order's page. Never logged: who holds it can see where the order stands. */
export function orderLink(language: Language, token: string): string {
  return href("/:lang?/orders/:token", { lang: segmentOf(language), token });
}

/** The same as a whole address, for e-mails. */
export function orderAddress(language: Language, token: string): string {
  return `${env.BASE_URL}${orderLink(language, token)}`;
}

/** The id of the order a link belongs to; null for a link that is mistyped or has been replaced. */
export async function orderIdOfToken(token: string): Promise<string | null> {
  const [order] = await db
    .select({ id: orders.id })
    .from(orders)
    .where(eq(orders.tokenHash, sha256(token)));
  return order?.id ?? null;
}
