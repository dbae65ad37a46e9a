import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { createServer, type IncomingHttpHeaders, request, type Server } from "node:http";
import { tmpdir } from "node:os";
import path from "node:path";
import { createRequestHandler } from "@react-router/express";
import type { RequestHandler } from "express";
import type { ServerBuild } from "react-router";
import { afterAll, beforeAll, expect, test } from "vitest";
import { createWeb, parseTrustProxy } from "./web";

const clientDirectory = mkdtempSync(path.join(tmpdir(), "numberleaf-web-"));
const servers: Server[] = [];
const logged: unknown[] = [];

beforeAll(() => {
  mkdirSync(path.join(clientDirectory, "assets"));
  writeFileSync(path.join(clientDirectory, "assets", "entry-abc.js"), "export {};");
  writeFileSync(path.join(clientDirectory, "favicon.svg"), "<svg/>");
});
afterAll(() => {
  for (const server of servers) server.close();
  rmSync(clientDirectory, { recursive: true });
});

/** The port of a server with these routes. */
async function listen(trustProxy: string, handler: RequestHandler): Promise<number> {
  const app = createWeb({
    clientDirectory,
    trustProxy,
    logger: { error: (entry: unknown) => logged.push(entry) },
    handler,
  });
  const server = createServer(app);
  servers.push(server);
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  const address = server.address();
  return typeof address === "object" && address !== null ? address.port : 0;
}

/** One whose routes answer with what they were asked. */
function serve(trustProxy: string): Promise<number> {
  return listen(trustProxy, (asked, response) => {
    if (asked.path === "/broken") throw new Error("broken");
    new URL(`http://${asked.headers.host}${asked.originalUrl}`);
    response.json({ host: asked.headers.host, protocol: asked.protocol, headers: asked.headers });
  });
}

type Answer = { status: number; headers: IncomingHttpHeaders; text: string };

function ask(
  port: number,
  target: string,
  options: { method?: string; headers?: Record<string, string>; body?: string; chunked?: boolean } = {},
): Promise<Answer> {
  return new Promise((resolve, reject) => {
    const sent = request(
      { port, host: "127.0.0.1", path: target, method: options.method ?? "GET", headers: options.headers },
      (response) => {
        let text = "";
        response.setEncoding("utf8");
        response.on("data", (chunk) => {
          text += chunk;
        });
        response.on("end", () =>
          resolve({ status: response.statusCode ?? 0, headers: response.headers, text }),
        );
      },
    );
    sent.on("error", reject);
    if (options.chunked) sent.write(options.body);
    sent.end(options.chunked ? undefined : options.body);
  });
}

test("what a client sends under the internal names is thrown away", async () => {
  const port = await serve("");
  const answer = await ask(port, "/anything", {
    headers: {
      "x-numberleaf-request-id": "forged",
      "x-numberleaf-client-ip": "198.51.100.7",
      "x-request-id": "also-forged",
      "x-forwarded-for": "198.51.100.7",
      "x-forwarded-host": "elsewhere.example",
      "x-forwarded-proto": "https",
    },
  });
  const seen = JSON.parse(answer.text);
  expect(seen.headers["x-numberleaf-request-id"]).toMatch(/^[0-9a-f-]{36}$/);
  expect(seen.headers["x-numberleaf-client-ip"]).toBe("127.0.0.1");
  expect(seen.protocol).toBe("http");
  expect(seen.host).toBe(`127.0.0.1:${port}`);
  expect(answer.headers["x-powered-by"]).toBeUndefined();
});

test("behind a trusted proxy the browser's own address, host, scheme and the proxy's request id count", async () => {
  const port = await serve("loopback");
  const answer = await ask(port, "/anything", {
    headers: {
      "x-request-id": "proxy-request-1",
      "x-forwarded-for": "203.0.113.9",
      "x-forwarded-host": "shop.example",
      "x-forwarded-proto": "https",
    },
  });
  expect(JSON.parse(answer.text)).toMatchObject({
    host: "shop.example",
    protocol: "https",
    headers: { "x-numberleaf-request-id": "proxy-request-1", "x-numberleaf-client-ip": "203.0.113.9" },
  });
});

