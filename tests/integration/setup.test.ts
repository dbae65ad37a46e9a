import { db, pool } from "db/client.server";
import {
  accounts,
  deliveryRates,
  papers,
  parties,
  setupCodes,
  studio,
  taxRates,
  vatRegistrations,
} from "db/schema/schema";
import { afterAll, afterEach, beforeEach, describe, expect, test, vi } from "vitest";
import { findSession } from "~/domain/people/sessions.server";
import { signIn } from "~/domain/people/sign-in.server";
import { offerSetupCode, setUp, setupIsOpen } from "~/domain/studio/setup.server";
import { type SetupForm, setupForm } from "~/domain/studio/setup-form";
import { forgetStudio, studioOrNull, theStudio } from "~/domain/studio/studio.server";
import { messagesOf } from "~/languages/messages";
import { env } from "~/platform/env.server";
import { parseForm } from "~/platform/forms.server";
import { testDatabase } from "../support/database";

vi.setConfig({ testTimeout: 60_000 });

const CODE = "23456-abcde-fghij-kmnpq";
const TYPED: Record<string, string> = {
  code: " 23456 ABCDE fghij kmnpq ",
  photographer: "Sunniva Harcastle",
  email: "sunniva@harcastle.example",
  newPassword: "fog over the beeches",
  studioName: "Sunniva Harcastle Photographs",
  signature: "S. Harcastle",
  zone: "Europe/London",
  currency: "GBP",
  "address.name": "Sunniva Harcastle Photographs",
  "address.line1": "1 Thorn Lane",
  "address.city": "Amberley Locks",
  "address.postcode": "ab12cd",
  "address.country": "GB",
};
const VAT = { vatRegistered: "on", vatNumber: "GB 123 4567 89", vatFrom: "2021-04-01" };

async function parsed(changes: Record<string, string> = {}) {
  const form = new FormData();
  for (const [name, value] of Object.entries({ ...TYPED, ...changes })) form.append(name, value);
  const { problems, addressProblems } = messagesOf("en").account;
  return parseForm(form, setupForm, { words: { ...problems, ...addressProblems } });
}

async function filledIn(changes: Record<string, string> = {}): Promise<SetupForm> {
  const form = await parsed(changes);
  if (!form.ok) throw new Error(JSON.stringify(form.errors));
  return form.value;
}

beforeEach(async () => {
  await (await testDatabase()).reset();
  forgetStudio();
});
afterEach(() => {
  env.NUMBERLEAF_MODE = "test";
  env.SETUP_CODE = "";
});
afterAll(() => pool.end());

