import type { MiddlewareFunction } from "react-router";
import { requestInfoContext } from "~/context";
import { env } from "~/platform/env.server";

const origin = (url: string) => new URL(url).origin;

function policy(nonce: string): string {
  const storage = origin(env.S3_PUBLIC_URL);
  const uploads = env.S3_ENDPOINT === "" ? `https://*.amazonaws.com` : origin(env.S3_ENDPOINT);
  return [
    "default-src 'self'",
    `script-src 'self' 'nonce-${nonce}'`,
    "style-src 'self'",
    `img-src 'self' data: blob: ${storage}`,
    "font-src 'self'",
    `connect-src 'self' ${uploads}`,
    // Chromium applies form-action to where a form is redirected: the payment page must be named.
    `form-action 'self' ${origin(env.STRIPE_PUBLIC_URL)}`,
    "frame-ancestors 'none'",
    "base-uri 'none'",
    "object-src 'none'",
  ].join("; ");
}

/** Headers every answer carries; a route's own Cache-Control stands. */
export const securityHeadersMiddleware: MiddlewareFunction<Response> = async ({ context }, next) => {
  const response = await next();
  const { nonce } = context.get(requestInfoContext);
  const { headers } = response;
  headers.set("Content-Security-Policy", policy(nonce));
  headers.set("X-Content-Type-Options", "nosniff");
  headers.set("Cross-Origin-Opener-Policy", "same-origin");
  headers.set("Permissions-Policy", "camera=(), geolocation=(), microphone=(), payment=()");
  if (!headers.has("Referrer-Policy")) headers.set("Referrer-Policy", "strict-origin-when-cross-origin");
  if (!headers.has("Cache-Control")) headers.set("Cache-Control", "private, no-store");
  if (env.secure) headers.set("Strict-Transport-Security", "max-age=31536000");
  return response;
};
