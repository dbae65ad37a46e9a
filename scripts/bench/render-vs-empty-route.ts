import autocannon from "autocannon";
import type { Benchmark } from "./main";

const CONNECTIONS = 10;
const ROUNDS = 3;
/** Of one measurement, in seconds. */
const DURATION = 5;

/** A page with a query and pictures on it, as most visitors see first. */
const PAGE = "/prints";
/** Goes through the same server, framework and middleware, and does nothing there. */
const EMPTY = "/healthz";

/**
 * Requests answered in a second: the page of prints, rendered on the server, against a route that does nothing. Both
 * take turns, so that whatever else the machine does meets them alike; the medians count. The client shares the cores.
 */
export async function renderVsEmptyRoute(base: string): Promise<Benchmark> {
  for (const path of [PAGE, EMPTY])
    await autocannon({ url: base + path, connections: CONNECTIONS, duration: 2 });
  const pages: number[] = [];
  const empties: number[] = [];
  for (let round = 0; round < ROUNDS; round++) {
    empties.push(await measure(base + EMPTY, DURATION));
    pages.push(await measure(base + PAGE, DURATION));
  }
  return { name: "render-vs-empty-route", value: median(pages), floor: median(empties), unit: "requests/s" };
}

async function measure(url: string, duration: number): Promise<number> {
  const result = await autocannon({ url, connections: CONNECTIONS, duration });
  if (result.errors > 0 || result.non2xx > 0 || result["2xx"] === 0) {
    throw new Error(
      `${url}: ${result["2xx"]} good answers, ${result.non2xx} others, ${result.errors} errors: this is no measure of anything`,
    );
  }
  return result.requests.average;
}

function median(figures: number[]): number {
  const sorted = figures.toSorted((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)] ?? 0;
}
