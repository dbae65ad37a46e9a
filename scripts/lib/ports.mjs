import net from "node:net";
import { PlainError } from "./plain-error.mjs";

/** In this order they are PORT, PORT + 1 ... PORT + 5 unless set apart. */
export const PORT_NAMES = /** @type {const} */ ([
  "PORT",
  "STORAGE_PORT",
  "STRIPE_PORT",
  "MAIL_PORT",
  "SMTP_PORT",
  "POSTGRES_PORT",
]);

/** @typedef {(typeof PORT_NAMES)[number]} PortName */
/** @typedef {Record<PortName, number>} Ports */

/** Below the range from which Linux takes the ports of outgoing connections. */
const FREE_PORTS_FROM = 20_000;
const FREE_PORTS_TO = 32_000;

/**
 * The six ports of an instance, counted from PORT (3000) where they are not set.
 *
 * @param {Record<string, string | undefined>} environment
 * @returns {Ports}
 * @throws {PlainError} where one is no port, or two are the same.
 */
export function derivePorts(environment) {
  const base = readPort("PORT", environment.PORT, 3000);
  const ports = /** @type {Ports} */ ({});
  for (const [i, name] of PORT_NAMES.entries()) ports[name] = readPort(name, environment[name], base + i);
  for (const [i, name] of PORT_NAMES.entries()) {
    const same = PORT_NAMES.slice(0, i).find((other) => ports[other] === ports[name]);
    if (same !== undefined) {
      throw new PlainError(`${same} and ${name} are both ${ports[name]}: set one of them to another port.`);
    }
  }
  return ports;
}

/**
 * @param {PortName} name
 * @param {string | undefined} text
 * @param {number} otherwise
 */
function readPort(name, text, otherwise) {
  if (text !== undefined && text !== "" && !/^\d{1,5}$/.test(text)) {
    throw new PlainError(`${name} is "${text}": a port is a number from 1 to 65535.`);
  }
  const port = text ? Number(text) : otherwise;
  if (port < 1 || port > 65_535) {
    throw new PlainError(`${name} would be ${port}: a port is a number from 1 to 65535.`);
  }
  return port;
}

/**
 * Checks that every named port can be listened on now.
 *
 * @param {{ name: PortName, port: number, host: string }[]} wanted
 * @throws {PlainError} naming every port that cannot be had, and the variables that move it.
 */
export async function assertPortsFree(wanted) {
  const problems = [];
  for (const { name, port, host } of wanted) {
    const code = await listenError(port, host);
    if (code === "EADDRINUSE") {
      problems.push(`Port ${port} (${name}) is taken by another program.`);
    } else if (code === "EACCES") {
      problems.push(`Port ${port} (${name}) may not be used by this user.`);
    } else if (code === "EADDRNOTAVAIL") {
      problems.push(`This machine has no address ${host} (HOST).`);
    } else if (code !== undefined) {
      problems.push(`Port ${port} (${name}) cannot be used: ${code}.`);
    }
  }
  if (problems.length === 0) return;
  throw new PlainError(
    [
      ...problems,
      "Stop what uses it, or choose another: PORT moves all six ports (it and the five after it);",
      `${PORT_NAMES.slice(1).join(", ")} move one each. Example: PORT=4000 npm start`,
    ].join("\n"),
  );
}

/**
 * @param {number} port
 * @param {string} host
 * @returns {Promise<string | undefined>} the error's code, or undefined where the port could be listened on.
 */
function listenError(port, host) {
  return new Promise((resolve) => {
    const server = net.createServer();
    server.once("error", (error) => resolve("code" in error ? String(error.code) : error.message));
    server.listen({ port, host, exclusive: true }, () => server.close(() => resolve(undefined)));
  });
}

/**
 * Six ports in a row that are free on loopback now, as the environment variables that name them.
 *
 * @returns {Promise<Record<PortName, string>>}
 */
export async function freePorts() {
  for (;;) {
    const base = FREE_PORTS_FROM + Math.floor(Math.random() * (FREE_PORTS_TO - FREE_PORTS_FROM));
    const errors = await Promise.all(PORT_NAMES.map((_, i) => listenError(base + i, "127.0.0.1")));
    if (errors.some((error) => error !== undefined)) continue;
    return /** @type {Record<PortName, string>} */ (
      Object.fromEntries(PORT_NAMES.map((name, i) => [name, String(base + i)]))
    );
  }
}
