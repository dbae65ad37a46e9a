import { db, pool } from "db/client.server";
import { accounts, copies, emails, orders, parties } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { afterAll, beforeEach, describe, expect, test } from "vitest";
import type { Asking } from "~/domain/orders/buyer-access";
import { checkCopy } from "~/domain/orders/check-copy.server";
import { correctEmail } from "~/domain/orders/correct-email.server";
import { orderIdOfToken } from "~/domain/orders/links.server";
import { orderByHand } from "~/domain/orders/order-by-hand.server";
import { buyersOrder, postcodeOfOrder } from "~/domain/orders/order-page.server";
import { placeOrder } from "~/domain/orders/place-order.server";
import { readOwnOrders, rememberOrder } from "~/middleware/own-orders.server";
import { newId } from "~/platform/ids.server";
import { stopQueue } from "~/platform/queue.server";
import { testDatabase } from "../support/database";
import { guestOrder, makeEdition, makeStudio, PHOTOGRAPHER } from "../support/shop";

/** Who may see what of an order: nothing personal may reach a browser that only holds the link. */
let paperId: string;

afterAll(async () => {
  await stopQueue();
  await pool.end();
});
beforeEach(async () => {
  await (await testDatabase()).reset();
  ({ paperId } = await makeStudio());
});

const NOBODY: Asking = { made: [], opened: [], visitor: null };
const PERSONAL = ["Ines Varga-Holt", "4 Mill Row", "EM2 3CD", "buyers.example", "Leave it with the miller"];

async function placed() {
  const { formatId } = await makeEdition({ paperId, limit: 5, steps: [[1, 5, 28_000]] });
  const outcome = await placeOrder(
    guestOrder([{ formatId, seenAmount: 28_000 }], { note: "Leave it with the miller" }),
  );
  if (outcome.kind !== "placed") throw new Error(JSON.stringify(outcome));
  return outcome;
}

async function paidByHand() {
  const { formatId } = await makeEdition({ paperId, limit: 5, steps: [[1, 5, 28_000]] });
  const outcome = await orderByHand(
    {
      submissionKey: newId(),
      lines: [{ formatId, number: null, reductionAmount: 0, reductionReason: "" }],
      buyer: { name: "Tobias Wrenfield", email: "tobais@buyers.example", telephone: "01632 960471" },
      delivery: { method: "handed_over" },
      country: "GB",
      language: "en",
      studioNote: "paid in small notes",
      payment: { method: "cash", receipt: "R 12" },
    },
    PHOTOGRAPHER,
  );
  if (outcome.kind !== "placed") throw new Error(JSON.stringify(outcome));
  return outcome.orderId;
}

async function shown(orderId: string, asking: Asking): Promise<string> {
  const order = await buyersOrder(orderId, asking);
  if (order === null) throw new Error("no order");
  return JSON.stringify(order);
}