test("an action is run for a page of the shop behind a proxy that asks under its own name and port", async () => {
  // The framework compares the origin of the page with the address it was asked under, port included.
  let actions = 0;
  const page = {
    default: () => null,
    action: () => {
      actions += 1;
      return null;
    },
  };
  const build: ServerBuild = {
    entry: { module: { default: () => new Response("page"), handleError: () => {} } },
    routes: { root: { id: "root", path: "post", module: page } },
    assets: { routes: {}, entry: { imports: [], module: "" }, url: "", version: "" },
    publicPath: "/",
    assetsBuildDirectory: "",
    future: { v8_middleware: true, v8_passThroughRequests: true, v8_trailingSlashAwareDataRequests: true },
    isSpaMode: false,
    ssr: true,
    prerender: [],
    routeDiscovery: { mode: "initial", manifestPath: "/__manifest" },
  };
  const port = await listen("1", createRequestHandler({ build, mode: "production" }));
  const post = (headers: Record<string, string>) =>
    ask(port, "/post", {
      method: "POST",
      body: "a=b",
      headers: {
        origin: "https://shop.example",
        "content-type": "application/x-www-form-urlencoded",
        "content-length": "3",
        ...headers,
      },
    });
  const refused = await post({ "x-forwarded-proto": "https" });
  expect([refused.status, actions]).toEqual([400, 0]);
  const taken = await post({ "x-forwarded-proto": "https", "x-forwarded-host": "shop.example" });
  expect([taken.status, taken.text, actions]).toEqual([200, "page", 1]);
});

test("files whose names carry a hash are kept for good, others for an hour, and a missing one is not a page", async () => {
  const port = await serve("");
  const asset = await ask(port, "/assets/entry-abc.js");
  expect(asset.headers["cache-control"]).toBe("public, max-age=31536000, immutable");
  expect(asset.headers["x-content-type-options"]).toBe("nosniff");
  expect((await ask(port, "/favicon.svg")).headers["cache-control"]).toBe("public, max-age=3600");
  const missing = await ask(port, "/assets/entry-gone.js");
  expect([missing.status, missing.headers["content-type"]]).toEqual([404, "text/plain; charset=utf-8"]);
  expect((await ask(port, "/assets/../../../../etc/passwd")).text).not.toContain("root:");
});

test("a body that is too large, or of unknown length, is refused before it is read", async () => {
  const port = await serve("");
  const post = (headers: Record<string, string>, body: string, chunked = false) =>
    ask(port, "/form", { method: "POST", headers, body, chunked });
  expect((await post({ "content-length": "3" }, "a=b")).status).toBe(200);
  expect(
    (await ask(port, "/form", { method: "POST", headers: { "content-length": "9999999" } })).status,
  ).toBe(413);
  expect((await post({}, "a=b", true)).status).toBe(411);
});

test("an address that is none is the client's mistake, an exception is ours and logged without the address", async () => {
  const port = await serve("");
  logged.length = 0;
  expect((await ask(port, "/", { headers: { host: "shop.example:port" } })).status).toBe(400);
  expect(logged).toHaveLength(0);
  const answer = await ask(port, "/broken?secret=1");
  expect([answer.status, answer.text]).toEqual([500, "Something went wrong.\n"]);
  expect(answer.headers["x-request-id"]).toMatch(/^[0-9a-f-]{36}$/);
  expect(logged).toHaveLength(1);
  expect(JSON.stringify(logged)).not.toContain("secret");
});

test("the proxies to be believed are a number, a list, or none", () => {
  expect(parseTrustProxy("")).toBe(false);
  expect(parseTrustProxy("false")).toBe(false);
  expect(parseTrustProxy("true")).toBe(1);
  expect(parseTrustProxy("2")).toBe(2);
  expect(parseTrustProxy("loopback, 10.0.0.0/8")).toEqual(["loopback", "10.0.0.0/8"]);
});
