import { existsSync, readFileSync } from "node:fs";
import path from "node:path";
import { writePrivateJson } from "./settings.mjs";

/**
 * What a data folder remembers of its instance besides its secrets. `demoData` is "begun" while the first filling runs.
 *
 * @typedef {{
 *   ports?: import("./ports.mjs").Ports,
 *   host?: string,
 *   baseUrl?: string,
 *   demoData?: "begun" | "rows" | "complete",
 * }} InstanceState
 */

const STATE_FILE = "instance.json";

/**
 * @param {string} dataDirectory
 * @returns {InstanceState}
 */
export function readState(dataDirectory) {
  const file = path.join(dataDirectory, STATE_FILE);
  return existsSync(file) ? JSON.parse(readFileSync(file, "utf8")) : {};
}

/**
 * @param {string} dataDirectory
 * @param {InstanceState} changes
 */
export function rememberState(dataDirectory, changes) {
  writePrivateJson(path.join(dataDirectory, STATE_FILE), { ...readState(dataDirectory), ...changes });
}

/** One start at a time holds this lock on its data folder. */
export const INSTANCE_LOCK = "instance";
