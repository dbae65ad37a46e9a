import { makeTemplateDatabase } from "./database";

/** Vitest's global set-up of the `integration` project. */
export async function setup(): Promise<() => Promise<void>> {
  return makeTemplateDatabase();
}
