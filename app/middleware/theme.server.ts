import { createCookie } from "react-router";
import { env } from "~/platform/env.server";

export type Theme = "day" | "safelight";

/** The studio's dark theme is a preference of the browser, so it needs no account. */
export const themeCookie = createCookie(`${env.cookiePrefix}_theme`, {
  path: "/",
  httpOnly: true,
  sameSite: "lax",
  secure: env.secure,
  maxAge: 60 * 60 * 24 * 365,
});

/** The theme the browser asked for, or none. */
export async function readTheme(request: Request): Promise<Theme | undefined> {
  const value: unknown = await themeCookie.parse(request.headers.get("cookie"));
  return value === "safelight" ? "safelight" : undefined;
}
