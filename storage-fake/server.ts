import { randomBytes } from "node:crypto";
import { createServer, type IncomingMessage, type Server, type ServerResponse } from "node:http";
import { authenticate, type Credentials } from "./authentication";
import { CorsPolicy } from "./cors";
import { StorageError } from "./errors";
import { HeaderFields } from "./header-fields";
import { findHandler, isObjectRead } from "./operations";
import { RequestContext } from "./request-context";
import { parseRequestTarget } from "./request-target";
import { Store } from "./store";
import { element, xmlDocument } from "./xml";

export interface StorageServerOptions extends Credentials {
  host: string;
  /** 0 for any free one. */
  port: number;
  /** Where buckets and their objects are kept. */
  folder: string;
  /** Readable by signed requests only. */
  privateBucket: string;
  /** Its objects can be read by anyone who knows the key; only signed requests list or change it. */
  publicBucket: string;
  /** Origins whose pages may use the server from a browser. */
  corsOrigins: readonly string[];
  /** The time; requests' signatures are judged by it. */
  now?: () => Date;
  /** Told of faults of the server's own, with the id of the request if there was one. Nothing is said by default. */
  reportFault?: (fault: StorageFault) => void;
}

export interface StorageFault {
  message: string;
  cause: unknown;
  requestId?: string;
}

export interface StorageServer {
  server: Server;
  /** Binds the port, then opens the folder; resolves when requests are served. */
  listen(): Promise<{ port: number; url: string }>;
  /** Stops taking requests, gives those under way a moment, and cuts what is left. */
  close(): Promise<void>;
}

const HEALTH_PATH = "/-/health";
/** A connection on which nothing moves for this long is given up. A slow upload may take as long as it likes. */
const IDLE_MS = 120_000;
/** Longer than clients keep a connection for reuse, so that they and not we close it. */
const KEEP_ALIVE_MS = 65_000;
const CLOSING_GRACE_MS = 1_000;

/** Makes the server, which neither listens nor touches the disk before `listen`. */
export function createStorageServer(options: StorageServerOptions): StorageServer {
  const storage = new StorageService(options);
  return {
    server: storage.server,
    listen: () => storage.listen(),
    close: () => storage.close(),
  };
}

class StorageService {
  readonly server: Server;
  private readonly cors: CorsPolicy;
  private readonly now: () => Date;
  private readonly underWay = new Set<Promise<void>>();
  private store: Store | undefined;

  constructor(private readonly options: StorageServerOptions) {
    this.cors = new CorsPolicy(options.corsOrigins);
    this.now = options.now ?? (() => new Date());
    this.server = createServer((request, response) => this.accept(request, response, false));
    // A client that waits for leave to send its body is first told whether the request is refused.
    this.server.on("checkContinue", (request: IncomingMessage, response: ServerResponse) =>
      this.accept(request, response, true),
    );
    this.server.requestTimeout = 0;
    this.server.keepAliveTimeout = KEEP_ALIVE_MS;
    this.server.setTimeout(IDLE_MS);
  }

  async listen(): Promise<{ port: number; url: string }> {
    const { host, port, folder, privateBucket, publicBucket } = this.options;
    // The port comes first: whoever holds it owns the folder, so a second start cleans nothing up under the first.
    await new Promise<void>((resolve, reject) => {
      this.server.once("error", reject);
      this.server.listen(port, host, () => {
        this.server.off("error", reject);
        resolve();
      });
    });
    try {
      this.store = await Store.open({
        folder,
        buckets: [privateBucket, publicBucket],
        reportProblem: (message, cause) => this.options.reportFault?.({ message, cause }),
      });
    } catch (error) {
      await this.close();
      throw error;
    }
    const address = this.server.address();
    const boundPort = typeof address === "object" && address !== null ? address.port : port;
    const urlHost = host.includes(":") ? `[${host}]` : host;
    return { port: boundPort, url: `http://${urlHost}:${boundPort}` };
  }

