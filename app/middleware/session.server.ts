import { createCookie, type MiddlewareFunction } from "react-router";
import { languageContext, visitorContext } from "~/context";
import { type FoundSession, findSession, SESSION_LASTS } from "~/domain/people/sessions.server";
import { languageOfSegment } from "~/languages/language";
import { env } from "~/platform/env.server";
import { AppError } from "~/platform/errors";

const sessionCookie = createCookie(`${env.cookiePrefix}_session`, {
  path: "/",
  httpOnly: true,
  sameSite: "lax",
  secure: env.secure,
  secrets: [env.SESSION_SECRET],
  maxAge: SESSION_LASTS / 1000,
});

/** `Set-Cookie` that signs a browser in: the secret of a session that has just been started. */
export function signedInCookie(secret: string): Promise<string> {
  return sessionCookie.serialize(secret);
}

/** `Set-Cookie` that takes the session's secret from a browser. */
export function signedOutCookie(): Promise<string> {
  return sessionCookie.serialize("", { maxAge: 0 });
}

/** These answer without knowing who asks, and must answer when the database does not. */
const NOBODY_IN_PARTICULAR = /^\/(healthz|readyz|hooks\/)/;

async function secretOf(request: Request): Promise<string | null> {
  const value: unknown = await sessionCookie.parse(request.headers.get("cookie"));
  return typeof value === "string" && value !== "" ? value : null;
}

async function look(secret: string): Promise<FoundSession | null> {
  try {
    return await findSession(secret);
  } catch (cause) {
    throw new AppError("unavailable", "sessions cannot be read", { cause });
  }
}

/**
 * Finds out who asks and in which language, for every request. Without a cookie the database is not asked. What is
 * answered to somebody signed in is never kept by a cache, unless its route lets that very browser keep it (the
 * studio's proofs); a session in use has its cookie renewed with it.
 */
export const sessionMiddleware: MiddlewareFunction<Response> = async (
  { request, context, params, url },
  next,
) => {
  context.set(languageContext, languageOfSegment(params.lang) ?? "en");
  const secret = NOBODY_IN_PARTICULAR.test(url.pathname) ? null : await secretOf(request);
  const found = secret === null ? null : await look(secret);
  if (found === null) {
    context.set(visitorContext, null);
  } else {
    const { renewedUntil: _, ...visitor } = found;
    context.set(visitorContext, visitor);
  }
  const response = await next();
  if (secret === null) return response;
  const own = response.headers.get("Cache-Control") ?? "";
  if (found !== null && !own.startsWith("private"))
    response.headers.set("Cache-Control", "private, no-store");
  // A handler that signs in or out has set the cookie itself.
  const name = `${sessionCookie.name}=`;
  if (response.headers.getSetCookie().some((line) => line.startsWith(name))) return response;
  if (found === null) {
    response.headers.append("Set-Cookie", await signedOutCookie());
    response.headers.set("Cache-Control", "private, no-store");
  } else if (found.renewedUntil !== null) {
    response.headers.append("Set-Cookie", await signedInCookie(secret));
  }
  return response;
};
