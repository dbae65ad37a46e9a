import type { z } from "zod";
import type { Actor } from "~/domain/people/allowed";
import { chooseFrame, noteFrame } from "./edit-frame.server";
import type { frameForm } from "./frame-form";
import { moveFrame } from "./move-frame.server";
import { type FrameRemoved, removeFrame } from "./remove-frame.server";
import { retryScans } from "./retry-scan.server";

/** Does what a form on a frame's page asks for. Throws AppError `not_allowed`, `not_found`. */
export async function actOnFrame(
  actor: Actor,
  of: { rollId: string; frameId: string },
  form: z.output<typeof frameForm>,
): Promise<FrameRemoved | { code: "done" }> {
  switch (form.intent) {
    case "notes":
      await noteFrame(actor, of, form);
      break;
    case "choose":
      await chooseFrame(actor, of, form.chosen === "yes");
      break;
    case "move":
      await moveFrame(actor, { ...of, to: form.to });
      break;
    case "retry":
      await retryScans(actor, of);
      break;
    case "remove":
      return removeFrame(actor, { ...of, sure: form.sure !== undefined });
  }
  return { code: "done" };
}
