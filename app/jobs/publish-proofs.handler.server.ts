import { publishProofs } from "~/domain/rolls/publish-proofs.server";
import { handle } from "./job";
import { publishProofsJob } from "./publish-proofs.job";

export const handler = handle(publishProofsJob, ({ printId, formerKeys }) =>
  publishProofs(printId, formerKeys),
);
