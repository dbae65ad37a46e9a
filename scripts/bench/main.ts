import { fileURLToPath } from "node:url";
import { freePorts } from "../lib/ports.mjs";
import { type Shop, startShop } from "../lib/shop.mjs";
import { renderVsEmptyRoute } from "./render-vs-empty-route";

/*
 * `npm run bench`: one JSON object a line on standard output. Each compares a figure with a floor measured in the same
 * run, because the figure alone says more about the machine than about the shop.
 *
 *   scripts/bench/main.ts [ADDRESS]     against the shop there, or against one with demo data that it starts itself
 */

export type Benchmark = {
  name: string;
  value: number;
  /** The best that could be had here: the same measure of the least work that does the same kind of thing. */
  floor: number;
  unit: string;
};

const BENCHMARKS = [renderVsEmptyRoute];

const address = process.argv[2];
let shop: Shop | undefined;
try {
  if (address === undefined) shop = await startOwn();
  const base = address ?? (await shop?.ready) ?? "";
  for (const benchmark of BENCHMARKS) {
    const { name, value, floor, unit } = await benchmark(base);
    console.log(JSON.stringify({ name, value, floor, ratio: Number((value / floor).toFixed(3)), unit }));
  }
} finally {
  await shop?.stop();
}

async function startOwn(): Promise<Shop> {
  console.error("no shop is running here: starting one of its own");
  return startShop({
    environment: {
      ...(await freePorts()),
      DATA_DIR: fileURLToPath(new URL("../../.data-bench", import.meta.url)),
      LOG_LEVEL: "warn",
    },
    onLine: (line) => console.error(`  ${line}`),
  });
}
