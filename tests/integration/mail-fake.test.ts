import { spawn } from "node:child_process";
import { once } from "node:events";
import { appendFile, mkdtemp, readdir, rm, writeFile } from "node:fs/promises";
import { type AddressInfo, createServer as createTcpServer } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { createTransport, type SendMailOptions } from "nodemailer";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import type { Message } from "../../scripts/mail-fake/message-store";
import { createMailFake } from "../../scripts/mail-fake/server";

let folder: string;
const cleanup: (() => Promise<unknown>)[] = [];

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), "mail-fake-"));
});
afterEach(async () => {
  for (const undo of cleanup.splice(0).reverse()) await undo();
  await rm(folder, { recursive: true, force: true });
});

function client(smtpPort: number, url: string) {
  const transport = createTransport({ host: "127.0.0.1", port: smtpPort, secure: false });
  cleanup.push(async () => transport.close());
  const get = (path: string, init?: RequestInit) => fetch(`${url}${path}`, init);
  return {
    url,
    get,
    send: (more: SendMailOptions = {}) =>
      transport.sendMail({
        from: "Sunniva Harcastle Photographs <studio@harcastle.example>",
        to: "ada.thorne@post.example",
        subject: "Your order 1042",
        text: "Number 7/25 is yours.",
        ...more,
      }),
    messages: async (query = ""): Promise<Message[]> => (await get(`/messages${query}`)).json(),
    switches: (change: object) => get("/-/switches", { method: "POST", body: JSON.stringify(change) }),
  };
}

async function start() {
  const fake = createMailFake({ smtpPort: 0, mailPort: 0, dataDir: folder });
  const { smtpPort, mailPort, url } = await fake.listen();
  let open = true;
  const close = async () => {
    if (open) await fake.close();
    open = false;
  };
  cleanup.push(close);
  return { close, smtpPort, mailPort, ...client(smtpPort, url) };
}

describe("what nodemailer hands in", () => {
  test("comes back whole: subject, both parts, Message-ID, headers, attachment", async () => {
    const { send, messages, get } = await start();
    await send({
      to: "Ada Thorne <ada.thorne@post.example>",
      bcc: "archive@harcastle.example",
      subject: "Bestätigung: Nr. 7/25 – „Pell Wood“ 冬",
      text: "Schöne Grüße\nhttps://shop.example/orders/abc",
      html: "<p>Schöne <b>Grüße</b></p>",
      messageId: "<order-1042.confirmation@harcastle.example>",
      headers: { "X-Numberleaf-Kind": "confirmation" },
      attachments: [
        {
          filename: "Rechnung – 2026.pdf",
          content: Buffer.from("%PDF-1.7 \u0000ÿ"),
          contentType: "application/pdf",
        },
      ],
    });
    const [message, ...others] = await messages("?to=ada.thorne@post.example");
    expect(others).toEqual([]);
    expect(message).toMatchObject({
      to: ["ada.thorne@post.example", "archive@harcastle.example"],
      subject: "Bestätigung: Nr. 7/25 – „Pell Wood“ 冬",
      html: "<p>Schöne <b>Grüße</b></p>",
      attachments: [{ filename: "Rechnung – 2026.pdf", contentType: "application/pdf" }],
    });
    expect(message?.from).toContain("studio@harcastle.example");
    expect(message?.text?.trim()).toBe("Schöne Grüße\nhttps://shop.example/orders/abc");
    expect(message?.headers["message-id"]).toBe("<order-1042.confirmation@harcastle.example>");
    expect(message?.headers["x-numberleaf-kind"]).toBe("confirmation");
    expect(message?.headers.bcc).toBeUndefined();
    expect(Date.parse(message?.receivedAt ?? "")).not.toBeNaN();

    expect(await (await get(`/messages/${message?.id}.json`)).json()).toEqual(message);
    const attachment = await get(`/messages/${message?.id}/attachments/0`);
    expect(attachment.headers.get("content-disposition")).toContain(
      encodeURIComponent("Rechnung – 2026.pdf"),
    );
    expect(Buffer.from(await attachment.arrayBuffer())).toEqual(Buffer.from("%PDF-1.7 \u0000ÿ"));
    const source = await (await get(`/messages/${message?.id}/source`)).text();
    expect(source).toContain("Message-ID: <order-1042.confirmation@harcastle.example>");
  });

  test("parts that were not sent are null, not made up", async () => {
    const { send, messages } = await start();
    await send({ text: "Only text" });
    await send({ text: undefined, html: "<p>Only HTML</p>" });
    const [html, text] = await messages();
    expect(text).toMatchObject({ html: null });
    expect(html).toMatchObject({ text: null });
  });

  test("is found by recipient, newest first, blind copies too", async () => {
    const { send, messages } = await start();
    await send({ subject: "one" });
    await send({ subject: "two", to: "noor@post.example" });
    await send({ subject: "three", cc: "noor@post.example" });
    await send({ subject: "four", to: "other@post.example", bcc: "Noor@Post.example" });
    const subjects = async (query: string) => (await messages(query)).map(({ subject }) => subject);
    expect(await subjects("")).toEqual(["four", "three", "two", "one"]);
    expect(await subjects("?to=NOOR@post.example")).toEqual(["four", "three", "two"]);
    expect(await subjects("?to=oor@post.example")).toEqual([]);
    expect(await subjects("?to=noor@post.example&limit=1")).toEqual(["four"]);
  });

  test("can be waited for", async () => {
    const { send, messages } = await start();
    const waiting = messages("?to=ada.thorne@post.example&wait=15000&count=2");
    await send({ subject: "one" });
    await send({ subject: "two" });
    expect((await waiting).map(({ subject }) => subject)).toEqual(["two", "one"]);
    expect(await messages("?to=nobody@post.example&wait=50")).toEqual([]);
  });

  test("is deleted, all of it or one address", async () => {
    const { send, messages, get, close } = await start();
    await send();
    await send({ to: "noor@post.example" });
    const gone = await get("/messages?to=noor@post.example", { method: "DELETE" });
    expect(await gone.json()).toEqual({ deleted: 1 });
    const [left] = await messages();
    expect(left?.to).toEqual(["ada.thorne@post.example"]);
    const foreign = await get("/messages", { method: "DELETE", headers: { origin: "https://shop.example" } });
    expect(foreign.status).toBe(403);
    await get("/messages", { method: "DELETE" });
    expect(await messages()).toEqual([]);
    await close();
    expect(await readdir(join(folder, "mail"))).toEqual(["index.jsonl"]);
    expect(await (await start()).messages()).toEqual([]);
  });
});

