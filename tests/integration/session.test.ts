import { db, pool } from "db/client.server";
import { accountRoles, sessions } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { type MiddlewareFunction, RouterContextProvider } from "react-router";
import { afterAll, afterEach, beforeEach, describe, expect, test, vi } from "vitest";
import { heldFormIn } from "~/components/account/held-form";
import { signedInContext, visitorContext } from "~/context";
import {
  endSession,
  endSessions,
  findSession,
  SESSION_LASTS,
  startSession,
  sweepSessions,
} from "~/domain/people/sessions.server";
import { requireRoutePermission, requireSignedIn } from "~/middleware/guards.server";
import { comesFromOurPages } from "~/middleware/origin.server";
import { sessionMiddleware, signedInCookie } from "~/middleware/session.server";
import { holdClock } from "~/platform/clock";
import { env } from "~/platform/env.server";
import { testDatabase } from "../support/database";
import { makeAccount } from "../support/people";

const NO_PASSWORD = { passwordHash: "no password can be right" };

beforeEach(async () => {
  await (await testDatabase()).reset();
});
afterEach(() => {
  holdClock(undefined);
  vi.restoreAllMocks();
});
afterAll(() => pool.end());

/** Runs middleware one after the other, as React Router would, before a handler that answers with 200. */
async function through(
  middleware: MiddlewareFunction<Response>[],
  request: Request,
  pattern = "/studio/orders",
): Promise<{ response: Response; context: RouterContextProvider }> {
  const context = new RouterContextProvider();
  const run = async (at: number): Promise<Response> => {
    const step = middleware[at];
    if (step === undefined) return new Response("page");
    let answer: Response | undefined;
    const next = async () => {
      answer = await run(at + 1);
      return answer;
    };
    const args = { request, url: new URL(request.url), pattern, params: {}, context };
    const result = await step(args, next);
    return result ?? answer ?? next();
  };
  return { response: await run(0), context };
}

function asking(path: string, cookie?: string, init: RequestInit = {}): Request {
  const headers = new Headers(init.headers);
  if (cookie !== undefined) headers.set("Cookie", cookie.split(";")[0] ?? "");
  return new Request(new URL(path, env.BASE_URL), { ...init, headers });
}

async function sessionOf(email: string, roles: Parameters<typeof makeAccount>[1]) {
  const account = await makeAccount(email, roles, NO_PASSWORD);
  const session = await startSession({ db }, account.accountId);
  return { account, session, cookie: await signedInCookie(session.secret) };
}

describe("the session middleware", () => {
  test("asks the database nothing where there is no cookie, and nothing for the health of the process", async () => {
    const { cookie } = await sessionOf("merrin@oakshade.example", ["collector"]);
    const query = vi.spyOn(pool, "query");
    const { context } = await through([sessionMiddleware], asking("/prints"));
    expect(context.get(visitorContext)).toBeNull();
    await through([sessionMiddleware], asking("/healthz", cookie));
    expect(query).not.toHaveBeenCalled();
  });

  test("finds out who it is, with their roles, and keeps the answer out of caches", async () => {
    const { account, cookie } = await sessionOf("odalric@harcastle.example", ["assistant", "collector"]);
    const { context, response } = await through([sessionMiddleware], asking("/prints", cookie));
    expect(context.get(visitorContext)).toMatchObject({
      accountId: account.accountId,
      partyId: account.partyId,
      roles: ["assistant", "collector"],
      emailVerified: true,
    });
    expect(response.headers.get("Cache-Control")).toBe("private, no-store");
    // A role that was taken away holds no longer than the request before.
    await db.delete(accountRoles).where(eq(accountRoles.role, "assistant"));
    const later = await through([sessionMiddleware], asking("/prints", cookie));
    expect(later.context.get(visitorContext)?.roles).toEqual(["collector"]);
  });

  test("believes no secret whose signature is missing or wrong, and takes it from the browser", async () => {
    const { session, cookie } = await sessionOf("merrin@oakshade.example", ["collector"]);
    const unsigned = `${env.cookiePrefix}_session=${btoa(JSON.stringify(session.secret))}`;
    const forged = (cookie.split(";")[0] ?? "").replace(/(?<==)./, (first) => (first === "x" ? "y" : "x"));
    for (const bad of [unsigned, forged]) {
      const { context } = await through([sessionMiddleware], asking("/prints", bad));
      expect(context.get(visitorContext)).toBeNull();
    }
    await endSession(session.sessionId);
    const { context, response } = await through([sessionMiddleware], asking("/prints", cookie));
    expect(context.get(visitorContext)).toBeNull();
    expect(response.headers.get("Set-Cookie")).toMatch(/Max-Age=0/);
  });

  test("notes the use of a session every five minutes and lets it end thirty days after the last", async () => {
    const { session, cookie } = await sessionOf("merrin@oakshade.example", ["collector"]);
    const begun = Date.now();
    const seen = async () => (await db.select().from(sessions))[0]?.lastSeenAt.getTime() ?? 0;
    const first = await seen();
    holdClock(new Date(begun + 4 * 60_000));
    const soon = await through([sessionMiddleware], asking("/prints", cookie));
    expect(await seen()).toBe(first);
    expect(soon.response.headers.get("Set-Cookie")).toBeNull();
    holdClock(new Date(begun + 29 * 86_400_000));
    const later = await through([sessionMiddleware], asking("/prints", cookie));
    expect(await seen()).toBe(begun + 29 * 86_400_000);
    expect(later.response.headers.get("Set-Cookie")).toMatch(/Max-Age=2592000/);
    holdClock(new Date(begun + 50 * 86_400_000));
    expect(await findSession(session.secret)).not.toBeNull();
    holdClock(new Date(begun + 50 * 86_400_000 + SESSION_LASTS + 1));
    expect(await findSession(session.secret)).toBeNull();
    expect(await sweepSessions()).toBe(1);
  });

  test("is told of sessions that were ended elsewhere", async () => {
    const { account, session } = await sessionOf("merrin@oakshade.example", ["collector"]);
    const other = await startSession({ db }, account.accountId);
    expect(await endSessions({ db }, account.accountId, session.sessionId)).toBe(1);
    expect(await findSession(session.secret)).not.toBeNull();
    expect(await findSession(other.secret)).toBeNull();
  });

  test("sets the cookie for this site alone, unread by scripts", async () => {
    const [pair, ...attributes] = (await signedInCookie("x".repeat(43))).split("; ");
    expect(pair).toMatch(new RegExp(`^${env.cookiePrefix}_session=.`));
    expect(attributes.sort()).toEqual(["HttpOnly", "Max-Age=2592000", "Path=/", "SameSite=Lax"]);
  });
});

