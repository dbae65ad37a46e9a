import { spawn } from "node:child_process";
import { once } from "node:events";
import { readFileSync } from "node:fs";
import { createServer, request as httpRequest, type IncomingHttpHeaders, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import { freePorts } from "../../scripts/lib/ports.mjs";
import { processesOfInstance } from "../../scripts/lib/processes.mjs";
import { dataDirectory, environment } from "./instance";

/** The running processes of the instance that run a script, each with its arguments. */
export function processesRunning(script: string): { pid: number; args: string[] }[] {
  return processesOfInstance(dataDirectory)
    .map((pid) => ({ pid, args: readFileSync(`/proc/${pid}/cmdline`, "utf8").split("\0").filter(Boolean) }))
    .filter(({ args }) => args.some((arg) => arg.endsWith(script)));
}

export type WebProcess = { port: number; stop: () => Promise<void> };

/** A second web process on the instance's database and build, configured in its own way. Resolves when it answers. */
export async function startWeb(changes: Record<string, string>): Promise<WebProcess> {
  const [running] = processesRunning("scripts/serve.ts");
  const build = running?.args.at(-1);
  if (build === undefined) throw new Error("the instance has no web process");
  const port = Number((await freePorts()).PORT);
  const child = spawn(process.execPath, ["--import", "tsx", "scripts/serve.ts", build], {
    stdio: ["ignore", "pipe", "inherit"],
    env: { PATH: process.env.PATH, NODE_ENV: "production", ...environment, ...changes, PORT: String(port) },
  });
  const ended = once(child, "exit");
  const listening = new Promise<void>((resolve) => {
    child.stdout.on("data", (part: Buffer) => {
      if (part.includes("web process listens")) resolve();
    });
  });
  await Promise.race([
    listening,
    ended.then(([code]) => {
      throw new Error(`the web process ended (${code})`);
    }),
  ]);
  return {
    port,
    stop: async () => {
      child.kill("SIGTERM");
      await ended;
    },
  };
}

export type Proxy = { port: number; stop: () => Promise<void> };

/**
 * A proxy as it stands before a shop: browsers speak TLS with it (here that part is left out), it speaks plain HTTP with
 * the web process and says in X-Forwarded-* what it was asked.
 *
 * @param keepsHost whether it asks under the shop's name, or under the web process's own and leaves the name to X-Forwarded-Host.
 */
export async function startProxy(webPort: number, keepsHost: boolean): Promise<Proxy> {
  const server: Server = createServer((asked, answer) => {
    const onward = httpRequest(
      {
        host: "127.0.0.1",
        port: webPort,
        method: asked.method,
        path: asked.url,
        headers: {
          ...asked.headers,
          host: keepsHost ? asked.headers.host : `127.0.0.1:${webPort}`,
          "x-forwarded-for": "203.0.113.7",
          "x-forwarded-proto": "https",
          "x-forwarded-host": asked.headers.host,
        },
      },
      (got) => {
        answer.writeHead(got.statusCode ?? 502, got.headers);
        got.pipe(answer);
      },
    );
    onward.on("error", () => answer.destroy());
    asked.pipe(onward);
  });
  server.listen(0, "127.0.0.1");
  await once(server, "listening");
  const { port } = server.address() as AddressInfo;
  return {
    port,
    stop: async () => {
      server.closeAllConnections();
      server.close();
      await once(server, "close");
    },
  };
}

export type PlainAnswer = { status: number; headers: IncomingHttpHeaders; text: string };

/** One request with exactly these headers, Host included, which a browser's own client would not let a test choose. */
export async function ask(
  port: number,
  options: {
    path: string;
    method?: "GET" | "POST";
    headers?: Record<string, string>;
    form?: Record<string, string>;
  },
): Promise<PlainAnswer> {
  const body = options.form === undefined ? undefined : new URLSearchParams(options.form).toString();
  const asking = httpRequest({
    host: "127.0.0.1",
    port,
    path: options.path,
    method: options.method ?? (body === undefined ? "GET" : "POST"),
    headers: {
      ...(body !== undefined && {
        "content-type": "application/x-www-form-urlencoded",
        "content-length": String(Buffer.byteLength(body)),
      }),
      ...options.headers,
    },
  });
  asking.end(body);
  const [answer] = await once(asking, "response");
  const parts: Buffer[] = [];
  for await (const part of answer) parts.push(part);
  return { status: answer.statusCode, headers: answer.headers, text: Buffer.concat(parts).toString("utf8") };
}