describe("the page", () => {
  test("lists, searches and shows a message whose HTML can do nothing", async () => {
    const { send, get, messages } = await start();
    const html =
      '<html><head></head><body><script>alert(1)</script><img src="cid:mark"><img src="https://elsewhere.example/a.png"></body></html>';
    const pixel = Buffer.from("R0lGODlhAQABAAAAACH5BAEKAAEALAAAAAABAAEAAAICTAEAOw==", "base64");
    await send({
      subject: "<i>Seven</i>",
      html,
      text: "See https://shop.example/orders/abc?x=1&y=2.",
      attachments: [{ cid: "mark", filename: "mark.gif", content: pixel }],
    });
    await send({ to: "noor@post.example", subject: "Another" });

    const list = await get("/");
    expect(list.headers.get("content-security-policy")).toContain("default-src 'none'");
    const page = await list.text();
    expect(page.indexOf("Another")).toBeLessThan(page.indexOf("&lt;i&gt;Seven"));
    expect(page).not.toMatch(/<i>Seven|<script|\sstyle=/);
    const found = await (await get("/?q=NOOR")).text();
    expect(found).toContain("Another");
    expect(found).not.toContain("Seven");
    expect(await (await get("/?q=nobody")).text()).toContain("No message has “nobody”");

    const [message] = await messages("?to=ada.thorne@post.example");
    const shown = await (await get(`/messages/${message?.id}`)).text();
    expect(shown).toMatch(/<iframe src="\/messages\/[\w-]+\/html"[^>]* sandbox="[^"]*"/);
    expect(shown).not.toContain("allow-scripts");
    expect(shown).toContain('<a href="https://shop.example/orders/abc?x=1&amp;y=2">');
    expect(shown).toContain("message-id");

    const inside = await get(`/messages/${message?.id}/html`);
    const policy = inside.headers.get("content-security-policy") ?? "";
    expect(policy).toContain("default-src 'none'");
    expect(policy).toMatch(/sandbox(?!.*allow-scripts)/);
    expect(policy).toContain("img-src data:;");
    const body = await inside.text();
    expect(body).toContain(`data:image/gif;base64,${pixel.toString("base64")}`);
    expect(body).toContain('<base target="_blank">');
    const pictures = await get(`/messages/${message?.id}/html?pictures=1`);
    expect(pictures.headers.get("content-security-policy")).toContain("img-src data: http: https:");

    expect((await get("/messages/none")).status).toBe(404);
  });

  test("goes on to older messages", async () => {
    const { smtpPort, get } = await start();
    const transport = createTransport({ host: "127.0.0.1", port: smtpPort, pool: true, maxConnections: 1 });
    cleanup.push(async () => transport.close());
    for (let at = 1; at <= 52; at += 1) {
      await transport.sendMail({
        from: "studio@harcastle.example",
        to: "ada.thorne@post.example",
        subject: `Message no. ${at}.`,
        text: "-",
      });
    }
    const first = await (await get("/")).text();
    expect(first).toContain("Message no. 52.");
    expect(first).not.toContain("Message no. 2.");
    const older = /href="(\/\?before=[^"]+)">2 older/.exec(first)?.[1] ?? "";
    const second = await (await get(older)).text();
    expect(second).toContain("Message no. 1.");
    expect(second).not.toContain("Message no. 3.");
  });
});