describe("the guards", () => {
  const guarded = [sessionMiddleware, requireSignedIn, requireRoutePermission];
  const thrownBy = async (request: Request, pattern?: string): Promise<unknown> => {
    try {
      await through(guarded, request, pattern);
      return null;
    } catch (thrown) {
      return thrown;
    }
  };

  test("lead a visitor to sign in and back", async () => {
    const thrown = await thrownBy(asking("/studio/orders?page=2"));
    expect(thrown).toBeInstanceOf(Response);
    if (!(thrown instanceof Response)) return;
    expect(thrown.status).toBe(302);
    expect(thrown.headers.get("Location")).toBe("/sign-in?next=%2Fstudio%2Forders%3Fpage%3D2");
  });

  test("keep a form that comes after its session has ended, without its passwords and files", async () => {
    const body = new FormData();
    body.append("intent", "party");
    body.append("note", "two\r\nlines & <marks>");
    body.append("note", "sent twice");
    body.append("newPassword", "not to be carried");
    body.append("scan", new File(["x"], "scan.tif"));
    const request = asking("/studio/people.data?index&_routes=routes%2Fstudio", undefined, {
      method: "POST",
      body,
    });
    request.headers.set("Content-Length", "900");
    const thrown = await thrownBy(request);
    expect(thrown).toMatchObject({ init: { status: 401 }, data: { code: "sign_in_needed" } });
    const held =
      typeof thrown === "object" && thrown !== null && "data" in thrown ? heldFormIn(thrown.data) : null;
    expect(held?.fields).toEqual([
      ["intent", "party"],
      ["note", "two\r\nlines & <marks>"],
      ["note", "sent twice"],
    ]);
    expect(held?.incomplete).toBe(true);
    expect(held?.action).toMatch(/\?index$/);
  });

  test("hold nothing that is no form", async () => {
    const request = asking("/studio/rolls/1/uploads", undefined, {
      method: "POST",
      body: "{}",
      headers: { "Content-Type": "application/json", "Content-Length": "2" },
    });
    expect(await thrownBy(request)).toMatchObject({ init: { status: 401 }, data: { held: null } });
  });

  test("let through whom the table allows, with the method it allows, and say who it is", async () => {
    const { cookie, account } = await sessionOf("wilmot@assheton.example", ["bookkeeper"]);
    const { context } = await through(guarded, asking("/studio/orders", cookie));
    expect(context.get(signedInContext).accountId).toBe(account.accountId);
    expect(await thrownBy(asking("/studio/orders", cookie, { method: "POST" }))).toMatchObject({
      status: 403,
    });
    expect(await thrownBy(asking("/studio/settings", cookie), "/studio/settings")).toMatchObject({
      status: 403,
    });
    expect(await thrownBy(asking("/studio/new-page", cookie), "/studio/new-page")).toMatchObject({
      status: 403,
    });
  });
});

describe("where a form comes from", () => {
  const from = (headers: Record<string, string>) =>
    comesFromOurPages(new Request(env.BASE_URL, { method: "POST", headers }));

  test("is our own pages, also those that send no referrer", () => {
    expect(from({ Origin: new URL(env.BASE_URL).origin })).toBe(true);
    expect(from({ Origin: "null", "Sec-Fetch-Site": "same-origin" })).toBe(true);
    expect(from({})).toBe(true);
  });

  test("is not another site, a sandboxed page or a page of a neighbouring name", () => {
    expect(from({ Origin: "https://elsewhere.example" })).toBe(false);
    expect(from({ Origin: "null" })).toBe(false);
    expect(from({ Origin: "null", "Sec-Fetch-Site": "cross-site" })).toBe(false);
    expect(from({ Origin: "null", "Sec-Fetch-Site": "same-site" })).toBe(false);
    expect(from({ "Sec-Fetch-Site": "cross-site" })).toBe(false);
  });
});
