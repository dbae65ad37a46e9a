import type { MiddlewareFunction } from "react-router";
import { env } from "~/platform/env.server";

const SAFE = new Set(["GET", "HEAD", "OPTIONS"]);

/** Called by machines that send no Origin and prove themselves by a signature. */
const SIGNED_CALLERS = ["/hooks/"];

/**
 * Whether a request that changes state comes from a page of ours. Browsers send Origin with every such request;
 * one that names another host is refused, `null` unless the browser says that it comes from us, and so is a cross-site
 * one without Origin. The host is
 * compared, not the scheme: behind a TLS proxy we are asked over plain HTTP.
 */
export function comesFromOurPages(request: Request): boolean {
  const origin = request.headers.get("origin");
  const site = request.headers.get("sec-fetch-site");
  if (origin === null) return site === null || site === "same-origin" || site === "none";
  // A page that sends no referrer (order links, one-time links) sends `null` with its own forms, too.
  if (origin === "null") return site === "same-origin";
  if (!URL.canParse(origin)) return false;
  const host = new URL(origin).host;
  const ours = new Set([new URL(env.BASE_URL).host, request.headers.get("host") ?? ""]);
  if (env.TRUST_PROXY !== "")
    ours.add((request.headers.get("x-forwarded-host") ?? "").split(",")[0]?.trim() ?? "");
  return host !== "" && ours.has(host);
}

/** Refuses state-changing requests from foreign pages on every route, resource routes included. */
export const originMiddleware: MiddlewareFunction<Response> = async ({ request }, next) => {
  if (SAFE.has(request.method)) return next();
  const { pathname } = new URL(request.url);
  if (SIGNED_CALLERS.some((prefix) => pathname.startsWith(prefix)) || comesFromOurPages(request))
    return next();
  return new Response("This request came from another site and was refused.\n", {
    status: 403,
    headers: { "Content-Type": "text/plain; charset=utf-8" },
  });
};
