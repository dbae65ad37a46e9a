import { randomBytes } from "node:crypto";
import {
  closeSync,
  fsyncSync,
  mkdirSync,
  openSync,
  readdirSync,
  readFileSync,
  renameSync,
  rmSync,
  writeSync,
} from "node:fs";
import { join } from "node:path";
import { type Attachment, type ParsedMail, simpleParser } from "mailparser";

/** What is known of a message without opening it. */
export type Entry = {
  id: string;
  /** ISO 8601, UTC. */
  receivedAt: string;
  /** The sender of the envelope. */
  from: string;
  /** The recipients of the envelope, blind copies too. */
  to: string[];
  subject: string;
  /** Bytes. */
  size: number;
};

/** A message as `GET /messages` gives it. */
export type Message = {
  id: string;
  from: string;
  to: string[];
  subject: string;
  /** The text part as it was sent; null when there was none. */
  text: string | null;
  /** The HTML part as it was sent; null when there was none. */
  html: string | null;
  /** By lower-case name; a header that comes several times is a list. */
  headers: Record<string, string | string[]>;
  receivedAt: string;
  attachments: { filename: string | null; contentType: string; size: number }[];
};

const REMEMBERED = 200;

function writeWhole(path: string, content: Buffer | string, flags: string): void {
  const file = openSync(path, flags);
  const bytes = Buffer.from(content);
  let written = 0;
  while (written < bytes.length) written += writeSync(file, bytes, written);
  fsyncSync(file);
  closeSync(file);
}

function headersOf(mail: ParsedMail): Message["headers"] {
  const headers: Message["headers"] = {};
  for (const { key, line } of mail.headerLines) {
    const decoded = mail.headers.get(key);
    const raw = line.slice(line.indexOf(":") + 1).replace(/\r?\n\s+/g, " ");
    const value = (typeof decoded === "string" ? decoded : raw).trim();
    const before = headers[key];
    headers[key] = before === undefined ? value : [before, value].flat();
  }
  return headers;
}

/**
 * The messages that were caught: one `.eml` file each, and an index of one line each that says which of them
 * count. A message counts, and is acknowledged, only when its line is written; a file without a line was never
 * acknowledged (or has been deleted) and is cleared away at the next start.
 */
export class MessageStore {
  readonly #folder: string;
  readonly #index: string;
  #entries: Entry[] = [];
  readonly #parsed = new Map<string, Promise<ParsedMail>>();

  constructor(folder: string) {
    this.#folder = folder;
    this.#index = join(folder, "index.jsonl");
    mkdirSync(folder, { recursive: true });
    this.#read();
  }

  /** All messages, newest first. */
  list(): readonly Entry[] {
    return this.#entries;
  }

  /** Messages to an address, whatever its capitals; all without one. */
  to(address: string | null): readonly Entry[] {
    if (address === null) return this.#entries;
    const wanted = address.trim().toLowerCase();
    return this.#entries.filter((entry) => entry.to.some((to) => to.toLowerCase() === wanted));
  }

  get(id: string): Entry | undefined {
    return this.#entries.find((entry) => entry.id === id);
  }

  /** Keeps a message; when this returns, it is on the disk. */
  async add(source: Buffer, envelope: { from: string; to: string[] }, now: number): Promise<Entry> {
    const id = `${now}-${randomBytes(4).toString("hex")}`;
    const mail = await simpleParser(source, { skipHtmlToText: true, skipTextToHtml: true });
    const entry: Entry = {
      id,
      receivedAt: new Date(now).toISOString(),
      ...envelope,
      subject: mail.subject ?? "",
      size: source.length,
    };
    const draft = join(this.#folder, `${id}.new`);
    writeWhole(draft, source, "w");
    renameSync(draft, this.#file(id));
    writeWhole(this.#index, `${JSON.stringify(entry)}\n`, "a");
    this.#entries = [entry, ...this.#entries];
    return entry;
  }

  /** Deletes messages and returns how many they were. */
  delete(entries: readonly Entry[]): number {
    const gone = new Set(entries.map(({ id }) => id));
    this.#entries = this.#entries.filter(({ id }) => !gone.has(id));
    const lines = this.#entries.map((entry) => `${JSON.stringify(entry)}\n`).reverse();
    writeWhole(`${this.#index}.new`, lines.join(""), "w");
    renameSync(`${this.#index}.new`, this.#index);
    for (const id of gone) {
      rmSync(this.#file(id), { force: true });
      this.#parsed.delete(id);
    }
    return gone.size;
  }

  source(id: string): Buffer {
    return readFileSync(this.#file(id));
  }

  async message(entry: Entry): Promise<Message> {
    const mail = await this.parsed(entry.id);
    return {
      id: entry.id,
      from: mail.from?.text ?? entry.from,
      to: entry.to,
      subject: entry.subject,
      text: mail.text || null,
      html: mail.html || null,
      headers: headersOf(mail),
      receivedAt: entry.receivedAt,
      attachments: mail.attachments.map(({ filename, contentType, size }) => ({
        filename: filename ?? null,
        contentType,
        size,
      })),
    };
  }

  /** The opened message; the last few are remembered. */
  parsed(id: string): Promise<ParsedMail> {
    let mail = this.#parsed.get(id);
    if (!mail) {
      mail = simpleParser(this.source(id), {
        skipHtmlToText: true,
        skipTextToHtml: true,
        skipImageLinks: true,
      });
      this.#parsed.set(id, mail);
      const oldest = this.#parsed.keys().next().value;
      if (this.#parsed.size > REMEMBERED && oldest !== undefined) this.#parsed.delete(oldest);
    }
    return mail;
  }

  #file(id: string): string {
    return join(this.#folder, `${id}.eml`);
  }

  #read(): void {
    let lines = "";
    try {
      lines = readFileSync(this.#index, "utf8");
    } catch (error) {
      if (!(error instanceof Error && "code" in error && error.code === "ENOENT")) throw error;
    }
    // What follows the last line end was being written when the process was killed.
    const whole = lines.slice(0, lines.lastIndexOf("\n") + 1);
    const entries = whole
      .split("\n")
      .filter((line) => line !== "")
      .map((line) => JSON.parse(line) as Entry);
    this.#entries = entries.reverse();
    const known = new Set(["index.jsonl", ...entries.map(({ id }) => `${id}.eml`)]);
    for (const name of readdirSync(this.#folder)) {
      if (!known.has(name)) rmSync(join(this.#folder, name), { force: true });
    }
    if (whole !== lines) {
      writeWhole(`${this.#index}.new`, whole, "w");
      renameSync(`${this.#index}.new`, this.#index);
    }
  }
}

/** The HTML part for looking at: its own pictures put in, and links opening in a window of their own. */
export function viewableHtml(html: string, attachments: readonly Attachment[]): string {
  const withPictures = attachments.reduce(
    (text, { cid, contentType, content }) =>
      cid && contentType.startsWith("image/")
        ? text.replaceAll(`cid:${cid}`, `data:${contentType};base64,${content.toString("base64")}`)
        : text,
    html,
  );
  const base = '<base target="_blank">';
  return /<head[^>]*>/i.test(withPictures)
    ? withPictures.replace(/<head[^>]*>/i, (head) => `${head}${base}`)
    : `${base}${withPictures}`;
}
