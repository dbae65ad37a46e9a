import { EventEmitter } from "node:events";
import { readFileSync } from "node:fs";
import { createServer, type IncomingMessage, type ServerResponse } from "node:http";
import type { Socket } from "node:net";
import { join } from "node:path";
import { setTimeout as wait } from "node:timers/promises";
import { SMTPServer, type SMTPServerDataStream, type SMTPServerSession } from "smtp-server";
import { z } from "zod";
import { type Entry, MessageStore, viewableHtml } from "./message-store";
import { listPage, messagePage, missingPage } from "./pages";

export type MailFakeOptions = {
  /** 0 takes any free port; `listen` tells which. */
  smtpPort: number;
  mailPort: number;
  host?: string;
  /** The folder whose `mail` subfolder holds the messages. */
  dataDir: string;
  /** Milliseconds since 1970. */
  now?: () => number;
};

export type MailFake = {
  /** Starts listening. Rejects with a `PortTaken` that says which of the two ports is not free. */
  listen: () => Promise<{ smtpPort: number; mailPort: number; url: string }>;
  close: () => Promise<void>;
};

/** One of the two ports is in use already. */
export class PortTaken extends Error {
  constructor(
    readonly variable: "SMTP_PORT" | "MAIL_PORT",
    port: number,
    host: string,
  ) {
    super(`port ${port} on ${host} is taken; set ${variable} to a free one`);
  }
}

const LARGEST_MESSAGE = 25 * 1024 * 1024;
const LARGEST_BODY = 64 * 1024;
const PER_PAGE = 50;
const LONGEST_WAIT_MS = 60_000;

const switchesSchema = z.strictObject({
  failNext: z.int().min(0),
  failCode: z.int().min(400).max(599),
  loseReplyNext: z.int().min(0),
  delayMs: z.int().min(0).max(600_000),
  down: z.boolean(),
});
type Switches = z.output<typeof switchesSchema>;
const switchChange = switchesSchema.partial().extend({ reset: z.literal(true).optional() });

function plainSwitches(): Switches {
  return { failNext: 0, failCode: 451, loseReplyNext: 0, delayMs: 0, down: false };
}

const PAGE_HEADERS = {
  "content-type": "text/html; charset=utf-8",
  "cache-control": "no-store",
  "referrer-policy": "no-referrer",
  "x-content-type-options": "nosniff",
  "content-security-policy":
    "default-src 'none'; style-src 'self'; font-src 'self'; img-src data:; frame-src 'self'; form-action 'self'; base-uri 'none'; frame-ancestors 'none'",
};
const FONT_FOLDER = join(import.meta.dirname, "../../node_modules/@fontsource-variable");
const ASSETS: Record<string, { file: string; type: string }> = {
  "/assets/mail.css": { file: join(import.meta.dirname, "mail.css"), type: "text/css; charset=utf-8" },
  "/assets/title.woff2": {
    file: join(FONT_FOLDER, "cormorant-garamond/files/cormorant-garamond-latin-wght-normal.woff2"),
    type: "font/woff2",
  },
  "/assets/work.woff2": {
    file: join(FONT_FOLDER, "source-sans-3/files/source-sans-3-latin-wght-normal.woff2"),
    type: "font/woff2",
  },
};

/** What a message brings with it runs nowhere: no scripts, no forms, and pictures from elsewhere only on request. */
function messagePolicy(pictures: boolean): string {
  const from = pictures ? "data: http: https:" : "data:";
  return `default-src 'none'; style-src 'unsafe-inline'; img-src ${from}; font-src data:; base-uri 'none'; form-action 'none'; frame-ancestors 'self'; sandbox allow-popups allow-popups-to-escape-sandbox`;
}

/** The error an SMTP client is answered with. */
function refusal(code: number, message: string): Error {
  return Object.assign(new Error(message), { responseCode: code });
}

async function readBody(request: IncomingMessage): Promise<string> {
  const parts: Buffer[] = [];
  let size = 0;
  for await (const part of request) {
    size += part.length;
    if (size > LARGEST_BODY) throw new Error("the body is too large");
    parts.push(part);
  }
  return Buffer.concat(parts).toString("utf8");
}

function isTaken(error: unknown): boolean {
  return error instanceof Error && "code" in error && error.code === "EADDRINUSE";
}

