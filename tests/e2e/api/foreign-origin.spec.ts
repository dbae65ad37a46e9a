import { type APIRequestContext, expect, test } from "@playwright/test";
import { accessTo } from "../../../app/domain/people/route-permissions";
import { type Address, dataAddress, everyAddress, LEAVES } from "../../support/addresses";
import { row, rows, shopUrl } from "../../support/instance";
import { demoLogin, requestsOf } from "../../support/login";
import { ask, startProxy, startWeb } from "../../support/web-process";

/*
 * A page of another site that makes a visitor's browser post to the shop, cookies and all: refused on every route that
 * changes anything, pages, their data and resource routes alike. Stripe's hook knows its caller by a signature.
 */

const FOREIGN: Record<string, Record<string, string>> = {
  "another site's origin": { Origin: "https://evil.example" },
  "another port of the same host": { Origin: "http://127.0.0.1:9" },
  "an origin that is hidden": { Origin: "null" },
  "an origin that begins like ours": { Origin: `${shopUrl}.evil.example` },
  "no origin, but the browser says cross-site": { "Sec-Fetch-Site": "cross-site" },
  "no origin, but the browser says same-site": { "Sec-Fetch-Site": "same-site" },
};

/** What a page of another site would like to happen, where a form without fields would not do. */
const FORMS: Record<string, Record<string, string>> = {
  "/theme": { theme: "safelight" },
  "/studio/rolls/new": { number: "977", filmFormat: "120-6x7" },
  "/:lang?/sign-in": { email: demoLogin("printer").email, password: demoLogin("printer").password },
  "/:lang?/forgotten": { email: demoLogin("printer").email },
  "/:lang?/sign-up": { name: "Eve", email: "eve@evil.example", newPassword: "quite-a-long-password" },
  "/:lang?/account": { intent: "sign_out_everywhere" },
};

const CHANGING = LEAVES.map(({ pattern }) => pattern).filter(
  (pattern) => accessTo(pattern, "POST") !== "nobody" && pattern !== "/hooks/stripe",
);

let addresses: Map<string, Address>;
let photographer: APIRequestContext;

/** How much of everything there is. Nobody else is at work here while these tests run. */
async function everything() {
  const [counts] = await rows(`
    select (select count(*) from ledger_entries) as ledger, (select count(*) from orders) as orders,
      (select count(*) from order_events) as events, (select count(*) from holds) as holds,
      (select count(*) from rolls) as rolls, (select count(*) from frames) as frames,
      (select count(*) from prints) as prints, (select count(*) from editions) as editions,
      (select count(*) from series) as series, (select count(*) from papers) as papers,
      (select count(*) from parties) as parties, (select count(*) from accounts) as accounts,
      (select count(*) from account_tokens) as tokens, (select count(*) from invitations) as invitations,
      (select count(*) from sessions) as sessions, (select count(*) from emails) as emails,
      (select md5(string_agg(s::text, '')) from studio s) as studio`);
  return counts;
}

test.beforeAll(async () => {
  addresses = new Map((await everyAddress()).map((address) => [address.pattern, address]));
  photographer = await requestsOf("photographer");
});

test.afterAll(async () => {
  await photographer.dispose();
});

for (const [how, headers] of Object.entries(FOREIGN)) {
  test(`nothing can be changed from elsewhere: ${how}`, async () => {
    const before = await everything();
    const { cookies } = await photographer.storageState();
    const cookie = cookies.map(({ name, value }) => `${name}=${value}`).join("; ");
    const port = Number(new URL(shopUrl).port);
    const accepted: string[] = [];
    for (const pattern of CHANGING) {
      const address = addresses.get(pattern);
      for (const path of address?.paths ?? []) {
        for (const target of [path, dataAddress(path)]) {
          const answer = await ask(port, {
            path: address?.index ? `${target}?index` : target,
            method: "POST",
            form: FORMS[pattern] ?? { intent: "change" },
            headers: { Host: new URL(shopUrl).host, Cookie: cookie, ...headers },
          });
          const refused = answer.status === 403 || answer.status === 400;
          const given = answer.headers["set-cookie"] ?? [];
          if (!refused || given.length > 0) accepted.push(`${target}: ${answer.status} ${given.join(" ")}`);
        }
      }
    }
    expect(accepted).toEqual([]);
    expect(await everything()).toEqual(before);
    expect((await photographer.get("/studio", { maxRedirects: 0 })).status()).toBe(200);
  });
}

test("what our own page sends is not refused", async () => {
  const answer = await photographer.post("/theme", { form: { theme: "safelight" }, maxRedirects: 0 });
  expect(answer.status()).toBe(302);
  expect(answer.headers()["set-cookie"]).toMatch(/_theme=/);
});

test("a webhook without Stripe's signature is not believed", async ({ request }) => {
  const before = await row("select count(*) from webhook_events");
  const body = JSON.stringify({
    id: "evt_forged",
    object: "event",
    type: "checkout.session.completed",
    data: {},
  });
  const seconds = Math.floor(Date.now() / 1000);
  for (const signature of [undefined, "", `t=${seconds},v1=${"0".repeat(64)}`, "t=1,v1=none"]) {
    const answer = await request.post("/hooks/stripe", {
      data: body,
      headers: {
        "Content-Type": "application/json",
        ...(signature !== undefined && { "Stripe-Signature": signature }),
      },
    });
    expect([signature, answer.status()]).toEqual([signature, 400]);
  }
  expect(await row("select count(*) from webhook_events")).toEqual(before);
});

test("behind a proxy that speaks TLS, forms still post, and only the shop's own", async () => {
  const web = await startWeb({ BASE_URL: "https://shop.example", TRUST_PROXY: "loopback" });
  const { email, password } = demoLogin("collector");
  try {
    for (const keepsHost of [true, false]) {
      const proxy = await startProxy(web.port, keepsHost);
      try {
        const from = (origin: string) => ({ Host: "shop.example", Origin: origin });
        const page = await ask(proxy.port, { path: "/sign-in", headers: { Host: "shop.example" } });
        expect(page.status).toBe(200);
        expect(page.headers["strict-transport-security"]).toContain("max-age=");

        for (const path of ["/sign-in", "/sign-in.data"]) {
          const signedIn = await ask(proxy.port, {
            path,
            form: { email, password },
            headers: from("https://shop.example"),
          });
          expect([path, signedIn.status]).toEqual([path, path.endsWith(".data") ? 202 : 302]);
          const [cookie = ""] = signedIn.headers["set-cookie"] ?? [];
          expect(cookie).toMatch(/_session=.*; Secure/);

          const account = await ask(proxy.port, {
            path: "/account",
            headers: { Host: "shop.example", Cookie: cookie.split(";")[0] ?? "" },
          });
          expect(account.status).toBe(200);
        }
        const foreign = await ask(proxy.port, {
          path: "/sign-in",
          form: { email, password },
          headers: from("https://evil.example"),
        });
        expect([400, 403]).toContain(foreign.status);
        expect(foreign.headers["set-cookie"]).toBeUndefined();
      } finally {
        await proxy.stop();
      }
    }
  } finally {
    await web.stop();
  }
});
