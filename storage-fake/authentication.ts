import { StorageError } from "./errors";
import type { HeaderFields } from "./header-fields";
import type { QueryParameters, RequestTarget } from "./request-target";
import {
  ALGORITHM,
  type CredentialScope,
  canonicalRequest,
  deriveSigningKey,
  requestStringToSign,
  SCOPE_END,
  SERVICE,
  sign,
  signaturesEqual,
  UNSIGNED_PAYLOAD,
} from "./sigv4";

/** How far the clock of a signed request may be from ours, either way (S3 error RequestTimeTooSkewed). */
const MAXIMUM_SKEW_MS = 15 * 60 * 1000;
/** Seven days, the longest life of a presigned address, in seconds. */
const MAXIMUM_EXPIRES_S = 7 * 24 * 60 * 60;

export interface Credentials {
  accessKeyId: string;
  secretAccessKey: string;
  region: string;
}

/** What the signer said about the body. */
export type PayloadClaim =
  | { kind: "unsigned" }
  | { kind: "sha256"; hex: string }
  | { kind: "chunked"; signed: boolean; trailer: boolean };

export interface SignedRequest {
  kind: "signed";
  /** Where the signature was: in the Authorization header, or in the query of a presigned address. */
  place: "header" | "query";
  amzDate: string;
  scope: CredentialScope;
  signingKey: Buffer;
  signature: string;
  payload: PayloadClaim;
}

export type Authentication = { kind: "anonymous" } | SignedRequest;

export interface AuthenticationInput {
  method: string;
  target: RequestTarget;
  headers: HeaderFields;
  credentials: Credentials;
  now: Date;
}

/**
 * Finds out who asks. A request without any signature is anonymous; one with a signature either proves to be
 * signed with our credentials for exactly this method, address and signed headers, or is refused.
 * @throws StorageError with the code S3 has for what is wrong
 */
export function authenticate(input: AuthenticationInput): Authentication {
  const { target, headers } = input;
  const authorization = headers.get("authorization");
  const presigned = target.query.has("X-Amz-Algorithm") || target.query.has("X-Amz-Signature");
  if (authorization !== undefined && presigned) {
    throw new StorageError(
      "InvalidArgument",
      "A request is signed either in its Authorization header or in its query.",
    );
  }
  if (presigned) return authenticatePresigned(input);
  if (authorization !== undefined) return authenticateByHeader(input, authorization);
  if (target.query.has("AWSAccessKeyId") && target.query.has("Signature")) {
    throw new StorageError("InvalidRequest", `Only signatures by ${ALGORITHM} are accepted.`);
  }
  return { kind: "anonymous" };
}

interface ParsedCredential {
  accessKeyId: string;
  date: string;
  region: string;
  service: string;
  end: string;
}

/** Reads `accessKeyId/date/region/service/aws4_request`; an access key may itself hold slashes. */
function parseCredential(text: string): ParsedCredential | undefined {
  const parts = text.split("/");
  const [date, region, service, end] = parts.slice(-4);
  const accessKeyId = parts.slice(0, -4).join("/");
  if (accessKeyId === "" || date === undefined || region === undefined) return undefined;
  if (service === undefined || end === undefined) return undefined;
  return { accessKeyId, date, region, service, end };
}

/** Milliseconds of `YYYYMMDDTHHMMSSZ`, or undefined when it is no such time. */
export function parseAmzDate(text: string): number | undefined {
  const match = /^(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)Z$/.exec(text);
  if (!match) return undefined;
  const [, year, month, day, hour, minute, second] = match;
  const iso = `${year}-${month}-${day}T${hour}:${minute}:${second}.000Z`;
  const time = Date.parse(iso);
  // Date.parse rolls 31 February over to March instead of refusing it.
  return Number.isNaN(time) || new Date(time).toISOString() !== iso ? undefined : time;
}

/** `YYYYMMDDTHHMMSSZ` of a time. */
export function formatAmzDate(time: Date): string {
  return `${time.toISOString().replace(/[-:]/g, "").slice(0, 15)}Z`;
}

