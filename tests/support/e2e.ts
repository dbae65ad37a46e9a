import AxeBuilder from "@axe-core/playwright";
import { type Browser, test as base, expect, type Page, type TestInfo } from "@playwright/test";
import { type DemoRole, login } from "./login";

export { expect } from "@playwright/test";

/** WCAG 2.2, levels A and AA, in the names axe gives its rules. */
const STANDARD = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"];

export const DESK = { width: 1440, height: 900 };
export const PHONE = { width: 390, height: 844 };

type VisitorOptions = {
  /** Whose account; nobody's unless given. */
  as?: DemoRole;
  /** false: a browser that runs no scripts. */
  scripts?: boolean;
  viewport?: { width: number; height: number };
};

type Fixtures = {
  /** A browser of somebody's own. What goes wrong on its pages (errors, refusals of the policy) fails the test at its end. */
  visit: (options?: VisitorOptions) => Promise<Page>;
  /** Errors that the test brings about, by their text; allowed from here on. */
  expectTrouble: (text: RegExp) => void;
};

/** Chromium reports every answer of 400 as an error of its console; a form that was not taken is answered so. */
const FORM_NOT_TAKEN = /^Failed to load resource: the server responded with a status of 400 /;

export type Troubles = { seen: string[]; allowed: RegExp[] };

export const test = base.extend<Fixtures & { troubles: Troubles }>({
  // biome-ignore lint/correctness/noEmptyPattern: Playwright reads a fixture's needs from its first parameter's names
  troubles: async ({}, use) => {
    const troubles: Troubles = { seen: [], allowed: [FORM_NOT_TAKEN] };
    await use(troubles);
    const unexpected = troubles.seen.filter(
      (text) => !troubles.allowed.some((allowed) => allowed.test(text)),
    );
    expect(unexpected, "errors on the pages visited").toEqual([]);
  },
  expectTrouble: async ({ troubles }, use) => {
    await use((text) => void troubles.allowed.push(text));
  },
  visit: async ({ browser, troubles }, use, testInfo) => {
    const opened: Page[] = [];
    await use(async (options = {}) => {
      const page = await open(browser, testInfo, options);
      opened.push(page);
      page.on("pageerror", (error) => troubles.seen.push(`${error}`));
      page.on("console", (message) => {
        if (!["error", "warning"].includes(message.type())) return;
        troubles.seen.push(`${message.text()} (${message.location().url})`);
      });
      return page;
    });
    for (const page of opened) await page.context().close();
  },
});

async function open(browser: Browser, testInfo: TestInfo, options: VisitorOptions): Promise<Page> {
  const { baseURL, locale, timezoneId, viewport, isMobile, hasTouch } = testInfo.project.use;
  const context = await browser.newContext({
    javaScriptEnabled: options.scripts ?? true,
    ...(baseURL !== undefined && { baseURL }),
    ...(locale !== undefined && { locale }),
    ...(timezoneId !== undefined && { timezoneId }),
    viewport: options.viewport ?? viewport ?? DESK,
    isMobile: isMobile ?? false,
    hasTouch: hasTouch ?? false,
  });
  if (options.as !== undefined) await login(context, options.as);
  return await context.newPage();
}

/** What axe finds on the page as it stands, one line a node. */
async function findings(page: Page): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page }).withTags(STANDARD).analyze();
  return violations.flatMap(({ id, help, nodes }) =>
    nodes.map((node) => `${id} (${help}): ${node.target.join(" ")} ${node.failureSummary ?? ""}`),
  );
}

/** By how many pixels the page is wider than the window. */
async function overflow(page: Page): Promise<number> {
  return await page.evaluate(
    () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
  );
}

/**
 * Looks at the page as it stands, at the width of a desk and of a telephone: axe must find nothing, and nothing may be
 * wider than the window. The window is put back.
 */
export async function look(page: Page): Promise<void> {
  const before = page.viewportSize();
  const { pathname } = new URL(page.url());
  for (const [width, size] of Object.entries({ "1440 px": DESK, "390 px": PHONE })) {
    await page.setViewportSize(size);
    expect(await findings(page), `axe on ${pathname} at ${width}`).toEqual([]);
    expect(await overflow(page), `sideways scrolling on ${pathname} at ${width}`).toBe(0);
  }
  if (before !== null) await page.setViewportSize(before);
}

/** Nothing on the page as it stands is wider than the window, at either width; without axe. */
export async function fits(page: Page): Promise<void> {
  const before = page.viewportSize();
  for (const [width, size] of Object.entries({ "1440 px": DESK, "390 px": PHONE })) {
    await page.setViewportSize(size);
    expect(await overflow(page), `sideways scrolling on ${page.url()} at ${width}`).toBe(0);
  }
  if (before !== null) await page.setViewportSize(before);
}

/** Opens an address and looks at it. */
export async function goto(page: Page, address: string): Promise<void> {
  const answer = await page.goto(address);
  expect(answer?.status(), address).toBeLessThan(400);
  await look(page);
}
