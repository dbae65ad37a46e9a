import { type APIRequestContext, type BrowserContext, expect, request } from "@playwright/test";
import { DEMO_LOGINS } from "../../db/seed/demo-logins.mjs";
import { shopUrl } from "./instance";

export type DemoRole = (typeof DEMO_LOGINS)[number]["role"];

/** The demo's account with a role. */
export function demoLogin(role: DemoRole): (typeof DEMO_LOGINS)[number] {
  const found = DEMO_LOGINS.find((login) => login.role === role);
  if (found === undefined) throw new Error(`the demo has no ${role}`);
  return found;
}

/**
 * Signs an account in as the sign-in page does without scripts.
 *
 * @param by whose cookies are to carry the session: a browser's, or those of plain requests.
 */
export async function login(by: BrowserContext | APIRequestContext, role: DemoRole): Promise<void> {
  const requests = "request" in by ? by.request : by;
  const { email, password } = demoLogin(role);
  const answer = await requests.post(`${shopUrl}/sign-in`, {
    form: { email, password },
    headers: { Origin: shopUrl },
    maxRedirects: 0,
  });
  expect(answer.status(), `signing in as ${role}`).toBe(302);
}

/** Plain requests with an account's session, or a visitor's; to be disposed of by the caller. */
export async function requestsOf(role: DemoRole | "visitor"): Promise<APIRequestContext> {
  const requests = await request.newContext({ baseURL: shopUrl, extraHTTPHeaders: { Origin: shopUrl } });
  if (role !== "visitor") await login(requests, role);
  return requests;
}
