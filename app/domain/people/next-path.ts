import { href } from "react-router";
import { can, type Role } from "./permissions";

/**
 * A path of ours to go on to, from what an address or form asked for; null for anything that could lead elsewhere
 * or that would sign out or set something off. Fragments are dropped.
 */
export function safePath(asked: string | null | undefined): string | null {
  if (asked === null || asked === undefined || asked.length > 2_000) return null;
  // Browsers take "\" for "/" and drop tabs and line breaks inside addresses.
  if (!asked.startsWith("/") || /^\/[/\\]/.test(asked) || hasControl(asked)) return null;
  const base = "http://shop.invalid";
  if (!URL.canParse(asked, base)) return null;
  const url = new URL(asked, base);
  if (url.origin !== base || url.pathname.startsWith("//")) return null;
  if (/\/(sign-in|sign-out|sign-up)$/.test(url.pathname)) return null;
  return url.pathname + url.search;
}

function hasControl(text: string): boolean {
  return [...text].some((character) => character <= "\u001f" || character === "\u007f");
}

/** The page somebody with these roles wants first. `lang` is the address segment of the language, if it has one. */
export function firstPage(roles: readonly Role[], lang?: string): string {
  if (can(roles, "studio.see")) {
    if (can(roles, "today.see")) return href("/studio");
    if (can(roles, "orders.see")) return href("/studio/orders");
  }
  return can(roles, "orders.own")
    ? href("/:lang?/account/orders", { lang })
    : href("/:lang?/account", { lang });
}