describe("setting a studio up", () => {
  test("makes studio, photographer, VAT registration and the first tables, and signs in", async () => {
    await offerSetupCode(CODE);
    expect(await setupIsOpen()).toBe(true);
    expect(await studioOrNull()).toBeNull();
    await expect(theStudio()).rejects.toMatchObject({ code: "unavailable" });
    const outcome = await setUp(await filledIn(VAT));
    if (outcome.code !== "set_up") throw new Error(outcome.code);
    expect(await findSession(outcome.session.secret)).toMatchObject({
      name: "Sunniva Harcastle",
      emailVerified: true,
      roles: ["photographer"],
    });
    expect(await theStudio()).toMatchObject({
      name: "Sunniva Harcastle Photographs",
      signature: "S. Harcastle",
      zone: "Europe/London",
      currency: "GBP",
      country: "GB",
      address: { line1: "1 Thorn Lane", postcode: "AB1 2CD" },
    });
    expect(await db.select().from(vatRegistrations)).toMatchObject([
      { country: "GB", number: "GB 123 4567 89", validFrom: "2021-04-01", validTo: null },
    ]);
    expect((await db.select().from(papers)).length).toBeGreaterThan(0);
    const delivery = await db.select().from(deliveryRates);
    expect(delivery.some((row) => row.countries.includes("GB"))).toBe(true);
    expect(delivery.some((row) => row.countries.includes("*"))).toBe(true);
    expect(delivery.every((row) => row.example && row.currency === "GBP")).toBe(true);
    expect((await signIn("sunniva@harcastle.example", "fog over the beeches")).code).toBe("signed_in");
    expect(await setupIsOpen()).toBe(false);
  });

  test("without a registration makes none", async () => {
    await offerSetupCode(CODE);
    expect((await setUp(await filledIn({ vatNumber: "left over" }))).code).toBe("set_up");
    expect(await db.select().from(vatRegistrations)).toEqual([]);
  });

  test("sent twice at once, or again, makes one studio", async () => {
    await offerSetupCode(CODE);
    const form = await filledIn();
    const outcomes = await Promise.all([setUp(form), setUp(form)]);
    expect(outcomes.map((outcome) => outcome.code).sort()).toEqual(["closed", "set_up"]);
    expect((await setUp(form)).code).toBe("closed");
    expect(await db.select().from(studio)).toHaveLength(1);
    expect(await db.select().from(accounts)).toHaveLength(1);
    expect(await db.select().from(parties)).toHaveLength(1);
  });

  test("with a wrong or a used code makes nothing", async () => {
    await offerSetupCode(CODE);
    expect(await setUp(await filledIn({ code: "23456-abcde-fghij-kmnpr" }))).toEqual({ code: "wrong_code" });
    await db.update(setupCodes).set({ usedAt: new Date() });
    expect(await setUp(await filledIn())).toEqual({ code: "wrong_code" });
    // Offering it again does not make it good again.
    await offerSetupCode(CODE);
    expect(await setUp(await filledIn())).toEqual({ code: "wrong_code" });
    expect(await db.select().from(studio)).toEqual([]);
    expect(JSON.stringify(await db.select().from(setupCodes))).not.toContain("abcde");
  });

  test("takes the code that the environment names", async () => {
    env.SETUP_CODE = CODE;
    expect(await setupIsOpen()).toBe(true);
    expect((await setUp(await filledIn())).code).toBe("set_up");
  });

  test("is never open in the demo", async () => {
    await offerSetupCode(CODE);
    env.NUMBERLEAF_MODE = "demo";
    expect(await setupIsOpen()).toBe(false);
    expect((await setUp(await filledIn())).code).toBe("closed");
  });

  test("asks for the rate of a country whose rate it does not know", async () => {
    await offerSetupCode(CODE);
    const swiss = {
      ...VAT,
      "address.country": "CH",
      "address.postcode": "8001",
      currency: "CHF",
      zone: "Europe/Zurich",
    };
    expect(await setUp(await filledIn(swiss))).toEqual({ code: "rate_needed" });
    expect((await setUp(await filledIn({ ...swiss, vatRate: "8,1" }))).code).toBe("set_up");
    const rates = await db.select().from(taxRates);
    expect(rates.filter((rate) => rate.country === "CH")).toMatchObject([
      { kind: "standard", basisPoints: 810 },
    ]);
  });

  test("names what is wrong beside each field and loses nothing but the password", async () => {
    const form = await parsed({
      newPassword: "short",
      "address.postcode": "nonsense",
      vatRegistered: "on",
      vatFrom: "2021-02-30",
    });
    if (form.ok) throw new Error("taken");
    expect(form.errors).toEqual({
      newPassword: ["The password needs at least 12 characters."],
      "address.postcode": ["This is not a postcode of that country."],
    });
    expect(form.answers).toMatchObject({
      studioName: "Sunniva Harcastle Photographs",
      "address.postcode": "nonsense",
    });
    expect(form.answers).not.toHaveProperty("newPassword");
    const vat = await parsed({ vatRegistered: "on", vatFrom: "2021-02-30", vatRate: "twenty" });
    expect(vat).toMatchObject({
      ok: false,
      errors: {
        vatNumber: ["Please write the VAT number."],
        vatFrom: ["Please give the first day of the registration."],
        vatRate: ["Please write the rate in per cent, like 20 or 5.5."],
      },
    });
  });
});
