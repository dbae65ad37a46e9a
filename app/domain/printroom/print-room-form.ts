import { z } from "zod";
import { line, optionalText } from "~/platform/form-fields";

/** What can be said of a sheet in the print room, told apart by `intent`. */
export const printRoomForm = z.discriminatedUnion("intent", [
  z.object({ intent: z.literal("printed"), sheetId: z.uuid() }),
  z.object({ intent: z.literal("signed"), sheetId: z.uuid() }),
  z.object({ intent: z.literal("packed"), sheetId: z.uuid() }),
  z.object({
    intent: z.literal("spoiled"),
    sheetId: z.uuid(),
    reason: line("Say what is wrong with the sheet; the book keeps the reason.", 300),
    fate: optionalText(200),
  }),
]);