describe("faults on demand", () => {
  test("refuses for now, or for good", async () => {
    const { send, messages, switches } = await start();
    await switches({ failNext: 1 });
    await expect(send()).rejects.toMatchObject({ responseCode: 451 });
    await switches({ failNext: 1, failCode: 550 });
    await expect(send()).rejects.toMatchObject({ responseCode: 550 });
    expect(await messages()).toEqual([]);
    await send();
    expect(await messages()).toHaveLength(1);
    expect((await switches({ failNxt: 1 })).status).toBe(400);
  });

  test("is down, and comes back", async () => {
    const { send, messages, switches } = await start();
    await switches({ down: true });
    await expect(send()).rejects.toMatchObject({ responseCode: 421 });
    await switches({ reset: true });
    await send();
    expect(await messages()).toHaveLength(1);
  });

  test("keeps a message but loses its answer", async () => {
    const { send, messages, switches } = await start();
    await switches({ loseReplyNext: 1 });
    await expect(send({ messageId: "<same@harcastle.example>" })).rejects.toThrow();
    await send({ messageId: "<same@harcastle.example>" });
    const ids = (await messages()).map(({ headers }) => headers["message-id"]);
    expect(ids).toEqual(["<same@harcastle.example>", "<same@harcastle.example>"]);
  });

  test("takes its time", async () => {
    const { send, switches } = await start();
    await switches({ delayMs: 300 });
    const began = performance.now();
    await send();
    expect(performance.now() - began).toBeGreaterThanOrEqual(295);
  });
});

// Starting a process takes a while where many tests share two cores.
describe("as a process", { timeout: 60_000 }, () => {
  async function freePort(): Promise<number> {
    const probe = createTcpServer();
    probe.listen(0, "127.0.0.1");
    await once(probe, "listening");
    const { port } = probe.address() as AddressInfo;
    probe.close();
    await once(probe, "close");
    return port;
  }

  function run(environment: Record<string, string>) {
    const child = spawn(process.execPath, ["--import", "tsx", "scripts/mail-fake/main.ts"], {
      env: { PATH: process.env.PATH ?? "", DATA_DIR: folder, ...environment },
    });
    let output = "";
    const ready = new Promise<void>((resolve) => {
      const read = (part: Buffer) => {
        output += part.toString("utf8");
        if (output.includes("listening on")) resolve();
      };
      child.stdout.on("data", read);
      child.stderr.on("data", read);
    });
    const ended = once(child, "close").then(([code, signal]) => ({ code, signal, output }));
    cleanup.push(async () => {
      child.kill("SIGKILL");
      await ended;
    });
    return { child, ready, ended };
  }

  test("what it has acknowledged outlives kill -9; what was half written is cleared away", async () => {
    const [smtp, http] = [await freePort(), await freePort()];
    const environment = { SMTP_PORT: String(smtp), MAIL_PORT: String(http) };
    const { send, messages, get } = client(smtp, `http://127.0.0.1:${http}`);
    const first = run(environment);
    await first.ready;
    await send({ subject: "one" });
    await send({ subject: "zwölf" });
    const before = await messages();
    expect(before).toHaveLength(2);
    first.child.kill("SIGKILL");
    expect((await first.ended).signal).toBe("SIGKILL");
    await appendFile(join(folder, "mail", "index.jsonl"), '{"id":"half","to":["ad');
    await writeFile(join(folder, "mail", "half.eml"), "Subject: half");

    const second = run(environment);
    await second.ready;
    expect(await messages()).toEqual(before);
    await send({ subject: "three" });
    expect((await messages()).map(({ subject }) => subject)).toEqual(["three", "zwölf", "one"]);
    expect(await readdir(join(folder, "mail"))).not.toContain("half.eml");
    expect(await (await get("/-/health")).json()).toEqual({ ok: true });

    const stopped = Date.now();
    second.child.kill("SIGTERM");
    expect((await second.ended).code).toBe(0);
    expect(Date.now() - stopped).toBeLessThan(5000);
    const third = await start();
    expect(await third.messages()).toHaveLength(3);
  });

  test("it names the port that is taken", async () => {
    const { smtpPort, mailPort } = await start();
    const other = { DATA_DIR: join(folder, "other") };
    const smtp = await run({ ...other, SMTP_PORT: String(smtpPort), MAIL_PORT: String(await freePort()) })
      .ended;
    expect(smtp.code).toBe(1);
    expect(smtp.output).toContain(`port ${smtpPort} on 127.0.0.1 is taken; set SMTP_PORT`);
    const http = await run({ ...other, SMTP_PORT: String(await freePort()), MAIL_PORT: String(mailPort) })
      .ended;
    expect(http.code).toBe(1);
    expect(http.output).toContain(`port ${mailPort} on 127.0.0.1 is taken; set MAIL_PORT`);
  });

  test("it refuses production", async () => {
    const { code, output } = await run({ NUMBERLEAF_MODE: "production" }).ended;
    expect(code).toBe(1);
    expect(output).toContain("production");
  });
});
