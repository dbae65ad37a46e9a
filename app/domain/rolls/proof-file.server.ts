import { db } from "db/client.server";
import { proofs } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { PROOF_TYPE } from "~/domain/imaging/render-proofs.server";
import { readObject } from "~/platform/storage.server";
import { isUuid } from "~/platform/uuid";

/** A proof out of the private bucket, for whoever may see the studio's pictures; null where there is none. */
export async function proofFile(
  proofId: string,
): Promise<{ body: ReadableStream; contentType: string; bytes: number } | null> {
  if (!isUuid(proofId)) return null;
  const [proof] = await db
    .select({ key: proofs.objectKey, format: proofs.format })
    .from(proofs)
    .where(eq(proofs.id, proofId));
  if (proof === undefined) return null;
  const object = await readObject(proof.key);
  return object === null ? null : { ...object, contentType: PROOF_TYPE[proof.format] };
}
