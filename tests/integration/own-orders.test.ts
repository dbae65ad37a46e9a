import { db, pool } from "db/client.server";
import { orders } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { afterAll, beforeEach, describe, expect, test } from "vitest";
import { placeOrder } from "~/domain/orders/place-order.server";
import { ownOrders } from "~/domain/people/own-orders.server";
import { findParty } from "~/domain/people/parties.server";
import { indexCounts } from "~/domain/studio/index-counts.server";
import { sha256 } from "~/platform/ids.server";
import { stopQueue } from "~/platform/queue.server";
import { testDatabase } from "../support/database";
import { makeAccount } from "../support/people";
import { guestOrder, makeEdition, makeStudio } from "../support/shop";

const NO_PASSWORD = { passwordHash: "no password can be right" };
let formatId: string;

beforeEach(async () => {
  await (await testDatabase()).reset();
  const { paperId } = await makeStudio();
  ({ formatId } = await makeEdition({ paperId, limit: 5, steps: [[1, 5, 28_000]] }));
});
afterAll(async () => {
  await stopQueue();
  await pool.end();
});

async function order(changes: Parameters<typeof guestOrder>[1]): Promise<string> {
  const outcome = await placeOrder(guestOrder([{ formatId, seenAmount: 28_000 }], changes));
  if (outcome.kind !== "placed") throw new Error(JSON.stringify(outcome));
  return outcome.orderId;
}

describe("the orders of an account", () => {
  test("are those made with it, and those of its address only once that is proved", async () => {
    const unproved = await makeAccount("merrin@oakshade.example", ["collector"], {
      ...NO_PASSWORD,
      verified: false,
    });
    await order({ buyer: { name: "Merrin Oakshade", email: "Merrin@Oakshade.example" } });
    await order({
      buyer: { name: "Merrin Oakshade", email: "else@oakshade.example" },
      accountId: unproved.accountId,
    });
    await order({ buyer: { name: "Merrin Oakshade", email: "somebody@elsewhere.example" } });
    expect((await ownOrders(unproved)).map((own) => own.lines)).toEqual([
      [{ title: expect.any(String), mark: "2/5" }],
    ]);
    const proved = await makeAccount("somebody@elsewhere.example", ["collector"], NO_PASSWORD);
    const [own, ...more] = await ownOrders(proved);
    expect(more).toEqual([]);
    expect(own).toMatchObject({ state: "awaiting_payment", currency: "GBP", lines: [{ mark: "3/5" }] });
  });

  test("lead to the order's page by the link that is looked up there", async () => {
    const account = await makeAccount("merrin@oakshade.example", ["collector"], NO_PASSWORD);
    const orderId = await order({ accountId: account.accountId });
    const [row] = await db.select().from(orders).where(eq(orders.id, orderId));
    const [own] = await ownOrders(account);
    expect(sha256(own?.token ?? "")).toBe(row?.tokenHash);
  });

  test("leave those away that ran out unpaid", async () => {
    const account = await makeAccount("merrin@oakshade.example", ["collector"], NO_PASSWORD);
    const orderId = await order({ accountId: account.accountId });
    await db.update(orders).set({ state: "expired" }).where(eq(orders.id, orderId));
    expect(await ownOrders(account)).toEqual([]);
  });
});

describe("the studio", () => {
  test("finds a party's orders on its page, and counts what waits", async () => {
    const orderId = await order({});
    const [row] = await db.select().from(orders).where(eq(orders.id, orderId));
    const party = await findParty(row?.buyerPartyId ?? "");
    expect(party?.orders).toMatchObject([{ id: orderId, state: "awaiting_payment" }]);
    expect(await indexCounts()).toMatchObject({ orders: 0 });
    await db.update(orders).set({ attention: "a look" }).where(eq(orders.id, orderId));
    expect(await indexCounts()).toMatchObject({ orders: 1 });
  });
});
