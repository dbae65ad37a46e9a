import { createCookie } from "react-router";
import { z } from "zod";
import { env } from "~/platform/env.server";

/** The formats a browser has put in its basket, in order; one may stand there more than once. Nothing is held. */
export type Basket = string[];

/** More lines than anybody orders at once. */
const MOST_LINES = 12;

const basketCookie = createCookie(`${env.cookiePrefix}_basket`, {
  path: "/",
  httpOnly: true,
  sameSite: "lax",
  secure: env.secure,
  secrets: [env.SESSION_SECRET],
  maxAge: 60 * 60 * 24 * 60,
});

const contents = z.array(z.uuid()).max(MOST_LINES);

/** What lies in the request's basket; a cookie that cannot be read is an empty one. */
export async function readBasket(request: Request): Promise<Basket> {
  const parsed = contents.safeParse(await basketCookie.parse(request.headers.get("cookie")));
  return parsed.success ? parsed.data : [];
}

/** `Set-Cookie` for a basket; lines past the most there can be are left out. */
export function basketHeader(basket: Basket): Promise<string> {
  return basketCookie.serialize(basket.slice(0, MOST_LINES));
}