/** A mail server that keeps whatever it is given and passes nothing on, with a page to read it. */
export function createMailFake(options: MailFakeOptions): MailFake {
  const now = options.now ?? Date.now;
  const host = options.host ?? "127.0.0.1";
  const stop = new AbortController();
  const arrivals = new EventEmitter().setMaxListeners(0);
  const sockets = new Map<number, Socket>();
  let switches = plainSwitches();
  let messages: MessageStore | null = null;
  let origin = "";

  function store(): MessageStore {
    if (!messages) throw new Error("the mail fake has not been started");
    return messages;
  }

  async function receive(stream: SMTPServerDataStream, session: SMTPServerSession): Promise<void> {
    const parts: Buffer[] = [];
    for await (const part of stream) parts.push(part);
    if (stream.sizeExceeded) throw refusal(552, "The message is too large");
    if (switches.delayMs > 0) await wait(switches.delayMs, undefined, { signal: stop.signal });
    if (switches.failNext > 0) {
      switches.failNext -= 1;
      throw refusal(switches.failCode, "Not taken (a switch of this fake)");
    }
    const { mailFrom, rcptTo } = session.envelope;
    const envelope = {
      from: mailFrom === false ? "" : mailFrom.address,
      to: rcptTo.map(({ address }) => address),
    };
    const entry = await store().add(Buffer.concat(parts), envelope, now());
    arrivals.emit("message", entry);
    if (switches.loseReplyNext > 0) {
      switches.loseReplyNext -= 1;
      sockets.get(session.remotePort)?.destroy();
    }
  }

  const smtp = new SMTPServer({
    name: "mail-fake.invalid",
    authOptional: true,
    allowInsecureAuth: true,
    hideSTARTTLS: true,
    disabledCommands: ["STARTTLS"],
    disableReverseLookup: true,
    logger: false,
    size: LARGEST_MESSAGE,
    closeTimeout: 300,
    onConnect: (_session, done) => {
      if (!messages || switches.down) done(refusal(421, "Closed for the moment"));
      else done();
    },
    // Whoever signs in is believed: there is nothing to protect.
    onAuth: (auth, _session, done) => done(null, { user: auth.username ?? "anyone" }),
    onData: (stream, session, done) => {
      receive(stream, session).then(
        () => done(),
        (error: unknown) => done(error instanceof Error ? error : new Error(String(error))),
      );
    },
  });
  smtp.server.on("connection", (socket: Socket) => {
    const port = socket.remotePort ?? 0;
    sockets.set(port, socket);
    socket.once("close", () => sockets.delete(port));
  });

  function sendJson(response: ServerResponse, status: number, body: unknown): void {
    response.writeHead(status, { "content-type": "application/json", "cache-control": "no-store" });
    response.end(JSON.stringify(body, null, 2));
  }

  function sendPage(response: ServerResponse, status: number, page: string): void {
    response.writeHead(status, PAGE_HEADERS);
    response.end(page);
  }

  /** Resolves once an address has so many messages, or the time is up. */
  function arrived(address: string | null, count: number, patienceMs: number): Promise<void> {
    return new Promise((resolve) => {
      const done = () => {
        clearTimeout(timer);
        arrivals.off("message", look);
        stop.signal.removeEventListener("abort", done);
        resolve();
      };
      const look = () => {
        if (store().to(address).length >= count) done();
      };
      const timer = setTimeout(done, patienceMs);
      arrivals.on("message", look);
      stop.signal.addEventListener("abort", done);
      look();
    });
  }

  function number(text: string | null, otherwise: number, most: number): number {
    const value = text === null || !/^\d+$/.test(text) ? otherwise : Number(text);
    return Math.min(value, most);
  }

  async function answerMessages(request: IncomingMessage, response: ServerResponse, url: URL): Promise<void> {
    const address = url.searchParams.get("to");
    if (request.method === "DELETE") {
      sendJson(response, 200, { deleted: store().delete(store().to(address)) });
      return;
    }
    const patience = number(url.searchParams.get("wait"), 0, LONGEST_WAIT_MS);
    if (patience > 0) await arrived(address, number(url.searchParams.get("count"), 1, 10_000), patience);
    const limit = number(url.searchParams.get("limit"), Number.POSITIVE_INFINITY, Number.POSITIVE_INFINITY);
    const found = store().to(address).slice(0, limit);
    sendJson(response, 200, await Promise.all(found.map((entry) => store().message(entry))));
  }

  function answerList(response: ServerResponse, url: URL): void {
    const search = (url.searchParams.get("q") ?? "").trim();
    const wanted = search.toLowerCase();
    const found = store()
      .list()
      .filter((entry) =>
        [entry.from, ...entry.to, entry.subject].some((text) => text.toLowerCase().includes(wanted)),
      );
    const before = url.searchParams.get("before");
    const begin = before === null ? 0 : found.findIndex(({ id }) => id === before) + 1;
    const entries = found.slice(begin, begin + PER_PAGE);
    sendPage(response, 200, listPage({ entries, search, older: found.length - begin - entries.length }));
  }

  async function answerMessage(
    response: ServerResponse,
    entry: Entry,
    part: string,
    url: URL,
  ): Promise<void> {
    const pictures = url.searchParams.has("pictures");
    const mail = await store().parsed(entry.id);
    const attachment = /^\/attachments\/(\d+)$/.exec(part)?.[1];
    const attached = attachment === undefined ? undefined : mail.attachments[Number(attachment)];
    const safe = {
      "cache-control": "no-store",
      "x-content-type-options": "nosniff",
      "referrer-policy": "no-referrer",
    };
    if (part === "") sendPage(response, 200, messagePage(await store().message(entry), pictures));
    else if (part === ".json") sendJson(response, 200, await store().message(entry));
    else if (part === "/html" && mail.html) {
      response.writeHead(200, {
        ...safe,
        "content-type": "text/html; charset=utf-8",
        "content-security-policy": messagePolicy(pictures),
      });
      response.end(viewableHtml(mail.html, mail.attachments));
    } else if (part === "/source") {
      response.writeHead(200, { ...safe, "content-type": "text/plain; charset=utf-8" });
      response.end(store().source(entry.id));
    } else if (attached) {
      const name = encodeURIComponent(attached.filename ?? "attachment");
      response.writeHead(200, {
        ...safe,
        "content-type": "application/octet-stream",
        "content-disposition": `attachment; filename*=UTF-8''${name}`,
        "content-security-policy": "sandbox",
      });
      response.end(attached.content);
    } else sendPage(response, 404, missingPage());
  }

  async function answerSwitches(request: IncomingMessage, response: ServerResponse): Promise<void> {
    if (request.method === "POST") {
      let json: unknown;
      try {
        json = JSON.parse(await readBody(request));
      } catch {
        sendJson(response, 400, { error: "the body is not JSON" });
        return;
      }
      const wanted = switchChange.safeParse(json);
      if (!wanted.success) {
        sendJson(response, 400, { error: z.prettifyError(wanted.error) });
        return;
      }
      const { reset, ...change } = wanted.data;
      switches = { ...(reset ? plainSwitches() : switches), ...change };
    }
    sendJson(response, 200, switches);
  }

  async function answer(request: IncomingMessage, response: ServerResponse): Promise<void> {
    const url = new URL(request.url ?? "/", "http://fake.invalid");
    const { pathname } = url;
    const changes = request.method !== "GET" && request.method !== "HEAD";
    const asset = ASSETS[pathname];
    const one = /^\/messages\/([\w-]+)(\.json|\/.+)?$/.exec(pathname);
    if (pathname === "/-/health") sendJson(response, 200, { ok: true });
    else if (changes && request.headers.origin !== undefined && request.headers.origin !== origin) {
      sendJson(response, 403, { error: "not from another page" });
    } else if (pathname === "/-/switches") await answerSwitches(request, response);
    else if (pathname === "/messages" && request.method !== "POST")
      await answerMessages(request, response, url);
    else if (changes) sendJson(response, 405, { error: "nothing to be done here" });
    else if (pathname === "/") answerList(response, url);
    else if (asset) {
      response.writeHead(200, { "content-type": asset.type, "cache-control": "public, max-age=3600" });
      response.end(readFileSync(asset.file));
    } else {
      const entry = one?.[1] === undefined ? undefined : store().get(one[1]);
      if (entry) await answerMessage(response, entry, one?.[2] ?? "", url);
      else if (pathname.endsWith(".json")) sendJson(response, 404, { error: "no such message" });
      else sendPage(response, 404, missingPage());
    }
  }

  const http = createServer((request, response) => {
    answer(request, response).catch((error: unknown) => {
      if (!stop.signal.aborted) console.error(error);
      if (response.headersSent) request.socket.destroy();
      else sendJson(response, 500, { error: "this fake has a mistake in it; see its log" });
    });
  });

  /** The port a server has come to listen on. */
  function listening(
    server: { once: (name: "error", listener: (error: Error) => void) => unknown; address: () => unknown },
    start: (done: () => void) => void,
  ): Promise<number> {
    return new Promise((resolve, reject) => {
      server.once("error", reject);
      start(() => {
        const bound = server.address();
        if (bound && typeof bound === "object" && "port" in bound && typeof bound.port === "number") {
          resolve(bound.port);
        } else reject(new Error("a server of the mail fake has no port"));
      });
    });
  }

  async function close(): Promise<void> {
    stop.abort();
    await Promise.all([
      new Promise<void>((resolve) => smtp.close(() => resolve())),
      new Promise<void>((resolve) => {
        http.close(() => resolve());
        http.closeAllConnections();
      }),
    ]);
  }

  return {
    listen: async () => {
      const started: { smtpPort?: number } = {};
      try {
        // Broken connections end here; a port that is taken is told by the promise below.
        smtp.on("error", () => undefined);
        started.smtpPort = await listening(smtp.server, (done) => smtp.listen(options.smtpPort, host, done));
        const mailPort = await listening(http, (done) => http.listen(options.mailPort, host, done));
        // The messages are opened only by who has both ports: two fakes never write to them at once.
        messages = new MessageStore(join(options.dataDir, "mail"));
        origin = `http://${host.includes(":") ? `[${host}]` : host}:${mailPort}`;
        return { smtpPort: started.smtpPort, mailPort, url: origin };
      } catch (error) {
        if (started.smtpPort !== undefined) await close();
        if (!isTaken(error)) throw error;
        throw started.smtpPort === undefined
          ? new PortTaken("SMTP_PORT", options.smtpPort, host)
          : new PortTaken("MAIL_PORT", options.mailPort, host);
      }
    },
    close,
  };
}
