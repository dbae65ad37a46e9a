/**
 * The error codes of the S3 REST protocol that this server answers with, and the HTTP status of each.
 * Clients decide by code and status, so these two are the protocol's; the sentences are our own.
 */
const STATUS_BY_CODE = {
  AccessControlListNotSupported: 400,
  AccessDenied: 403,
  AccessForbidden: 403,
  AuthorizationHeaderMalformed: 400,
  AuthorizationQueryParametersError: 400,
  BadDigest: 400,
  BadRequest: 400,
  EntityTooLarge: 400,
  EntityTooSmall: 400,
  IncompleteBody: 400,
  InternalError: 500,
  InvalidAccessKeyId: 403,
  InvalidArgument: 400,
  InvalidChunkSizeError: 403,
  InvalidDigest: 400,
  InvalidPart: 400,
  InvalidPartNumber: 416,
  InvalidPartOrder: 400,
  InvalidRange: 416,
  InvalidRequest: 400,
  InvalidStorageClass: 400,
  InvalidToken: 400,
  InvalidURI: 400,
  KeyTooLongError: 400,
  MalformedTrailerError: 400,
  MalformedXML: 400,
  MetadataTooLarge: 400,
  MethodNotAllowed: 405,
  MissingContentLength: 411,
  NoSuchBucket: 404,
  NoSuchKey: 404,
  NoSuchUpload: 404,
  NotImplemented: 501,
  PreconditionFailed: 412,
  RequestTimeTooSkewed: 403,
  ServiceUnavailable: 503,
  SignatureDoesNotMatch: 403,
  XAmzContentSHA256Mismatch: 400,
} as const;

export type StorageErrorCode = keyof typeof STATUS_BY_CODE;

export interface StorageErrorExtras {
  /** Further elements of the XML error, by element name. */
  details?: Readonly<Record<string, string>>;
  /** Further response headers, such as `Content-Range` of a 416. */
  headers?: Readonly<Record<string, string>>;
}

/** A refusal that the client is told about as an S3 XML error. Anything else thrown is a bug and becomes a 500. */
export class StorageError extends Error {
  readonly code: StorageErrorCode;
  readonly status: number;
  readonly details: Readonly<Record<string, string>>;
  readonly headers: Readonly<Record<string, string>>;

  constructor(code: StorageErrorCode, message: string, extras: StorageErrorExtras = {}) {
    super(message);
    this.name = "StorageError";
    this.code = code;
    this.status = STATUS_BY_CODE[code];
    this.details = extras.details ?? {};
    this.headers = extras.headers ?? {};
  }
}
