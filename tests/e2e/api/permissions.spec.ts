import { type APIRequestContext, type APIResponse, expect, test } from "@playwright/test";
import { ROLES, type Role } from "../../../app/domain/people/permissions";
import { accessTo, allows } from "../../../app/domain/people/route-permissions";
import { type Address, dataAddress, everyAddress, LEAVES } from "../../support/addresses";
import { requestsOf } from "../../support/login";

/*
 * Every route of `app/routes.ts`, asked as every role and as a visitor, as a page and for its data, against the table in
 * `route-permissions.ts`. Both lists are the application's own, so a route added to one only is found here.
 */

const WHO = [...ROLES, "visitor"] as const;
type Who = (typeof WHO)[number];

let addresses: Map<string, Address>;
const asked = new Map<Who, APIRequestContext>();

test.beforeAll(async () => {
  addresses = new Map((await everyAddress()).map((address) => [address.pattern, address]));
  for (const who of WHO) asked.set(who, await requestsOf(who));
});

test.afterAll(async () => {
  for (const requests of asked.values()) await requests.dispose();
});

type Answer = "served" | "sign in" | "not allowed" | "no such method" | `failed ${number}`;

/** What an answer means, whether it came as a page or as data. */
async function meaningOf(answer: APIResponse): Promise<Answer> {
  const status = answer.status();
  if (status === 401) return "sign in";
  if (status === 403) return "not allowed";
  if (status === 405) return "no such method";
  if (status >= 500) return `failed ${status}`;
  const location = status === 202 ? await answer.text() : (answer.headers().location ?? "");
  const leads =
    status === 202 ? /^\[\["SingleFetchRedirect".*"redirect","([^"]*)"/.exec(location)?.[1] : location;
  if (/^(\/de)?\/sign-in(\?|$)/.test(leads ?? "")) return "sign in";
  return "served";
}

/** What the table asks for. Where nobody may, there is no such method, or nothing of the route's own is told. */
function isRight(pattern: string, method: string, who: Who, got: Answer, toldNothing: boolean): boolean {
  const access = accessTo(pattern, method);
  const roles: Role[] = who === "visitor" ? [] : [who];
  // Some pages have no form of their own; what is asked of them is then refused by whoever may ask.
  if (allows(access, roles)) return got === "served" || (method === "POST" && got === "no such method");
  if (got === "sign in") return who === "visitor";
  if (got === "not allowed") return who !== "visitor";
  return access === "nobody" && !pattern.startsWith("/studio") && toldNothing;
}

/** Whether an answer is a refusal, or carries the data of no route but those around it. */
async function toldNothing(answer: APIResponse, file: string): Promise<boolean> {
  const status = answer.status();
  if (status >= 400) return status < 500;
  return status === 200 && answer.url().includes(".data") && !(await answer.text()).includes(`"${file}"`);
}

for (const { pattern } of LEAVES) {
  test(`${pattern} is open to whom the table names, and to nobody else`, async () => {
    const address = addresses.get(pattern);
    if (address === undefined) throw new Error(`${pattern} was not found in the routes`);
    const wrong: string[] = [];
    const ask = async (who: Who, method: "GET" | "POST", path: string) => {
      // Signing out ends the session, which the others still need.
      const own = pattern === "/:lang?/sign-out" && method === "POST";
      const requests = own ? await requestsOf(who) : asked.get(who);
      const answer = await requests?.fetch(path, {
        method,
        maxRedirects: 0,
        ...(method === "POST" && { form: {} }),
      });
      if (answer === undefined) throw new Error(`nobody is signed in as ${who}`);
      const got = await meaningOf(answer);
      if (!isRight(pattern, method, who, got, await toldNothing(answer, address.id)))
        wrong.push(`${method} ${path} as ${who}: ${got} (${answer.status()})`);
      if (own) await requests?.dispose();
    };
    for (const path of address.paths) {
      const form = address.index ? `${path}?index` : path;
      for (const who of WHO) {
        await Promise.all([
          ask(who, "GET", path),
          ask(who, "GET", dataAddress(path)),
          ask(who, "POST", form),
          ask(who, "POST", address.index ? `${dataAddress(path)}?index` : dataAddress(path)),
        ]);
      }
    }
    expect(wrong).toEqual([]);
  });
}
