import { render, toPlainText } from "@react-email/render";
import type { Language } from "~/languages/language";
import { isEmailKind } from "./kinds";
import { BUILDERS } from "./registry.server";

/** Rows (margin lines, sums) stay on one line, and titles keep their small letters. */
const TEXT_SELECTORS: NonNullable<Parameters<typeof toPlainText>[1]>["selectors"] = [
  { selector: "table.row", format: "dataTable", options: { uppercaseHeaderCells: false } },
  { selector: "h1", options: { uppercase: false } },
];

export type MadeEmail = { subject: string; html: string; text: string; replyTo?: string };

/**
 * Makes an e-mail from its row, HTML and text from one source; null when the reason for it has gone.
 * Throws when its kind is unknown or its payload is not that kind's.
 */
export async function makeEmail(row: {
  kind: string;
  payload: unknown;
  language: Language;
  recipient: string;
}): Promise<MadeEmail | null> {
  if (!isEmailKind(row.kind)) throw new Error(`there is no e-mail of the kind ${row.kind}`);
  const built = await BUILDERS[row.kind](row.payload, row.language, row.recipient);
  if (built === null) return null;
  const { subject, body, replyTo } = built;
  const html = await render(body);
  const text = toPlainText(html, { selectors: TEXT_SELECTORS });
  return { subject, html, text, ...(replyTo === undefined ? {} : { replyTo }) };
}
