/**
 * The header fields of a request as they came over the wire.
 *
 * Node's own `headers` object drops or joins repeated fields by rules that differ from field to field, while a
 * signature covers what was sent. Values are Latin-1 strings: one character for each byte received.
 */
export class HeaderFields {
  private readonly values = new Map<string, string[]>();

  /** @param rawHeaders alternating names and values, as `IncomingMessage.rawHeaders` has them */
  constructor(rawHeaders: readonly string[]) {
    for (let index = 0; index + 1 < rawHeaders.length; index += 2) {
      const name = (rawHeaders[index] ?? "").toLowerCase();
      const values = this.values.get(name) ?? [];
      values.push(rawHeaders[index + 1] ?? "");
      this.values.set(name, values);
    }
  }

  /** Every value of a field, in order; `name` in lower case. */
  all(name: string): readonly string[] {
    return this.values.get(name) ?? [];
  }

  /** The field's values joined with commas, or undefined when it was not sent; `name` in lower case. */
  get(name: string): string | undefined {
    return this.values.get(name)?.join(",");
  }

  has(name: string): boolean {
    return this.values.has(name);
  }

  /** The lower-case names of all fields sent. */
  names(): string[] {
    return [...this.values.keys()];
  }
}
