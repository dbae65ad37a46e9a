import type { MiddlewareFunction } from "react-router";
import { requestInfoContext } from "~/context";
import { env } from "~/platform/env.server";
import { newId, randomSecret } from "~/platform/ids.server";
import { logger } from "~/platform/logger.server";

/** Set by `scripts/serve.ts`, which deletes whatever a client sent under these names. */
const REQUEST_ID = "x-numberleaf-request-id";
const CLIENT_IP = "x-numberleaf-client-ip";

/** Order links, check codes and one-time links are secrets or nearly so: they are not logged. */
function loggablePath(pathname: string): string {
  return pathname.replace(/\/(orders|check|invitation|reset|verify)\/[^/]+/g, "/$1/…").replace(/\.data$/, "");
}

/** Gives each request its id and nonce, and writes one structured line when it has been answered. */
export const requestInfoMiddleware: MiddlewareFunction<Response> = async ({ request, context }, next) => {
  const started = performance.now();
  const requestId = request.headers.get(REQUEST_ID) ?? newId();
  context.set(requestInfoContext, {
    requestId,
    clientIp: request.headers.get(CLIENT_IP) ?? "unknown",
    nonce: randomSecret(16),
    secure: env.secure,
  });
  const response = await next();
  response.headers.set("X-Request-Id", requestId);
  logger.info({
    requestId,
    method: request.method,
    path: loggablePath(new URL(request.url).pathname),
    status: response.status,
    milliseconds: Math.round(performance.now() - started),
  });
  return response;
};
