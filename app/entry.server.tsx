import { PassThrough } from "node:stream";
import { createReadableStreamFromReadable } from "@react-router/node";
import { isbot } from "isbot";
import { renderToPipeableStream } from "react-dom/server";
import {
  type EntryContext,
  type HandleErrorFunction,
  isRouteErrorResponse,
  type RouterContextProvider,
  ServerRouter,
} from "react-router";
import { requestInfoContext } from "./context";
import { AppError } from "./platform/errors";
import { logger } from "./platform/logger.server";

export const streamTimeout = 10_000;

export default function handleRequest(
  request: Request,
  status: number,
  headers: Headers,
  routerContext: EntryContext,
  context: RouterContextProvider,
): Promise<Response> | Response {
  if (request.method === "HEAD") return new Response(null, { status, headers });
  const { nonce } = context.get(requestInfoContext);
  const ready = isbot(request.headers.get("user-agent") ?? "") ? "onAllReady" : "onShellReady";
  let answer = status;
  return new Promise((resolve, reject) => {
    let shellRendered = false;
    const { pipe, abort } = renderToPipeableStream(
      <ServerRouter context={routerContext} url={request.url} nonce={nonce} />,
      {
        nonce,
        [ready]() {
          shellRendered = true;
          const body = new PassThrough({
            final(done) {
              clearTimeout(timer);
              done();
            },
          });
          headers.set("Content-Type", "text/html; charset=utf-8");
          resolve(new Response(createReadableStreamFromReadable(body), { headers, status: answer }));
          pipe(body);
        },
        onShellError: reject,
        onError(error: unknown) {
          answer = 500;
          // Errors before the shell reject the promise and are logged by handleError.
          if (shellRendered) logger.error({ err: error }, "rendering failed");
        },
      },
    );
    const timer = setTimeout(abort, streamTimeout + 1_000);
  });
}

/** Bugs are logged with the request's id; expected refusals (AppError, thrown responses) are not bugs. */
export const handleError: HandleErrorFunction = (error, { request, context }) => {
  if (request.signal.aborted || isRouteErrorResponse(error)) return;
  if (error instanceof AppError && error.status < 500) return;
  let requestId: string | undefined;
  try {
    requestId = context.get(requestInfoContext).requestId;
  } catch {
    // Failed before the first middleware ran.
  }
  logger.error({ err: error, requestId }, "request failed");
};
