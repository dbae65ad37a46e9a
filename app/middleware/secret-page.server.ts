import type { MiddlewareFunction } from "react-router";

/**
 * For pages under an address that is itself a secret (order links, one-time links): not indexed, not kept, and not told to
 * any other site. Whatever the answer is, also an error.
 */
export const secretPageMiddleware: MiddlewareFunction<Response> = async (_, next) => {
  const response = await next();
  response.headers.set("Cache-Control", "private, no-store");
  response.headers.set("Referrer-Policy", "no-referrer");
  response.headers.set("X-Robots-Tag", "noindex, nofollow");
  return response;
};
