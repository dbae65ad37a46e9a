import { randomUUID } from "node:crypto";
import type { IncomingMessage } from "node:http";
import path from "node:path";
import compression from "compression";
import express, { type ErrorRequestHandler, type Express, type RequestHandler } from "express";
import type { Logger } from "pino";

/** Trusted within the process: whatever a client sends under these names is thrown away first. */
const REQUEST_ID = "x-numberleaf-request-id";
const CLIENT_IP = "x-numberleaf-client-ip";

/** Forms and webhooks are small; scans go from the browser to storage and never pass here. In bytes. */
const BODY_LIMIT = 4 * 1024 * 1024;

export type WebOptions = {
  /** Folder of the build's browser files. */
  clientDirectory: string;
  /** Answers whatever is no file of the build. */
  handler: RequestHandler;
  /** Value of TRUST_PROXY, see `parseTrustProxy`. */
  trustProxy: string;
  logger: Pick<Logger, "error">;
};

/**
 * Which proxies' X-Forwarded-* headers are believed.
 *
 * @param text empty for none, a number of proxies, or their addresses and networks separated by commas
 *   ("loopback", "10.0.0.0/8"). "true" means one proxy: to believe whoever sends the header would let anyone choose the address
 *   that rate limits count.
 */
export function parseTrustProxy(text: string): number | string[] | false {
  const value = text.trim();
  if (value === "" || value === "0" || value === "false") return false;
  if (value === "true") return 1;
  if (/^\d+$/.test(value)) return Number(value);
  return value.split(",").map((part) => part.trim());
}

/** The HTTP server's application: files of the build, and the shop's own routes behind them. */
export function createWeb({ clientDirectory, handler, trustProxy, logger }: WebOptions): Express {
  const app = express();
  app.disable("x-powered-by");
  app.set("trust proxy", parseTrustProxy(trustProxy));

  app.use(identify);
  app.use(believeForwardedHost);
  app.use(compression());
  app.use(
    "/assets",
    // Their names carry a hash of their content.
    express.static(path.join(clientDirectory, "assets"), {
      immutable: true,
      maxAge: "1y",
      index: false,
      redirect: false,
      setHeaders: (response) => response.setHeader("X-Content-Type-Options", "nosniff"),
    }),
    (_request, response) => {
      response.status(404).type("text/plain").send("not found\n");
    },
  );
  app.use(
    express.static(clientDirectory, {
      maxAge: "1h",
      index: false,
      redirect: false,
      setHeaders: (response) => response.setHeader("X-Content-Type-Options", "nosniff"),
    }),
  );
  app.use(limitBody);
  app.use(handler);
  app.use(failed(logger));
  return app;
}

/** Gives the request its id (a trusted proxy's, if it sent one) and the address it came from. */
const identify: RequestHandler = (request, _response, next) => {
  const sent = request.headers["x-request-id"];
  const believed = fromTrustedProxy(request) && typeof sent === "string" && /^[\w.-]{8,64}$/.test(sent);
  const id = believed ? sent : randomUUID();
  request.headers[REQUEST_ID] = id;
  request.headers[CLIENT_IP] = request.ip ?? "unknown";
  next();
};

/**
 * A proxy may ask us under an internal name and port and say in X-Forwarded-Host what the browser asked for. React Router
 * compares the whole origin before an action runs, port included, so the internal one must not remain.
 */
const believeForwardedHost: RequestHandler = (request, _response, next) => {
  const forwarded = request.headers["x-forwarded-host"];
  if (typeof forwarded === "string" && fromTrustedProxy(request)) {
    const first = forwarded.split(",")[0]?.trim();
    if (first) request.headers.host = first;
  }
  next();
};

function fromTrustedProxy(request: express.Request): boolean {
  const trusts: (address: string | undefined, hop: number) => boolean = request.app.get("trust proxy fn");
  return trusts(request.socket.remoteAddress, 0);
}

const limitBody: RequestHandler = (request, response, next) => {
  if (!hasBody(request)) return next();
  const length = request.headers["content-length"];
  const [status, text] =
    length === undefined
      ? [411, "The length of the request must be stated.\n"]
      : Number(length) > BODY_LIMIT
        ? [413, "The request is too large.\n"]
        : [];
  if (status === undefined) return next();
  // The rest of the body is not read, so the connection cannot be used again.
  response.setHeader("Connection", "close");
  response.status(status).type("text/plain").send(text);
};

function hasBody(request: IncomingMessage): boolean {
  return (
    request.headers["content-length"] !== undefined || request.headers["transfer-encoding"] !== undefined
  );
}

/** Whatever no route has turned into a page. The address is not logged: it may hold a secret link. */
function failed(logger: WebOptions["logger"]): ErrorRequestHandler {
  return (error: unknown, request, response, next) => {
    const status = statusOf(error);
    if (status >= 500) {
      logger.error(
        { requestId: request.headers[REQUEST_ID], method: request.method, err: error },
        "request failed",
      );
    }
    if (response.headersSent) return next(error);
    response
      .status(status)
      .set("X-Request-Id", String(request.headers[REQUEST_ID]))
      .type("text/plain")
      .send(status >= 500 ? "Something went wrong.\n" : "This request cannot be understood.\n");
  };
}

/** A malformed address is the client's mistake: express marks it with a status, URL with a code. */
function statusOf(error: unknown): number {
  if (!(error instanceof Error)) return 500;
  if ("code" in error && error.code === "ERR_INVALID_URL") return 400;
  return "status" in error && typeof error.status === "number" ? error.status : 500;
}
