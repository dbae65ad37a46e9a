import { db } from "db/client.server";
import { orders, parties, printPictures, prints, proofs } from "db/schema/schema";
import { and, desc, eq, inArray, isNotNull } from "drizzle-orm";
import { numberMark } from "~/domain/editions/numbering";
import { isCountryCode } from "~/domain/people/countries";
import { theStudio } from "~/domain/studio/studio.server";
import { randomSecret } from "~/platform/ids.server";
import { publicUrl } from "~/platform/storage.server";
import type { Way } from "./checkout-form";
import { quoteBasket } from "./quote.server";
import { type TaxSum, taxSums } from "./tax-sums";

type ProofShown = { format: "avif" | "webp" | "jpeg"; width: number; height: number; url: string };

/** A basket line as the slip shows it. Amounts in minor units, lengths in mm. */
export type CounterLine = {
  /** Place in the basket. */
  position: number;
  formatId: string;
  title: string;
  slug: string;
  paper: string;
  sheet: { width: number; height: number };
  /** The number one would get now. */
  mark: string | null;
  ladderAmount: number | null;
  /** What is to be paid for it in the country of delivery. */
  amount: number | null;
  problem: "none_free" | "not_for_sale" | null;
  proofs: ProofShown[];
};

export type CounterView = {
  submissionKey: string;
  currency: string;
  homeCountry: string;
  holdMinutes: number;
  studioAddress: string;
  country: string;
  method: Way;
  lines: CounterLine[];
  /** Places in the basket whose format is no longer known. */
  unknown: number[];
  sums: {
    lines: number;
    count: number;
    delivery:
      | { kind: "quoted"; amount: number; daysFrom: number; daysTo: number }
      | { kind: "not_delivered"; reason: string };
    taxes: TaxSum[];
    total: number;
  } | null;
  /** Fields of the form that are known already. */
  known: Record<string, string>;
  signedInAs: string | null;
};

/** Everything the basket and the checkout show. Nothing is held by looking. */
export async function counterView(query: {
  basket: readonly string[];
  /** As asked for in the address; the buyer's own or the studio's when it is none. */
  country: string | null;
  method: Way;
  visitor: { accountId: string; partyId: string; name: string; email: string } | null;
}): Promise<CounterView> {
  const studio = await theStudio();
  const party = query.visitor === null ? undefined : await partyOf(query.visitor);
  const asked = query.country?.toUpperCase() ?? "";
  const country = isCountryCode(asked) ? asked : (party?.address?.country ?? studio.country);
  const quote = await quoteBasket({ formatIds: query.basket, country, method: query.method });
  const pictures = await firstPictures(quote.lines.map((l) => l.format.printId));
  const { totals } = quote;
  const unknownIds = new Set(quote.unknown);
  // A quote names its lines by their place in the basket.
  const amounts = new Map(totals?.lines.map((l) => [l.id, l.amount]));
  return {
    submissionKey: randomSecret(18),
    currency: quote.currency,
    homeCountry: studio.country,
    holdMinutes: studio.holdMinutes,
    studioAddress: [studio.address.line1, studio.address.city, studio.address.postcode]
      .filter(Boolean)
      .join(", "),
    country,
    method: query.method,
    lines: quote.lines.map((line) => ({
      position: Number(line.id),
      formatId: line.format.formatId,
      title: line.format.title,
      slug: line.format.slug,
      paper: line.format.paper,
      sheet: { width: line.format.sheetWidthMm, height: line.format.sheetHeightMm },
      mark:
        line.number === null
          ? null
          : numberMark({ run: "numbered", number: line.number, total: line.format.limit }),
      ladderAmount: line.ladderAmount,
      amount: amounts.get(line.id) ?? null,
      problem: line.problem,
      proofs: pictures.get(line.format.printId) ?? [],
    })),
    unknown: query.basket.flatMap((id, position) => (unknownIds.has(id) ? [position] : [])),
    sums:
      totals === null
        ? null
        : {
            lines: totals.lines.reduce((sum, l) => sum + l.amount, 0),
            count: totals.lines.length,
            delivery:
              totals.delivery.kind === "quoted"
                ? {
                    kind: "quoted",
                    amount: totals.delivery.amount,
                    daysFrom: totals.delivery.daysFrom,
                    daysTo: totals.delivery.daysTo,
                  }
                : totals.delivery,
            taxes: taxSums([
              ...totals.lines,
              ...(totals.delivery.kind === "quoted" && totals.delivery.amount > 0 ? [totals.delivery] : []),
            ]),
            total: totals.total,
          },
    known: knownFields(query.visitor, party),
    signedInAs: query.visitor?.name ?? null,
  };
}

type Party = typeof parties.$inferSelect;

/** The buyer's party, with the address of its last order where it has none of its own. */
async function partyOf(visitor: { accountId: string; partyId: string }): Promise<Party | undefined> {
  const [party] = await db.select().from(parties).where(eq(parties.id, visitor.partyId));
  if (party === undefined || party.address !== null) return party;
  const [last] = await db
    .select({ address: orders.deliveryAddress })
    .from(orders)
    .where(
      and(
        eq(orders.accountId, visitor.accountId),
        eq(orders.state, "paid"),
        isNotNull(orders.deliveryAddress),
      ),
    )
    .orderBy(desc(orders.createdAt))
    .limit(1);
  return { ...party, address: last?.address ?? null };
}

function knownFields(
  visitor: { name: string; email: string } | null,
  party: Party | undefined,
): Record<string, string> {
  if (visitor === null) return {};
  const address = party?.address ?? null;
  const fields: Record<string, string | null | undefined> = {
    email: visitor.email,
    name: visitor.name,
    telephone: party?.telephone,
    "address.line1": address?.line1,
    "address.line2": address?.line2,
    "address.city": address?.city,
    "address.region": address?.region,
    "address.postcode": address?.postcode,
    "address.name": address !== null && address.name !== visitor.name ? address.name : null,
  };
  return Object.fromEntries(Object.entries(fields).flatMap(([k, v]) => (v ? [[k, v]] : [])));
}

/** The proofs of each print's first picture, where they are public. */
async function firstPictures(printIds: readonly string[]): Promise<Map<string, ProofShown[]>> {
  const found = new Map<string, ProofShown[]>();
  if (printIds.length === 0) return found;
  const rows = await db
    .select({ printId: prints.id, proof: proofs })
    .from(proofs)
    .innerJoin(printPictures, eq(printPictures.id, proofs.printPictureId))
    .innerJoin(prints, eq(prints.id, printPictures.printId))
    .where(
      and(
        inArray(prints.id, [...new Set(printIds)]),
        eq(printPictures.position, 1),
        isNotNull(prints.proofsPublicAt),
      ),
    );
  for (const { printId, proof } of rows) {
    const { format, width, height } = proof;
    found.set(printId, [
      ...(found.get(printId) ?? []),
      { format, width, height, url: publicUrl(proof.objectKey) },
    ]);
  }
  return found;
}
