import { mkdirSync, statSync } from "node:fs";
import net from "node:net";

/*
 * Locks that a dead process cannot keep: a listening socket in Linux's abstract namespace goes with its process,
 * however that ends, and leaves no file behind. The name is taken from the folder's identity on disk, so that two paths
 * to one folder are one lock.
 */

/**
 * @param {string} purpose
 * @param {string} directory an existing folder, or one to be made.
 */
function socketName(purpose, directory) {
  mkdirSync(directory, { recursive: true });
  const { dev, ino } = statSync(directory);
  return `\0numberleaf/${purpose}/${dev}/${ino}`;
}

/**
 * Takes the lock if it is free.
 *
 * @param {string} purpose
 * @param {string} directory
 * @param {string} [note] what whoever finds the lock taken is told.
 * @returns {Promise<{ release: () => void } | undefined>} undefined where another process holds it.
 */
export function tryLock(purpose, directory, note = "") {
  return new Promise((resolve, reject) => {
    /** @type {Set<net.Socket>} */
    const waiting = new Set();
    const server = net.createServer((socket) => {
      waiting.add(socket);
      socket.on("error", () => socket.destroy());
      socket.on("close", () => waiting.delete(socket));
      socket.write(`${note}\n`);
    });
    server.once("error", (error) => {
      if ("code" in error && error.code === "EADDRINUSE") resolve(undefined);
      else reject(error);
    });
    server.listen(socketName(purpose, directory), () => {
      // A lock alone is no reason for a process to live on.
      server.unref();
      resolve({
        release: () => {
          server.close();
          for (const socket of waiting) socket.destroy();
        },
      });
    });
  });
}

/**
 * The note of whoever holds the lock.
 *
 * @param {string} purpose
 * @param {string} directory
 * @returns {Promise<string | undefined>} undefined where nobody does.
 */
export function lockNote(purpose, directory) {
  return new Promise((resolve) => {
    const socket = net.connect(socketName(purpose, directory));
    let text = "";
    socket.setEncoding("utf8");
    socket.on("data", (chunk) => {
      text += chunk;
      if (text.includes("\n")) {
        resolve(text.slice(0, text.indexOf("\n")));
        socket.destroy();
      }
    });
    socket.on("error", () => resolve(undefined));
    socket.on("close", () => resolve(undefined));
  });
}

/**
 * Runs `work` while holding the lock, after whoever holds it now.
 *
 * @template T
 * @param {string} purpose
 * @param {string} directory
 * @param {() => Promise<T>} work
 * @returns {Promise<T>}
 */
export async function withLock(purpose, directory, work) {
  for (;;) {
    const lock = await tryLock(purpose, directory);
    if (lock === undefined) {
      await released(purpose, directory);
      continue;
    }
    try {
      return await work();
    } finally {
      lock.release();
    }
  }
}

/**
 * @param {string} purpose
 * @param {string} directory
 * @returns {Promise<void>} when its holder has let it go, or had already.
 */
function released(purpose, directory) {
  return new Promise((resolve) => {
    const socket = net.connect(socketName(purpose, directory));
    socket.on("error", () => resolve());
    socket.on("close", () => resolve());
    socket.resume();
  });
}
