import { db, inTransaction } from "db/client.server";
import {
  deliveryRates,
  editions,
  formats,
  frames,
  papers,
  priceSteps,
  printPictures,
  prints,
  rolls,
  scans,
  studio,
  taxRates,
  vatRegistrations,
} from "db/schema/schema";
import { openEdition } from "~/domain/editions/open-edition.server";
import type { PlaceOrderInput } from "~/domain/orders/place-order.server";
import { forgetStudio } from "~/domain/studio/studio.server";
import { newId } from "~/platform/ids.server";

/** A photographer who may do everything, as commands want to know who acts. */
export const PHOTOGRAPHER = { as: "photographer" as const, roles: ["photographer" as const] };

/** An invented studio in the United Kingdom, registered for VAT, with a paper and delivery prices. */
export async function makeStudio(): Promise<{ paperId: string }> {
  const paperId = newId();
  await inTransaction(async (tx) => {
    await tx.db.insert(studio).values({
      name: "Harcastle Test Photographs",
      photographer: "Sunniva Harcastle",
      signature: "S. Harcastle",
      email: "studio@harcastle.example",
      address: { name: "Studio", line1: "1 Lock Lane", city: "Amberley", postcode: "EM1 1AA", country: "GB" },
      country: "GB",
      zone: "Europe/London",
      currency: "GBP",
    });
    await tx.db
      .insert(vatRegistrations)
      .values({ id: newId(), country: "GB", number: "GB000000000", validFrom: "2020-01-01" });
    await tx.db.insert(taxRates).values({
      id: newId(),
      country: "GB",
      kind: "standard",
      basisPoints: 2000,
      validFrom: "2011-01-04",
      source: "VATA 1994 s. 2",
    });
    for (const [zone, countries, amount] of [
      ["home", ["GB"], 1200],
      ["world", ["*"], 3600],
    ] as const) {
      await tx.db.insert(deliveryRates).values({
        id: newId(),
        zone,
        countries: [...countries],
        upToGrams: 10_000,
        amount,
        currency: "GBP",
        daysFrom: 2,
        daysTo: 5,
        validFrom: "2020-01-01",
      });
    }
    await tx.db.insert(papers).values({ id: paperId, name: "Smooth matt cotton", grammage: 310 });
  });
  forgetStudio();
  return { paperId };
}

let rollNumber = 0;

/** A published print of one frame with an opened, released edition. Steps: [from, to, pence]. */
export async function makeEdition(options: {
  paperId: string;
  limit: number;
  steps: [number, number, number][];
  artistsProofs?: number;
  returnedNumber?: "in_hand" | "retired";
  releaseAt?: Date;
}): Promise<{ editionId: string; formatId: string; printId: string; slug: string }> {
  const [rollId, frameId, scanId, printId, editionId, formatId] = Array.from({ length: 6 }, () =>
    newId(),
  ) as [string, string, string, string, string, string];
  rollNumber += 1;
  const slug = `pell-wood-${rollNumber}-${printId.slice(-6)}`;
  await db
    .insert(rolls)
    .values({ id: rollId, number: (Date.now() % 1_000_000_000) + rollNumber, filmFormat: "6x7" });
  await db.insert(frames).values({ id: frameId, rollId, position: 1, label: "1" });
  await db.insert(scans).values({
    id: scanId,
    frameId,
    version: 1,
    state: "ready",
    fileName: "1.tif",
    objectKey: `scans/${scanId}`,
    declaredBytes: 1,
    bytes: 1,
    sha256: "0".repeat(64),
    width: 6000,
    height: 4800,
  });
  await db.insert(prints).values({
    id: printId,
    slug,
    title: `Pell Wood ${rollNumber}`,
    year: 2025,
    state: "published",
    publishedAt: new Date(),
  });
  await db
    .insert(printPictures)
    .values({ id: newId(), printId, position: 1, frameId, scanId, description: "Beeches" });
  await db.insert(editions).values({
    id: editionId,
    printId,
    limit: options.limit,
    artistsProofs: options.artistsProofs ?? 0,
    returnedNumber: options.returnedNumber ?? "in_hand",
  });
  await db.insert(formats).values({
    id: formatId,
    editionId,
    paperId: options.paperId,
    process: "pigment print",
    imageWidthMm: 400,
    imageHeightMm: 320,
    sheetWidthMm: 500,
    sheetHeightMm: 420,
  });
  for (const [fromNumber, toNumber, amount] of options.steps) {
    await db
      .insert(priceSteps)
      .values({ id: newId(), formatId, fromNumber, toNumber, amount, currency: "GBP" });
  }
  const opened = await openEdition(editionId, PHOTOGRAPHER, {
    releaseAt: options.releaseAt ?? new Date(Date.now() - 60_000),
    acceptPastCap: true,
  });
  if (opened.kind !== "opened") throw new Error(JSON.stringify(opened));
  return { editionId, formatId, printId, slug };
}

let buyerNumber = 0;

/** A guest's order of the given formats, with the price they saw. */
export function guestOrder(
  lines: { formatId: string; seenAmount: number }[],
  more: Partial<PlaceOrderInput> = {},
): PlaceOrderInput {
  buyerNumber += 1;
  return {
    submissionKey: newId(),
    lines,
    buyer: { name: `Ines Varga-Holt ${buyerNumber}`, email: `ines${buyerNumber}@buyers.example` },
    delivery: {
      method: "delivery",
      address: {
        name: "Ines Varga-Holt",
        line1: "4 Mill Row",
        city: "Thorn",
        postcode: "EM2 3CD",
        country: "GB",
      },
    },
    country: "GB",
    language: "en",
    accountId: null,
    note: "",
    ...more,
  };
}
