import { theStudio } from "~/domain/studio/studio.server";
import { env } from "~/platform/env.server";
import type { EmailStudio } from "./layout";

/** The studio as an e-mail's foot names it. Throws AppError `unavailable` before it has been set up. */
export async function emailStudio(): Promise<EmailStudio> {
  const { name, email, address } = await theStudio();
  const lines = [address.line1, address.line2, address.city, address.region, address.postcode];
  return { name, email, address: lines.filter((line) => line !== undefined && line !== "").map(String) };
}

/** A page's whole address, for a link in an e-mail: `pageAddress(href("/:lang?/account", { lang }))`. */
export function pageAddress(path: string): string {
  return new URL(path, env.BASE_URL).href;
}
