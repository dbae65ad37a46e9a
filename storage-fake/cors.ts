import type { IncomingMessage, ServerResponse } from "node:http";
import { StorageError } from "./errors";

const ALLOWED_METHODS = ["GET", "HEAD", "PUT", "POST", "DELETE"];
/** What a page's script may read of an answer beyond the few headers the browser always shows. */
const EXPOSED_HEADERS = [
  "Accept-Ranges",
  "Content-Disposition",
  "Content-Length",
  "Content-Range",
  "ETag",
  "Last-Modified",
  "x-amz-checksum-crc32",
  "x-amz-checksum-crc32c",
  "x-amz-checksum-crc64nvme",
  "x-amz-checksum-sha1",
  "x-amz-checksum-sha256",
  "x-amz-request-id",
];
const PREFLIGHT_SECONDS = 600;

/**
 * Cross-origin rules: pages of the configured origins, and of no other, may use the server from a browser. With none
 * configured no page may.
 */
export class CorsPolicy {
  private readonly origins: ReadonlySet<string>;

  /** @param origins as browsers send them: scheme, host and port, no path */
  constructor(origins: readonly string[]) {
    this.origins = new Set(origins);
  }

  /** Adds to any answer what lets a page of an allowed origin read it. */
  apply(request: IncomingMessage, response: ServerResponse): void {
    // Also on answers to no origin at all: a cache must not hand those to a page.
    response.setHeader("Vary", "Origin");
    const { origin } = request.headers;
    if (origin === undefined || !this.origins.has(origin)) return;
    response.setHeader("Access-Control-Allow-Origin", origin);
    response.setHeader("Access-Control-Expose-Headers", EXPOSED_HEADERS.join(", "));
  }

  /**
   * Answers a preflight request.
   * @throws StorageError BadRequest, AccessForbidden
   */
  answerPreflight(request: IncomingMessage, response: ServerResponse): void {
    const { origin } = request.headers;
    const method = request.headers["access-control-request-method"];
    if (origin === undefined || method === undefined) {
      throw new StorageError(
        "BadRequest",
        "A preflight request needs Origin and Access-Control-Request-Method.",
      );
    }
    if (!this.origins.has(origin) || !ALLOWED_METHODS.includes(method)) {
      throw new StorageError("AccessForbidden", "CORSResponse: this origin and method are not allowed.", {
        details: { Method: method, ResourceType: "OBJECT" },
      });
    }
    const headers: Record<string, string> = {
      "Access-Control-Allow-Methods": ALLOWED_METHODS.join(", "),
      "Access-Control-Max-Age": String(PREFLIGHT_SECONDS),
      "Content-Length": "0",
      Vary: "Origin, Access-Control-Request-Method, Access-Control-Request-Headers",
    };
    const wanted = request.headers["access-control-request-headers"];
    if (wanted !== undefined) headers["Access-Control-Allow-Headers"] = wanted;
    response.writeHead(200, headers);
    response.end();
  }
}
