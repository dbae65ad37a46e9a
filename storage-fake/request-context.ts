import type { IncomingMessage, ServerResponse } from "node:http";
import { type Authentication, amzField, type SignedRequest } from "./authentication";
import type { Conditions } from "./conditions";
import { StorageError } from "./errors";
import type { HeaderFields } from "./header-fields";
import type { IncomingRequest } from "./incoming-content";
import type { RequestTarget } from "./request-target";
import type { Bucket, Store } from "./store";
import { type Content, xmlDocument } from "./xml";

/** Everything a handler may need of one request. */
export class RequestContext {
  constructor(
    readonly request: IncomingMessage,
    readonly response: ServerResponse,
    readonly target: RequestTarget,
    readonly headers: HeaderFields,
    readonly authentication: Authentication,
    readonly store: Store,
    readonly now: () => Date,
    readonly beginBody: () => void,
  ) {}

  get isHead(): boolean {
    return this.request.method === "HEAD";
  }

  /** The bucket of the path. @throws StorageError NoSuchBucket */
  get bucket(): Bucket {
    return this.store.bucket(this.target.bucket ?? "");
  }

  /** The key of the path; handlers of objects are only reached with one. */
  get key(): string {
    const { key } = this.target;
    if (key === undefined)
      throw new StorageError("MethodNotAllowed", "This is done to an object, not to a bucket.");
    return key;
  }

  /** A query parameter that must be there. @throws StorageError InvalidArgument */
  requireQuery(name: string): string {
    const value = this.target.query.get(name);
    if (!value) throw new StorageError("InvalidArgument", `The parameter ${name} is missing.`);
    return value;
  }

  /** A header, or undefined; `name` in lower case. */
  header(name: string): string | undefined {
    return this.headers.get(name);
  }

  /** An `x-amz-*` field from the headers or, in a presigned address, from the query; `name` in lower case. */
  amz(name: string): string | undefined {
    return amzField(name, this.headers, this.target.query, this.authentication);
  }

  /** The proof of who asks; anonymous requests do not get as far as the handlers that need it. */
  get signed(): SignedRequest {
    if (this.authentication.kind !== "signed") throw new StorageError("AccessDenied", "Access Denied");
    return this.authentication;
  }

  /** What reading the body needs. */
  get incoming(): IncomingRequest {
    return {
      request: this.request,
      headers: this.headers,
      query: this.target.query,
      authentication: this.signed,
      beginBody: this.beginBody,
    };
  }

  /** The conditional headers; `prefix` is `x-amz-copy-source-` for those of a copy's source. */
  conditions(prefix = ""): Conditions {
    const read = (name: string) => (prefix === "" ? this.header(name) : this.amz(`${prefix}${name}`));
    return {
      ifMatch: read("if-match"),
      ifNoneMatch: read("if-none-match"),
      ifModifiedSince: read("if-modified-since"),
      ifUnmodifiedSince: read("if-unmodified-since"),
    };
  }

  /** Answers with an XML document. */
  sendXml(root: string, content: Content, headers: Readonly<Record<string, string>> = {}): void {
    const body = Buffer.from(xmlDocument(root, content));
    this.response.writeHead(200, {
      ...headers,
      "Content-Type": "application/xml",
      "Content-Length": String(body.length),
    });
    this.response.end(body);
  }

  /** Answers without a body. */
  sendEmpty(status: number, headers: Readonly<Record<string, string>> = {}): void {
    const length: Record<string, string> = status === 204 || status === 304 ? {} : { "Content-Length": "0" };
    this.response.writeHead(status, { ...headers, ...length });
    this.response.end();
  }
}

/** An entity tag as it stands in headers and XML. */
export function quoteETag(etag: string): string {
  return `"${etag}"`;
}

/**
 * A whole number from a query parameter.
 * @param fallback the value when the parameter is absent
 * @throws StorageError InvalidArgument
 */
export function parseCount(value: string | undefined, name: string, fallback: number): number {
  if (value === undefined || value === "") return fallback;
  if (!/^\d{1,15}$/.test(value)) {
    throw new StorageError("InvalidArgument", `${name} must be a whole number.`, {
      details: { ArgumentName: name, ArgumentValue: value },
    });
  }
  return Number(value);
}