function authenticateByHeader(input: AuthenticationInput, authorization: string): SignedRequest {
  const { headers, now } = input;
  if (!authorization.startsWith(`${ALGORITHM} `)) {
    throw new StorageError("InvalidRequest", `Only signatures by ${ALGORITHM} are accepted.`);
  }
  const fields = new Map<string, string>();
  for (const part of authorization.slice(ALGORITHM.length + 1).split(",")) {
    const equals = part.indexOf("=");
    if (equals > 0) fields.set(part.slice(0, equals).trim(), part.slice(equals + 1).trim());
  }
  const credentialText = fields.get("Credential");
  const signedHeadersText = fields.get("SignedHeaders");
  const signature = fields.get("Signature");
  if (!credentialText || !signedHeadersText || !signature) {
    throw malformedHeader("it needs Credential, SignedHeaders and Signature");
  }
  const credential = parseCredential(credentialText);
  if (!credential)
    throw malformedHeader("its Credential is not accessKeyId/date/region/service/aws4_request");
  requireKnownAccessKey(credential, input.credentials);
  requireScope(credential, input.credentials.region, malformedHeader);

  const { amzDate, time } = requestTime(headers);
  if (credential.date !== amzDate.slice(0, 8)) {
    throw malformedHeader(`its Credential is of ${credential.date}, the request of ${amzDate.slice(0, 8)}`);
  }
  if (Math.abs(time - now.getTime()) > MAXIMUM_SKEW_MS) {
    throw new StorageError(
      "RequestTimeTooSkewed",
      "The request's clock and the server's are too far apart.",
      {
        details: {
          RequestTime: amzDate,
          ServerTime: now.toISOString(),
          MaxAllowedSkewMilliseconds: String(MAXIMUM_SKEW_MS),
        },
      },
    );
  }

  const payloadHash = headers.get("x-amz-content-sha256");
  if (payloadHash === undefined) {
    throw new StorageError("InvalidRequest", "The header x-amz-content-sha256 is missing.");
  }
  const scope = { date: credential.date, region: credential.region };
  const signingKey = verify(input, {
    accessKeyId: credential.accessKeyId,
    scope,
    amzDate,
    signedHeaders: signedHeadersText.split(";"),
    signature,
    payloadHash,
  });
  const payload = parsePayloadClaim(payloadHash);
  return { kind: "signed", place: "header", amzDate, scope, signingKey, signature, payload };
}

function malformedHeader(what: string, details: Record<string, string> = {}): StorageError {
  return new StorageError("AuthorizationHeaderMalformed", `The Authorization header is malformed: ${what}.`, {
    details,
  });
}

/** The time a header-signed request claims, from x-amz-date or else Date. */
function requestTime(headers: HeaderFields): { amzDate: string; time: number } {
  const amzDateHeader = headers.get("x-amz-date");
  if (amzDateHeader !== undefined) {
    const time = parseAmzDate(amzDateHeader);
    if (time !== undefined) return { amzDate: amzDateHeader, time };
  } else {
    const dateHeader = headers.get("date") ?? "";
    const time = parseAmzDate(dateHeader) ?? Date.parse(dateHeader);
    if (!Number.isNaN(time)) return { amzDate: formatAmzDate(new Date(time)), time };
  }
  throw new StorageError("AccessDenied", "A signed request needs a valid x-amz-date or Date header.");
}

const PRESIGNED_PARAMETERS = [
  "X-Amz-Algorithm",
  "X-Amz-Credential",
  "X-Amz-Date",
  "X-Amz-Expires",
  "X-Amz-SignedHeaders",
  "X-Amz-Signature",
] as const;

function authenticatePresigned(input: AuthenticationInput): SignedRequest {
  const { target, headers, now } = input;
  const parameter = (name: (typeof PRESIGNED_PARAMETERS)[number]): string => {
    const value = target.query.get(name);
    if (!value) throw malformedQuery(`the parameter ${name} is missing`);
    return value;
  };
  for (const name of PRESIGNED_PARAMETERS) parameter(name);

  if (parameter("X-Amz-Algorithm") !== ALGORITHM)
    throw malformedQuery(`X-Amz-Algorithm must be ${ALGORITHM}`);
  const credential = parseCredential(parameter("X-Amz-Credential"));
  if (!credential)
    throw malformedQuery("X-Amz-Credential is not accessKeyId/date/region/service/aws4_request");
  requireKnownAccessKey(credential, input.credentials);
  requireScope(credential, input.credentials.region, malformedQuery);

  const amzDate = parameter("X-Amz-Date");
  const signedAt = parseAmzDate(amzDate);
  if (signedAt === undefined) throw malformedQuery("X-Amz-Date is not of the form YYYYMMDDTHHMMSSZ");
  if (credential.date !== amzDate.slice(0, 8)) {
    throw malformedQuery(`X-Amz-Credential is of ${credential.date}, X-Amz-Date of ${amzDate.slice(0, 8)}`);
  }
  const expiresText = parameter("X-Amz-Expires");
  if (!/^-?\d+$/.test(expiresText)) throw malformedQuery("X-Amz-Expires must be a whole number of seconds");
  const expires = Number(expiresText);
  if (expires < 0) throw malformedQuery("X-Amz-Expires must not be negative");
  if (expires > MAXIMUM_EXPIRES_S) throw malformedQuery("X-Amz-Expires must be at most one week (604800)");

  if (signedAt - now.getTime() > MAXIMUM_SKEW_MS) {
    throw new StorageError("AccessDenied", "Request is not valid yet", {
      details: { "X-Amz-Date": amzDate, ServerTime: now.toISOString() },
    });
  }
  const expiresAt = signedAt + expires * 1000;
  if (now.getTime() > expiresAt) {
    throw new StorageError("AccessDenied", "Request has expired", {
      details: {
        "X-Amz-Expires": expiresText,
        Expires: new Date(expiresAt).toISOString(),
        ServerTime: now.toISOString(),
      },
    });
  }

  const payloadHash =
    target.query.get("X-Amz-Content-Sha256") ?? headers.get("x-amz-content-sha256") ?? UNSIGNED_PAYLOAD;
  const scope = { date: credential.date, region: credential.region };
  const signature = parameter("X-Amz-Signature");
  const signingKey = verify(input, {
    accessKeyId: credential.accessKeyId,
    scope,
    amzDate,
    signedHeaders: parameter("X-Amz-SignedHeaders").split(";"),
    signature,
    payloadHash,
  });
  const payload = parsePayloadClaim(payloadHash);
  return { kind: "signed", place: "query", amzDate, scope, signingKey, signature, payload };
}

