/** Why a request cannot be served; each code maps to one status and one page. */
export type AppErrorCode =
  | "not_found"
  | "not_allowed"
  | "sign_in_needed"
  | "too_many"
  | "bad_request"
  | "unavailable"
  | "gone";

const STATUS: Record<AppErrorCode, number> = {
  not_found: 404,
  not_allowed: 403,
  sign_in_needed: 401,
  too_many: 429,
  bad_request: 400,
  unavailable: 503,
  gone: 410,
};

/** What the error page is told: nothing but the code and, where it helps, when to try again (seconds). */
export type AppErrorData = { code: AppErrorCode; retryAfter: number | null };

/**
 * Not allowed, not found, not now: thrown by domain code. The three fields `type`, `data` and `init` are what
 * React Router looks for in a thrown value, so that status and page are decided here, once, and domain code
 * need not know of responses.
 */
export class AppError extends Error {
  readonly code: AppErrorCode;
  readonly status: number;
  readonly type = "DataWithResponseInit";
  readonly data: AppErrorData;
  readonly init: { status: number; headers: Record<string, string> };

  constructor(code: AppErrorCode, message?: string, options: { cause?: unknown; retryAfter?: number } = {}) {
    super(message ?? code, options.cause === undefined ? undefined : { cause: options.cause });
    this.name = "AppError";
    this.code = code;
    this.status = STATUS[code];
    this.data = { code, retryAfter: options.retryAfter ?? null };
    this.init = {
      status: this.status,
      headers: options.retryAfter === undefined ? {} : { "Retry-After": String(options.retryAfter) },
    };
  }
}

/** The code of an error page's data, if it came from an `AppError`. */
export function appErrorCode(data: unknown): AppErrorCode | null {
  if (typeof data !== "object" || data === null || !("code" in data)) return null;
  const { code } = data;
  return typeof code === "string" && code in STATUS ? (code as AppErrorCode) : null;
}
