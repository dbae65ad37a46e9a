import { createHash } from "node:crypto";

/** JSON that may be kept for two seconds by anyone and is checked by its ETag after that; 304 when unchanged. */
export function publicJson(request: Request, value: unknown, contentType = "application/json"): Response {
  const body = JSON.stringify(value);
  const etag = `"${createHash("sha256").update(body).digest("base64url").slice(0, 22)}"`;
  const headers = {
    "Content-Type": `${contentType}; charset=utf-8`,
    "Cache-Control": "public, max-age=2, stale-while-revalidate=10",
    "Access-Control-Allow-Origin": "*",
    ETag: etag,
  };
  const known = (request.headers.get("if-none-match") ?? "")
    .split(",")
    .map((t) => t.trim().replace(/^W\//, ""));
  if (known.includes(etag)) return new Response(null, { status: 304, headers });
  return new Response(body, { headers });
}

/** An error in the one shape the API has (RFC 9457). */
export function problemJson(status: number, title: string, detail?: string): Response {
  return Response.json(
    { type: "about:blank", title, status, ...(detail === undefined ? {} : { detail }) },
    { status, headers: { "Content-Type": "application/problem+json", "Cache-Control": "no-store" } },
  );
}
