/** What a Range header asks of a body of a given size. Positions are of the first byte and the one after the last. */
export type RequestedRange =
  | { kind: "whole" }
  | { kind: "part"; start: number; end: number }
  | { kind: "unsatisfiable" };

/**
 * Reads a Range header (RFC 9110 section 14). One range is honoured; several, or a header that is no byte range,
 * are answered with the whole body, which the RFC allows.
 * @param size bytes of the whole body
 */
export function parseRange(header: string | undefined, size: number): RequestedRange {
  const match = /^bytes=\s*(\d*)-(\d*)\s*$/i.exec(header ?? "");
  const [, firstText = "", lastText = ""] = match ?? [];
  if (firstText === "" && lastText === "") return { kind: "whole" };

  if (firstText === "") {
    const length = Math.min(Number(lastText), size);
    return length === 0 ? { kind: "unsatisfiable" } : { kind: "part", start: size - length, end: size };
  }
  const start = Number(firstText);
  const last = lastText === "" ? Number.POSITIVE_INFINITY : Number(lastText);
  if (last < start) return { kind: "whole" };
  if (start >= size) return { kind: "unsatisfiable" };
  return { kind: "part", start, end: Math.min(last + 1, size) };
}