  async close(): Promise<void> {
    const closed = new Promise<void>((resolve) => this.server.close(() => resolve()));
    this.server.closeIdleConnections();
    const cut = setTimeout(() => this.server.closeAllConnections(), CLOSING_GRACE_MS);
    await closed;
    clearTimeout(cut);
    await Promise.allSettled(this.underWay);
  }

  private accept(request: IncomingMessage, response: ServerResponse, clientWaits: boolean): void {
    const task = this.answer(request, response, clientWaits).finally(() => this.underWay.delete(task));
    this.underWay.add(task);
  }

  private async answer(
    request: IncomingMessage,
    response: ServerResponse,
    clientWaits: boolean,
  ): Promise<void> {
    const requestId = randomBytes(8).toString("hex").toUpperCase();
    response.setHeader("x-amz-request-id", requestId);
    let waiting = clientWaits;
    const beginBody = () => {
      if (waiting) response.writeContinue();
      waiting = false;
    };
    try {
      await this.serve(request, response, beginBody);
    } catch (error) {
      if (response.headersSent || response.destroyed || request.socket.destroyed) {
        // The client left, or the answer broke off: a cut connection is the only thing left to say.
        response.destroy();
        if (response.headersSent && !request.socket.destroyed) this.report(error, requestId);
        return;
      }
      const refusal = error instanceof StorageError ? error : this.internalError(error, requestId);
      // A body that was not asked for may or may not follow; the next request cannot be told from it.
      if (waiting) response.setHeader("Connection", "close");
      sendError(request, response, refusal, requestId);
    } finally {
      // What is left of a refused body is read over, so that the client gets to the answer.
      if (!request.destroyed) request.resume();
    }
  }

  private async serve(
    request: IncomingMessage,
    response: ServerResponse,
    beginBody: () => void,
  ): Promise<void> {
    if (request.url === HEALTH_PATH) {
      sendHealth(response, this.store !== undefined);
      return;
    }
    this.cors.apply(request, response);
    const { store } = this;
    if (!store) {
      throw new StorageError("ServiceUnavailable", "The server is starting.", {
        headers: { "Retry-After": "1" },
      });
    }
    const target = parseRequestTarget(request.url ?? "");
    if (request.method === "OPTIONS") {
      this.cors.answerPreflight(request, response);
      return;
    }
    const headers = new HeaderFields(request.rawHeaders);
    const authentication = authenticate({
      method: request.method ?? "",
      target,
      headers,
      credentials: this.options,
      now: this.now(),
    });
    const context = new RequestContext(
      request,
      response,
      target,
      headers,
      authentication,
      store,
      this.now,
      beginBody,
    );
    const open = target.bucket === this.options.publicBucket && isObjectRead(context);
    if (authentication.kind === "anonymous" && !open) throw new StorageError("AccessDenied", "Access Denied");
    await findHandler(context)(context);
  }

  private internalError(error: unknown, requestId: string): StorageError {
    this.report(error, requestId);
    return new StorageError("InternalError", "Something is wrong with the server. Try again.");
  }

  private report(cause: unknown, requestId: string): void {
    this.options.reportFault?.({ message: "a request failed", cause, requestId });
  }
}

function sendHealth(response: ServerResponse, ready: boolean): void {
  const body = JSON.stringify({ status: ready ? "ok" : "starting" });
  response.writeHead(ready ? 200 : 503, {
    "Content-Type": "application/json",
    "Content-Length": String(Buffer.byteLength(body)),
    "Cache-Control": "no-store",
  });
  response.end(body);
}

function sendError(
  request: IncomingMessage,
  response: ServerResponse,
  error: StorageError,
  requestId: string,
): void {
  if (request.method === "HEAD") {
    response.writeHead(error.status, error.headers);
    response.end();
    return;
  }
  const body = Buffer.from(
    xmlDocument("Error", [
      element("Code", error.code),
      element("Message", error.message),
      ...Object.entries(error.details).map(([name, value]) => element(name, value)),
      element("Resource", (request.url ?? "").split("?")[0] ?? ""),
      element("RequestId", requestId),
    ]),
  );
  response.writeHead(error.status, {
    ...error.headers,
    "Content-Type": "application/xml",
    "Content-Length": String(body.length),
  });
  response.end(body);
}
