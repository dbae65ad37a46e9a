import { ROUTE_PERMISSIONS } from "../../app/domain/people/route-permissions";
import { everyAddress } from "../support/addresses";
import { expect, fits, look, test } from "../support/e2e";

/*
 * Every page of `app/routes.ts`, with things of the demo's book in its address: axe finds nothing, nothing is wider than
 * the window at a desk's and a telephone's width, and the browser reports no error. The pages of the shop in German too,
 * whose words are longer. What comes of forms, and pages that need a link of their own, is looked at by the other files.
 */

/** Addresses that answer with data, a picture or nothing. */
const NO_PAGES = /^\/(api|hooks|healthz|readyz|theme|studio\/proofs|studio\/editions\/figures)|\/uploads$/;

const PAGES = ROUTE_PERMISSIONS.filter(({ pattern, see }) => see !== "nobody" && !NO_PAGES.test(pattern));

for (const part of ["shop", "studio"] as const) {
  const own = PAGES.filter(({ pattern }) => pattern.startsWith("/studio") === (part === "studio"));
  test(`every page of the ${part} can be read by everybody, at every width`, async ({
    visit,
    expectTrouble,
  }) => {
    test.setTimeout(300_000);
    const addresses = new Map((await everyAddress()).map((address) => [address.pattern, address]));
    const page = await visit({ as: part === "studio" ? "photographer" : "collector" });
    const visitor = await visit();
    for (const { pattern, see } of own) {
      const [plain = "", german] = addresses.get(pattern)?.paths ?? [];
      const by = see === "anyone" ? visitor : page;
      // Some addresses lead to what is not there (any more), and their pages say so.
      expectTrouble(/status of 4(04|10) /);
      const answer = await by.goto(plain);
      expect([pattern, [200, 404, 410].includes(answer?.status() ?? 0)]).toEqual([pattern, true]);
      await expect(by.locator("h1")).toHaveCount(1);
      expect(await by.title(), `the title of ${plain}`).not.toBe("");
      await look(by);
      if (german === undefined) continue;
      await by.goto(german);
      await expect(by.locator("html")).toHaveAttribute("lang", "de");
      await fits(by);
    }
  });
}

test("the safelight keeps every contrast", async ({ visit }) => {
  const page = await visit({ as: "photographer" });
  await page.goto("/studio/editions");
  await page.getByRole("button", { name: /safelight/i }).click();
  await expect(page.locator("html")).toHaveAttribute("data-theme", "safelight");
  await look(page);
  for (const address of [
    "/studio",
    "/studio/orders",
    "/studio/rolls",
    "/studio/print-room",
    "/studio/settings",
  ]) {
    await page.goto(address);
    await look(page);
  }
});

test("somebody without a place in the studio is told so, and where to go", async ({
  visit,
  expectTrouble,
}) => {
  expectTrouble(/status of 403 /);
  for (const role of ["printer", "collector"] as const) {
    const page = await visit({ as: role });
    for (const address of ["/studio", "/studio/orders", "/studio/settings"]) {
      expect((await page.goto(address))?.status()).toBe(403);
      await expect(page.getByRole("heading", { name: "This page is not open to you" })).toBeVisible();
      await expect(page.getByText("Sunniva Harcastle", { exact: true })).toBeHidden();
    }
    await look(page);
  }
});