describe("what an order's page is given", () => {
  test("for the link alone: numbers and sums, and nothing personal or secret", async () => {
    const { orderId } = await placed();
    const seen = await shown(orderId, NOBODY);
    expect(seen).toContain("1/5");
    expect(seen).toContain("29200");
    for (const personal of PERSONAL) expect(seen).not.toContain(personal);
    const [row] = await db.select().from(orders).where(eq(orders.id, orderId));
    for (const secret of [row?.tokenSeed, row?.tokenHash, row?.submissionKey, orderId]) {
      expect(secret).toBeDefined();
      expect(seen).not.toContain(String(secret));
    }
  });

  test("for the browser that paid, and the one that knew the postcode: all of it", async () => {
    const { orderId } = await placed();
    for (const asking of [
      { ...NOBODY, made: [orderId] },
      { ...NOBODY, opened: [orderId] },
    ]) {
      const seen = await shown(orderId, asking);
      for (const personal of PERSONAL) expect(seen).toContain(personal);
    }
    expect(await postcodeOfOrder(orderId)).toBe("EM2 3CD");
  });

  test("for an account: once its e-mail address is confirmed, and not before", async () => {
    const { orderId } = await placed();
    const [order] = await db.select().from(orders).where(eq(orders.id, orderId));
    const [partyId, accountId] = [newId(), newId()];
    await db.insert(parties).values({ id: partyId, name: "Somebody" });
    await db.insert(accounts).values({ id: accountId, partyId, email: order?.email ?? "" });
    const visitor = { accountId, partyId, email: (order?.email ?? "").toUpperCase(), emailVerified: false };
    expect(await shown(orderId, { ...NOBODY, visitor })).not.toContain("4 Mill Row");
    expect(await shown(orderId, { ...NOBODY, visitor: { ...visitor, emailVerified: true } })).toContain(
      "4 Mill Row",
    );
  });

  test("correcting the e-mail address kills the old link and makes a new one", async () => {
    const orderId = await paidByHand();
    const first = await correctEmail(orderId, "tobias@buyers.example");
    const second = await correctEmail(orderId, "tobias.w@buyers.example");
    if (first === null || second === null) throw new Error("the order is paid");
    expect(await orderIdOfToken(first)).toBeNull();
    expect(await orderIdOfToken(second)).toBe(orderId);
    expect(await orderIdOfToken(`${second}x`)).toBeNull();
    // A letter made from now on carries the new link: it may go to the right address only.
    const waiting = await db.select().from(emails).where(eq(emails.state, "waiting"));
    const toBuyer = waiting.filter((e) => e.kind !== "new-order").map((e) => [e.kind, e.recipient]);
    expect(toBuyer).toEqual([["order-confirmation", "tobias.w@buyers.example"]]);
  });
});

describe("the check of a copy", () => {
  test("shows print, number and history, and neither buyer nor price", async () => {
    const orderId = await paidByHand();
    const [order] = await db.select().from(orders).where(eq(orders.id, orderId));
    const [copy] = await db.select().from(copies).where(eq(copies.placement, "sold"));
    if (copy?.checkCode == null || order === undefined) throw new Error("nothing was sold");
    const checked = await checkCopy(copy.checkCode.toLowerCase().replaceAll("-", " "));
    expect(checked).toMatchObject({ mark: "1/5", limit: 5, placement: "sold" });
    expect(checked?.history.map((h) => h.kind)).toContain("sold");
    const seen = JSON.stringify(checked);
    for (const hidden of [
      "Wrenfield",
      "buyers.example",
      "28000",
      "small notes",
      String(order.number),
      orderId,
    ]) {
      expect(seen).not.toContain(hidden);
    }
    expect(await checkCopy("AAAA-BBBB-CCCC")).toBeNull();
    expect(await checkCopy("")).toBeNull();
  });
});

describe("what a browser remembers of orders", () => {
  const asking = (cookie: string) => new Request("http://shop.example/", { headers: { cookie } });

  test("is signed: a cookie somebody wrote themselves names no order", async () => {
    const orderId = newId();
    const set = await rememberOrder(asking(""), "made", orderId);
    const pair = set.split(";")[0] ?? "";
    expect(await readOwnOrders(asking(pair))).toEqual({ made: [orderId], opened: [] });
    const forged = pair.replace(/=(.)/, (_, first: string) => `=${first === "A" ? "B" : "A"}`);
    expect(await readOwnOrders(asking(forged))).toEqual({ made: [], opened: [] });
    expect(set).toContain("HttpOnly");
  });

  test("keeps what was made and what was opened apart", async () => {
    const [made, opened] = [newId(), newId()];
    const first = (await rememberOrder(asking(""), "made", made)).split(";")[0] ?? "";
    const both = (await rememberOrder(asking(first), "opened", opened)).split(";")[0] ?? "";
    expect(await readOwnOrders(asking(both))).toEqual({ made: [made], opened: [opened] });
  });
});
