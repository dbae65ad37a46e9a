import type { Tx } from "db/client.server";

/*
 * Proofs lie under names made from their contents, so two pictures may share one object. An object is removed only
 * while nobody can be writing the row that needs it: whoever writes holds the lock shared, whoever removes, alone.
 * Both end with the transaction.
 */
const PROOF_OBJECTS = 7_025_005;

export async function lockForWritingProofs(tx: Tx): Promise<void> {
  await tx.client.query("select pg_advisory_xact_lock_shared($1)", [PROOF_OBJECTS]);
}

export async function lockForRemovingProofs(tx: Tx): Promise<void> {
  await tx.client.query("select pg_advisory_xact_lock($1)", [PROOF_OBJECTS]);
}
