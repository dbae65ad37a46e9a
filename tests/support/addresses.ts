import { randomBytes } from "node:crypto";
import type { RouteConfigEntry } from "@react-router/dev/routes";
import routes from "../../app/routes";
import { linkToken, row } from "./instance";

/** One address of `app/routes.ts` with its parameters filled in. */
export type Address = {
  /** "/:lang?/prints/:slug" */
  pattern: string;
  /** Under this name its data stands in what is fetched without the page: "routes/shop/print". */
  id: string;
  /** "/prints/the-drove-january", and "/de/prints/the-drove-january" where the route has a German side. */
  paths: string[];
  /** Forms of an index route name it by `?index`, as its parent has the same address. */
  index: boolean;
};

type Leaf = { pattern: string; id: string; index: boolean };

function leavesOf(entries: readonly RouteConfigEntry[], parent = ""): Leaf[] {
  return entries.flatMap((entry) => {
    const pattern = entry.path === undefined ? parent : `${parent}/${entry.path}`;
    return entry.children === undefined
      ? [{ pattern, id: entry.id ?? entry.file.replace(/\.\w+$/, ""), index: entry.index === true }]
      : leavesOf(entry.children, pattern);
  });
}

/** Every route of the configuration, in its order. */
export const LEAVES: readonly Leaf[] = leavesOf(routes);

/** Something of every kind in the demo's book, by the name of the parameter that leads to it. */
async function things(): Promise<Record<string, string>> {
  const frame = await row<{ id: string; roll_id: string }>(
    `select f.id, f.roll_id from frames f join print_pictures p on p.frame_id = f.id order by f.id limit 1`,
  );
  const print = await row<{ id: string; slug: string }>(
    `select id, slug from prints where state = 'published' order by position limit 1`,
  );
  const one = async (table: string, where = "true") =>
    (await row<{ id: string }>(`select id from ${table} where ${where} order by id limit 1`)).id;
  const order = await row<{ id: string; token_seed: string }>(
    `select id, token_seed from orders where state = 'paid' order by number limit 1`,
  );
  const proof = await row<{ id: string }>(`
    select coalesce((select id from proofs where print_picture_id is null order by id limit 1), gen_random_uuid()) as id`);
  // Nobody holds such a link; the page then says that it leads nowhere.
  const unknown = randomBytes(24).toString("base64url");
  return {
    rollId: frame.roll_id,
    frameId: frame.id,
    proofId: proof.id,
    printId: print.id,
    editionId: await one("editions"),
    orderId: order.id,
    paperId: await one("papers"),
    partyId: await one("parties"),
    slug: print.slug,
    seriesSlug: (await row<{ slug: string }>("select slug from series order by position limit 1")).slug,
    id: await one("editions"),
    orderToken: linkToken("order", order.token_seed),
    token: unknown,
    code: unknown,
  };
}

/** Parameters that mean different things below different addresses. */
const MEANING: Record<string, string> = {
  "/:lang?/series/:slug": "seriesSlug",
  "/:lang?/orders/:token": "orderToken",
  "/:lang?/orders/:token/pay": "orderToken",
};

/** Every address of the configuration, with things of the demo's book in place of the parameters. */
export async function everyAddress(): Promise<Address[]> {
  const known = await things();
  return LEAVES.map(({ pattern, id, index }) => {
    const fill = (segments: string) =>
      segments.replaceAll(/:(\w+)/g, (_, name: string) => {
        const value = known[MEANING[pattern] ?? name];
        if (value === undefined) throw new Error(`nothing in the demo for :${name} of ${pattern}`);
        return value;
      });
    const plain = pattern.replace("/:lang?", "").replace("*", "no-such-page");
    const paths = [fill(plain) || "/"];
    if (pattern.startsWith("/:lang?")) paths.push(`/de${fill(plain)}`);
    return { pattern, id, paths, index };
  });
}

/** The address from which a page's data is fetched without the page. */
export function dataAddress(path: string): string {
  return path.endsWith("/") ? `${path}_root.data` : `${path}.data`;
}