function malformedQuery(what: string, details: Record<string, string> = {}): StorageError {
  return new StorageError("AuthorizationQueryParametersError", `The presigned address is wrong: ${what}.`, {
    details,
  });
}

function requireKnownAccessKey(credential: ParsedCredential, credentials: Credentials): void {
  if (credential.accessKeyId !== credentials.accessKeyId) {
    throw new StorageError("InvalidAccessKeyId", "There is no such access key.", {
      details: { AWSAccessKeyId: credential.accessKeyId },
    });
  }
}

function requireScope(
  credential: ParsedCredential,
  region: string,
  malformed: (what: string, details?: Record<string, string>) => StorageError,
): void {
  if (!/^\d{8}$/.test(credential.date))
    throw malformed("the date of its Credential is not of the form YYYYMMDD");
  if (credential.region !== region) {
    throw malformed(`the region is "${region}", not "${credential.region}"`, { Region: region });
  }
  if (credential.service !== SERVICE)
    throw malformed(`the service is "${SERVICE}", not "${credential.service}"`);
  if (credential.end !== SCOPE_END) throw malformed(`its Credential must end with "${SCOPE_END}"`);
}

interface Claim {
  accessKeyId: string;
  scope: CredentialScope;
  amzDate: string;
  signedHeaders: readonly string[];
  signature: string;
  payloadHash: string;
}

/** Checks the signature and returns the key it was made with. */
function verify(input: AuthenticationInput, claim: Claim): Buffer {
  const { headers, target, credentials } = input;
  if (headers.has("x-amz-security-token") || target.query.has("X-Amz-Security-Token")) {
    throw new StorageError("InvalidToken", "Temporary credentials are not known here.");
  }
  requireSignedHeaders(headers, claim.signedHeaders);

  const canonical = canonicalRequest({
    method: input.method,
    path: target.path,
    query: target.query,
    headers,
    signedHeaders: claim.signedHeaders,
    payloadHash: claim.payloadHash,
  });
  const stringToSign = requestStringToSign(claim.amzDate, claim.scope, canonical);
  const signingKey = deriveSigningKey(credentials.secretAccessKey, claim.scope);
  if (!signaturesEqual(sign(signingKey, stringToSign), claim.signature)) {
    throw new StorageError("SignatureDoesNotMatch", "The signature is not that of this request.", {
      details: {
        AWSAccessKeyId: claim.accessKeyId,
        SignatureProvided: claim.signature,
        StringToSign: stringToSign,
        CanonicalRequest: canonical,
      },
    });
  }
  return signingKey;
}

/**
 * Host and every x-amz-* header must be signed: else whoever holds a presigned address could add a copy source,
 * metadata or a checksum the signer never meant.
 */
function requireSignedHeaders(headers: HeaderFields, signedHeaders: readonly string[]): void {
  const unsigned = headers
    .names()
    .filter((name) => (name === "host" || name.startsWith("x-amz-")) && !signedHeaders.includes(name));
  if (unsigned.length > 0) {
    throw new StorageError("AccessDenied", "The request has headers that must be signed and are not.", {
      details: { HeadersNotSigned: unsigned.join(", ") },
    });
  }
}

function parsePayloadClaim(value: string): PayloadClaim {
  if (value === UNSIGNED_PAYLOAD) return { kind: "unsigned" };
  if (/^[0-9a-f]{64}$/.test(value)) return { kind: "sha256", hex: value };
  if (value === "STREAMING-UNSIGNED-PAYLOAD-TRAILER")
    return { kind: "chunked", signed: false, trailer: true };
  if (value === `STREAMING-${ALGORITHM}-PAYLOAD`) return { kind: "chunked", signed: true, trailer: false };
  if (value === `STREAMING-${ALGORITHM}-PAYLOAD-TRAILER`)
    return { kind: "chunked", signed: true, trailer: true };
  throw new StorageError(
    "InvalidArgument",
    "x-amz-content-sha256 must be UNSIGNED-PAYLOAD, a STREAMING- form or a SHA-256 in lower-case hex.",
  );
}

/**
 * The value of a signed `x-amz-*` field. A presigner moves such headers into the query, where they count the same.
 * @param name in lower case
 */
export function amzField(
  name: string,
  headers: HeaderFields,
  query: QueryParameters,
  authentication: Authentication,
): string | undefined {
  const header = headers.get(name);
  if (header !== undefined || authentication.kind !== "signed" || authentication.place !== "query") {
    return header;
  }
  return query.entries.find(([entryName]) => entryName.toLowerCase() === name)?.[1];
}
