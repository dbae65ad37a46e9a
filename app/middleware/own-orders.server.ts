import { createCookie } from "react-router";
import { z } from "zod";
import { env } from "~/platform/env.server";

/** What a browser has to do with orders: those it made or paid, and those whose postcode it has given. */
export type OwnOrders = { made: string[]; opened: string[] };

/** The oldest are forgotten first; their pages then ask for the postcode. */
const MOST_KEPT = 20;

const ownOrdersCookie = createCookie(`${env.cookiePrefix}_orders`, {
  path: "/",
  httpOnly: true,
  sameSite: "lax",
  secure: env.secure,
  secrets: [env.SESSION_SECRET],
  maxAge: 60 * 60 * 24 * 180,
});

const contents = z.object({ made: z.array(z.uuid()), opened: z.array(z.uuid()) });

/** The orders a browser may see more of; a cookie that cannot be read names none. */
export async function readOwnOrders(request: Request): Promise<OwnOrders> {
  const parsed = contents.safeParse(await ownOrdersCookie.parse(request.headers.get("cookie")));
  return parsed.success ? parsed.data : { made: [], opened: [] };
}

/** `Set-Cookie` that adds an order to those this browser has made or opened. */
export async function rememberOrder(request: Request, as: keyof OwnOrders, orderId: string): Promise<string> {
  const own = await readOwnOrders(request);
  const kept = [...own[as].filter((id) => id !== orderId), orderId].slice(-MOST_KEPT);
  return ownOrdersCookie.serialize({ ...own, [as]: kept });
}
