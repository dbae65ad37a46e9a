/** The body of Stripe's `error` object, as far as this fake uses it. */
export type FaultBody = {
  type: "api_error" | "card_error" | "idempotency_error" | "invalid_request_error";
  message: string;
  code?: string;
  param?: string;
  decline_code?: string;
  doc_url?: string;
};

/**
 * An error answer in Stripe's shape.
 *
 * `executed` says whether the request had begun to do its work when it failed: such a result is kept
 * under its idempotency key and replayed. A parameter that never passed validation is not.
 */
export class StripeFault extends Error {
  constructor(
    readonly status: number,
    readonly body: FaultBody,
    readonly executed: boolean,
  ) {
    super(body.message);
    this.name = "StripeFault";
  }
}

/** 400 for a parameter that is missing, unknown or out of bounds; not kept under an idempotency key. */
export function badParameter(message: string, param: string, code?: string): StripeFault {
  return new StripeFault(
    400,
    { type: "invalid_request_error", message, param, ...(code && { code }) },
    false,
  );
}

/** 404 for an id in the address that names nothing. */
export function noSuchObject(kind: string, id: string, param = "id"): StripeFault {
  const message = `No such ${kind}: '${id}'`;
  return new StripeFault(
    404,
    { type: "invalid_request_error", code: "resource_missing", message, param },
    true,
  );
}

/** 400 for a request that is well formed but that the object's present state does not allow. */
export function notNow(message: string, more: { code?: string; param?: string } = {}): StripeFault {
  return new StripeFault(400, { type: "invalid_request_error", message, ...more }, true);
}

/** 401 for a missing or wrong key. Only the key's last four characters are repeated. */
export function wrongKey(key: string | null): StripeFault {
  const message =
    key === null
      ? "No API key was sent. Send the secret key in the Authorization header, as a bearer token."
      : `Invalid API key: ${key.length > 12 ? `${key.slice(0, 7)}****${key.slice(-4)}` : "****"}`;
  return new StripeFault(401, { type: "invalid_request_error", message }, false);
}

/** 404 for an address that is no part of the API this fake speaks. */
export function unknownAddress(method: string, path: string): StripeFault {
  const message = `This address is not known here (${method} ${path}).`;
  return new StripeFault(404, { type: "invalid_request_error", message }, false);
}
