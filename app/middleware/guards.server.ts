import { data, href, type MiddlewareFunction, redirect } from "react-router";
import type { HeldForm } from "~/components/account/held-form";
import { signedInContext, visitorContext } from "~/context";
import { type Capability, can } from "~/domain/people/permissions";
import { accessTo, allows } from "~/domain/people/route-permissions";
import { AppError, type AppErrorData } from "~/platform/errors";

/** A form larger than this is not carried through signing in. */
const MOST_HELD_BYTES = 256 * 1024;

type Asked = { request: Request; url: URL; params: Record<string, string | undefined> };

/** Path and search of the request without what React Router adds for itself; `?index` names an index route's action. */
function actionOf({ request, url }: Asked): string {
  const search = new URL(request.url).searchParams;
  search.delete("_routes");
  const text = search.toString().replace(/(^|&)index=(&|$)/, "$1index$2");
  return url.pathname + (text === "" ? "" : `?${text}`);
}

/** The form in a request's body, without passwords and files; null where there is none that can be sent again. */
async function heldForm(asked: Asked): Promise<HeldForm | null> {
  const { request } = asked;
  const type = request.headers.get("content-type") ?? "";
  const length = Number(request.headers.get("content-length") ?? Number.POSITIVE_INFINITY);
  if (request.method !== "POST" || !/^(application\/x-www-form-urlencoded|multipart\/form-data)/.test(type)) {
    return null;
  }
  if (length > MOST_HELD_BYTES) return null;
  const fields: [string, string][] = [];
  let incomplete = false;
  try {
    for (const [name, value] of await request.formData()) {
      if (typeof value === "string" && !/password/i.test(name)) fields.push([name, value]);
      else incomplete = true;
    }
  } catch {
    return null;
  }
  return { action: actionOf(asked), fields, incomplete };
}

/**
 * What to throw at a visitor who has to sign in: a redirect to the sign-in page for a page; for a form that was sent
 * when its session had ended, status 401 and the form itself, which the error page carries through signing in.
 */
async function signInFirst(asked: Asked): Promise<unknown> {
  const { request, url, params } = asked;
  if (request.method === "GET" || request.method === "HEAD") {
    const lang = params.lang === "de" ? "de" : undefined;
    return redirect(
      `${href("/:lang?/sign-in", { lang })}?next=${encodeURIComponent(url.pathname + url.search)}`,
    );
  }
  const held = await heldForm(asked);
  const facts: AppErrorData & { held: HeldForm | null } = { code: "sign_in_needed", retryAfter: null, held };
  return data(facts, { status: 401 });
}

/** Lets nobody pass who is not signed in, and puts who is into `signedInContext`. */
export const requireSignedIn: MiddlewareFunction<Response> = async ({ request, url, params, context }) => {
  const visitor = context.get(visitorContext);
  if (visitor === null) throw await signInFirst({ request, url, params });
  context.set(signedInContext, visitor);
};

/** Lets only those pass whose roles allow it. Put it after `requireSignedIn`. Throws AppError `not_allowed`. */
export function requireCapability(capability: Capability): MiddlewareFunction<Response> {
  return ({ context }) => {
    const { roles } = context.get(signedInContext);
    if (!can(roles, capability)) throw new AppError("not_allowed", capability);
  };
}

/**
 * Lets only those pass whom the table in `route-permissions.ts` allows this route with this method, whatever it is:
 * what the table does not name is refused. Put it after `requireSignedIn`. Throws AppError `not_allowed`.
 */
export const requireRoutePermission: MiddlewareFunction<Response> = ({ request, context, pattern }) => {
  const { roles } = context.get(signedInContext);
  if (!allows(accessTo(pattern, request.method), roles)) {
    throw new AppError("not_allowed", `${request.method} ${pattern}`);
  }
};

/** For handlers in routes without a guard of their own. Throws AppError `sign_in_needed`. */
export function mustBeSignedIn<T>(visitor: T | null): T {
  if (visitor === null) throw new AppError("sign_in_needed");
  return visitor;
}
