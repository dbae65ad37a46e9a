import { checkScan } from "~/domain/rolls/check-scan.server";
import { noteScanFailure } from "~/domain/rolls/note-failure.server";
import { checkScanJob } from "./check-scan.job";
import { handle } from "./job";

export const handler = handle(
  checkScanJob,
  async ({ scanId }, { last }) => {
    try {
      await checkScan(scanId);
    } catch (error) {
      await noteScanFailure(scanId, error, last);
      throw error;
    }
  },
  { imaging: true },
);
