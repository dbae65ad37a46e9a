import { buildPrintProofs } from "~/domain/rolls/build-print-proofs.server";
import { notePrintPictureFailure } from "~/domain/rolls/note-failure.server";
import { buildPrintProofsJob } from "./build-print-proofs.job";
import { handle } from "./job";

export const handler = handle(
  buildPrintProofsJob,
  async ({ printPictureId }, { last }) => {
    try {
      await buildPrintProofs(printPictureId);
    } catch (error) {
      await notePrintPictureFailure(printPictureId, error, last);
      throw error;
    }
  },
  { imaging: true },
);
