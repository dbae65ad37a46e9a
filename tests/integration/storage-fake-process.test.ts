import { type ChildProcess, spawn } from "node:child_process";
import { randomBytes } from "node:crypto";
import { once } from "node:events";
import { mkdtemp, readdir, readFile, rm } from "node:fs/promises";
import { connect, createServer } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { Readable } from "node:stream";
import { GetObjectCommand, HeadObjectCommand, PutObjectCommand, S3Client } from "@aws-sdk/client-s3";
import { getSignedUrl } from "@aws-sdk/s3-request-presigner";
import { afterEach, beforeEach, expect, test } from "vitest";
import { CREDENTIALS, PRIVATE, PUBLIC, REGION, send } from "../support/storage-server";

let folder: string;
const children: ChildProcess[] = [];

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), "numberleaf-storage-"));
});
afterEach(async () => {
  for (const child of children.splice(0)) await kill(child);
  await rm(folder, { recursive: true, force: true });
});

async function kill(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return;
  const exited = once(child, "exit");
  child.kill("SIGKILL");
  await exited;
}

/** Starts the server as `npm start` does. Resolves with its address, or with what it said when it ended instead. */
async function run(environment: Record<string, string> = {}) {
  const child = spawn(process.execPath, ["--import", "tsx", "storage-fake/main.ts"], {
    env: {
      PATH: process.env.PATH,
      STORAGE_PORT: "0",
      DATA_DIR: folder,
      S3_ACCESS_KEY_ID: CREDENTIALS.accessKeyId,
      S3_SECRET_ACCESS_KEY: CREDENTIALS.secretAccessKey,
      S3_REGION: REGION,
      S3_BUCKET_PRIVATE: PRIVATE,
      S3_BUCKET_PUBLIC: PUBLIC,
      NUMBERLEAF_MODE: "test",
      ...environment,
    },
  });
  children.push(child);
  let output = "";
  const ready = new Promise<string>((resolve) => {
    const read = (text: Buffer) => {
      output += text.toString();
      const url = /http:\/\/[\d.]+:\d+/.exec(output)?.[0];
      if (output.includes("storage ready") && url) resolve(url);
    };
    child.stdout.on("data", read);
    child.stderr.on("data", read);
  });
  const ended = once(child, "close").then(() => "");
  const url = await Promise.race([ready, ended]);
  return { child, url, output: () => output };
}

function client(url: string): S3Client {
  return new S3Client({
    endpoint: url,
    forcePathStyle: true,
    region: REGION,
    credentials: CREDENTIALS,
    maxAttempts: 1,
    requestChecksumCalculation: "WHEN_REQUIRED",
  });
}

/** The most memory a process has held so far, in bytes (`VmHWM` of proc(5)). */
async function peakMemory(child: ChildProcess): Promise<number> {
  const status = await readFile(`/proc/${child.pid}/status`, "utf8");
  return Number(/^VmHWM:\s+(\d+) kB$/m.exec(status)?.[1]) * 1024;
}

test("a large body goes through without being held in memory", async () => {
  const { child, url } = await run();
  const s3 = client(url);
  await s3.send(new PutObjectCommand({ Bucket: PRIVATE, Key: "warm", Body: randomBytes(1024 * 1024) }));
  const before = await peakMemory(child);

  const piece = Buffer.alloc(1024 * 1024, "x");
  const pieces = 300;
  const answer = await fetch(
    await getSignedUrl(s3, new PutObjectCommand({ Bucket: PRIVATE, Key: "large" })),
    {
      method: "PUT",
      headers: { "content-length": String(pieces * piece.length) },
      body: Readable.toWeb(Readable.from(Array.from({ length: pieces }, () => piece))) as ReadableStream,
      duplex: "half",
    } as RequestInit,
  );
  expect(answer.status).toBe(200);
  const got = await fetch(await getSignedUrl(s3, new GetObjectCommand({ Bucket: PRIVATE, Key: "large" })));
  let received = 0;
  for await (const bytes of got.body ?? []) received += bytes.length;
  expect(received).toBe(pieces * piece.length);

  expect((await peakMemory(child)) - before).toBeLessThan(120 * 1024 * 1024);
  s3.destroy();
}, 60_000);

test("a server killed in the middle of an upload starts again with what was complete, and nothing else", async () => {
  const first = await run();
  const s3 = client(first.url);
  await s3.send(new PutObjectCommand({ Bucket: PRIVATE, Key: "kept", Body: "what was there" }));
  for (const key of ["kept", "new"]) {
    const signed = new URL(await getSignedUrl(s3, new PutObjectCommand({ Bucket: PRIVATE, Key: key })));
    const socket = connect(Number(signed.port), signed.hostname);
    socket.on("error", () => {});
    socket.write(`PUT ${signed.pathname}${signed.search} HTTP/1.1\r\nHost: ${signed.host}\r\n`);
    socket.write(`Content-Length: 1000000\r\n\r\n${"x".repeat(500_000)}`);
  }
  const temporary = () => readdir(join(folder, "storage", "tmp"));
  await expect.poll(async () => (await temporary()).length).toBe(2);
  s3.destroy();
  await kill(first.child);
  expect(await temporary()).toHaveLength(2);

  const second = await run();
  const again = client(second.url);
  expect(await temporary()).toEqual([]);
  const kept = await again.send(new GetObjectCommand({ Bucket: PRIVATE, Key: "kept" }));
  expect(await kept.Body?.transformToString()).toBe("what was there");
  await expect(again.send(new HeadObjectCommand({ Bucket: PRIVATE, Key: "new" }))).rejects.toMatchObject({
    name: "NotFound",
  });
  again.destroy();
});

test.each(["SIGTERM", "SIGINT"] as const)(
  "%s ends it at once, also with a connection open",
  async (signal) => {
    const { child, url } = await run();
    const port = Number(new URL(url).port);
    const idle = connect(port, "127.0.0.1");
    idle.on("error", () => {});
    await once(idle, "connect");
    expect((await send(`${url}/-/health`)).body.toString()).toBe('{"status":"ok"}');

    const begun = Date.now();
    const exited = once(child, "exit");
    child.kill(signal);
    expect(await exited).toEqual([0, null]);
    expect(Date.now() - begun).toBeLessThan(5000);
    idle.destroy();
  },
);

test("it does not start in production, without its settings, or on a taken port", async () => {
  const production = await run({ NUMBERLEAF_MODE: "production" });
  expect([production.url, production.child.exitCode]).toEqual(["", 1]);
  expect(production.output()).toContain("production");

  const unset = await run({ S3_SECRET_ACCESS_KEY: "" });
  expect([unset.url, unset.child.exitCode]).toEqual(["", 1]);
  expect(unset.output()).toContain("S3_SECRET_ACCESS_KEY");

  const other = createServer().listen(0, "127.0.0.1");
  await once(other, "listening");
  const address = other.address();
  const port = typeof address === "object" && address !== null ? address.port : 0;
  const taken = await run({ STORAGE_PORT: String(port) });
  expect([taken.url, taken.child.exitCode]).toEqual(["", 1]);
  expect(taken.output()).toContain(`Port ${port} is taken`);
  // A start that may not have the folder must not touch it: another server may be using it.
  expect(await readdir(folder)).toEqual([]);
  other.close();
});
