import { createServer } from "node:http";
import path from "node:path";
import { pathToFileURL } from "node:url";
import { createRequestHandler } from "@react-router/express";
import { RouterContextProvider, type ServerBuild } from "react-router";
import { env } from "../app/platform/env.server";
import { logger } from "../app/platform/logger.server";
import { createWeb } from "./lib/web";

/*
 * The web process: serve.ts BUILD_FOLDER. Keeps nothing of its own, so any number may run.
 */

/** Requests get this long to end after the process was asked to stop, in ms; the start command allows a second more. */
const GRACE = 6_000;

/** Longer than the idle time of common proxies, so that they never use a connection that is just closing. In ms. */
const KEEP_ALIVE = 65_000;

const buildDirectory = path.resolve(process.argv[2] ?? "build");
const build: ServerBuild = await import(pathToFileURL(path.join(buildDirectory, "server", "index.js")).href);

const app = createWeb({
  clientDirectory: path.join(buildDirectory, "client"),
  trustProxy: env.TRUST_PROXY,
  logger,
  handler: createRequestHandler({
    // Forms come from the address buyers use, also where a proxy asks us under another name without saying so.
    // "null" comes from pages that send no referrer; our own middleware decides about it.
    build: { ...build, allowedActionOrigins: [new URL(env.BASE_URL).host, "null"] },
    mode: env.NODE_ENV,
    getLoadContext: () => new RouterContextProvider(),
  }),
});

const server = createServer({ keepAliveTimeout: KEEP_ALIVE }, app);
server.headersTimeout = KEEP_ALIVE + 1_000;
server.on("error", (error) => {
  logger.fatal({ err: error }, "cannot listen");
  process.exit(1);
});
server.listen(env.PORT, env.HOST, () => logger.info({ port: env.PORT }, "web process listens"));

let stopping = false;
function stop(): void {
  if (stopping) return;
  stopping = true;
  logger.info("web process stops");
  server.close(() => process.exit(0));
  // Connections that are kept alive become idle one by one as their requests end.
  setInterval(() => server.closeIdleConnections(), 100).unref();
  setTimeout(() => {
    server.closeAllConnections();
    process.exit(0);
  }, GRACE).unref();
}
process.on("SIGTERM", stop);
process.on("SIGINT", stop);
