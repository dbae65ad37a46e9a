import { buildProofs } from "~/domain/rolls/build-proofs.server";
import { noteScanFailure } from "~/domain/rolls/note-failure.server";
import { buildProofsJob } from "./build-proofs.job";
import { handle } from "./job";

export const handler = handle(
  buildProofsJob,
  async ({ scanId }, { last }) => {
    try {
      await buildProofs(scanId);
    } catch (error) {
      await noteScanFailure(scanId, error, last);
      throw error;
    }
  },
  { imaging: true },
);
