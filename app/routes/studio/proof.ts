import { proofFile } from "~/domain/rolls/proof-file.server";
import { AppError } from "~/platform/errors";
import type { Route } from "./+types/proof";

/** A proof for whoever works in the studio: the guard of the studio's layout has looked at the session. */
export async function loader({ params }: Route.LoaderArgs) {
  const proof = await proofFile(params.proofId);
  if (proof === null) throw new AppError("not_found");
  return new Response(proof.body, {
    headers: {
      "Content-Type": proof.contentType,
      "Content-Length": String(proof.bytes),
      // A proof never changes under its id; an hour bounds what a shared computer remembers after signing out.
      "Cache-Control": "private, max-age=3600",
    },
  });
}
