import { db } from "db/client.server";
import {
  accounts,
  copies,
  editions,
  formats,
  ledgerEntries,
  ledgerPrivate,
  papers,
  parties,
  priceSteps,
  printPictures,
  prints,
  sheets,
} from "db/schema/schema";
import { and, asc, count, desc, eq, inArray, isNull } from "drizzle-orm";
import { copiesOfPictures } from "~/domain/orders/for-sale.server";
import { can, type Role } from "~/domain/people/permissions";
import { type PriceStep, sellOutTotal } from "~/domain/pricing/ladder";
import { firstPictures, type StudioPicture } from "~/domain/prints/studio-prints.server";
import { theStudio } from "~/domain/studio/studio.server";
import { now } from "~/platform/clock";
import { issuedCopies } from "./issued.server";
import { markOf, runTotal } from "./ledger.server";
import { type LedgerBody, readBody } from "./ledger-body";
import { lowestLimit } from "./lower-limit.server";
import { RUNS, type Run } from "./numbering";
import type { CopyPlacement, LedgerEntryKind } from "./transitions";
import { LEDGER_ENTRY_KINDS } from "./transitions";

/** The studio's zone as it calls it, with the name that programs know. */
export function zoneLabel(studio: { zone: string; zoneName: string }): string {
  return studio.zoneName === "" ? studio.zone : `${studio.zoneName}, ${studio.zone}`;
}

export const LINES_A_PAGE = 50;

export type EditionCopy = {
  id: string;
  run: Run;
  number: number;
  mark: string;
  placement: CopyPlacement;
  /** It was issued at some time. */
  issued: boolean;
  /** An earlier sheet of it was spoiled or destroyed. */
  reprinted: boolean;
};

export type EditionFormat = {
  id: string;
  paper: { id: string; name: string; grammage: number };
  process: string;
  image: { width: number; height: number };
  sheet: { width: number; height: number };
  steps: PriceStep[];
  sellOut: number;
};

export type EditionPage = {
  id: string;
  print: {
    id: string;
    title: string;
    slug: string;
    year: number | null;
    state: "draft" | "published" | "withdrawn";
    picture: StudioPicture;
  };
  state: "draft" | "open" | "closed";
  limit: number;
  outside: Record<Exclude<Run, "numbered">, number>;
  releaseAt: Date | null;
  openedAt: Date | null;
  closedAt: Date | null;
  firstIssuedAt: Date | null;
  released: boolean;
  furtherEditions: string;
  returnedNumber: "in_hand" | "retired";
  returnedPrice: "own" | "next";
  formats: EditionFormat[];
  copies: EditionCopy[];
  /** Copies of the picture over all opened editions, proofs counted: of the picture with most. */
  copiesOfPicture: number;
  /** The limit cannot be lowered below this; null once a number was issued. */
  lowestLimit: number | null;
  currency: string;
  zone: string;
  /** "Ember time, Europe/London" */
  zoneLabel: string;
  signature: string;
};

/** An edition with everything its page shows but the ledger; null when there is none. */
export async function editionPage(editionId: string): Promise<EditionPage | null> {
  const studio = await theStudio();
  const [row] = await db
    .select({ edition: editions, print: prints })
    .from(editions)
    .innerJoin(prints, eq(prints.id, editions.printId))
    .where(eq(editions.id, editionId));
  if (row === undefined) return null;
  const { edition, print } = row;
  const [formatRows, steps, copyRows, spoiled, issued, pictures, counted] = await Promise.all([
    db
      .select({ format: formats, paper: papers })
      .from(formats)
      .innerJoin(papers, eq(papers.id, formats.paperId))
      .where(eq(formats.editionId, editionId))
      .orderBy(asc(formats.position)),
    db
      .select({ step: priceSteps })
      .from(priceSteps)
      .innerJoin(formats, eq(formats.id, priceSteps.formatId))
      .where(and(eq(formats.editionId, editionId), isNull(priceSteps.supersededAt)))
      .orderBy(asc(priceSteps.fromNumber)),
    db.select().from(copies).where(eq(copies.editionId, editionId)).orderBy(asc(copies.number)),
    db
      .selectDistinct({ copyId: sheets.copyId })
      .from(sheets)
      .innerJoin(copies, eq(copies.id, sheets.copyId))
      .where(and(eq(copies.editionId, editionId), inArray(sheets.making, ["spoiled", "destroyed"]))),
    issuedCopies(db, editionId),
    firstPictures([edition.printId]),
    copiesOfPictures(db, [edition.printId]),
  ]);
  const open = edition.state === "open" && edition.firstIssuedAt === null;
  return {
    id: edition.id,
    print: {
      id: print.id,
      title: print.title,
      slug: print.slug,
      year: print.year,
      state: print.state,
      picture: pictures.get(print.id) ?? { alt: "", proofs: [], width: 5, height: 4 },
    },
    state: edition.state,
    limit: edition.limit,
    outside: {
      ap: edition.artistsProofs,
      pp: edition.printersProofs,
      hc: edition.horsCommerce,
      bat: edition.bonATirer,
      exhibition: edition.exhibitionCopies,
    },
    releaseAt: edition.releaseAt,
    openedAt: edition.openedAt,
    closedAt: edition.closedAt,
    firstIssuedAt: edition.firstIssuedAt,
    released: edition.releaseAt !== null && edition.releaseAt <= now(),
    furtherEditions: edition.furtherEditions,
    returnedNumber: edition.returnedNumber,
    returnedPrice: edition.returnedPrice,
    formats: formatRows.map(({ format, paper }) => {
      const own = steps
        .filter(({ step }) => step.formatId === format.id)
        .map(({ step: { fromNumber, toNumber, amount } }) => ({ fromNumber, toNumber, amount }));
      return {
        id: format.id,
        paper: { id: paper.id, name: paper.name, grammage: paper.grammage },
        process: format.process,
        image: { width: format.imageWidthMm, height: format.imageHeightMm },
        sheet: { width: format.sheetWidthMm, height: format.sheetHeightMm },
        steps: own,
        sellOut: sellOutTotal(own),
      };
    }),
    copies: RUNS.flatMap((run) => copyRows.filter((copy) => copy.run === run)).map((copy) => ({
      id: copy.id,
      run: copy.run,
      number: copy.number,
      mark: markOf(edition, copy),
      placement: copy.placement,
      issued: issued.has(copy.id),
      reprinted: spoiled.some((one) => one.copyId === copy.id),
    })),
    copiesOfPicture: Math.max(0, ...counted.values()),
    lowestLimit: open ? await lowestLimit({ db }, editionId) : null,
    currency: studio.currency,
    zone: studio.zone,
    zoneLabel: zoneLabel(studio),
    signature: studio.signature,
  };
}

export type LedgerLine = {
  line: number;
  kind: LedgerEntryKind;
  recordedAt: Date;
  happenedAt: Date | null;
  happenedPrecision: "unknown" | "year" | "month" | "day" | "instant";
  /** Mark as it was when the line was written; null for a line about the edition. */
  mark: string | null;
  sheet: number | null;
  body: LedgerBody;
  actor: string;
  /** Number of the line this one puts right. */
  corrects: number | null;
  /** Shortened commitment to what is private. */
  seal: string | null;
  /** Only for those who may see it, and until it is erased. */
  secret: {
    who: string | null;
    partyId: string | null;
    partyName: string | null;
    orderId: string | null;
    orderNumber: number | null;
    amount: number | null;
    currency: string | null;
    reason: string | null;
  } | null;
};

export type LedgerPage = { lines: LedgerLine[]; total: number; page: number; pages: number };

function isEntryKind(kind: string): kind is LedgerEntryKind {
  return LEDGER_ENTRY_KINDS.some((known) => known === kind);
}

/** A page of an edition's ledger, newest first. Private parts are read only for those who may see the ledger whole. */
export async function ledgerPage(
  viewer: { roles: readonly Role[] },
  editionId: string,
  page: number,
): Promise<LedgerPage> {
  const [sum] = await db
    .select({ n: count() })
    .from(ledgerEntries)
    .where(eq(ledgerEntries.editionId, editionId));
  const total = sum?.n ?? 0;
  const pages = Math.max(1, Math.ceil(total / LINES_A_PAGE));
  const at = Math.min(Math.max(1, page), pages);
  const entries = await db
    .select()
    .from(ledgerEntries)
    .where(eq(ledgerEntries.editionId, editionId))
    .orderBy(desc(ledgerEntries.line))
    .limit(LINES_A_PAGE)
    .offset((at - 1) * LINES_A_PAGE);
  const [edition] = await db.select().from(editions).where(eq(editions.id, editionId));
  const righted = entries.flatMap((entry) => entry.corrects ?? []);
  const named =
    righted.length === 0
      ? []
      : await db
          .select({ id: ledgerEntries.id, line: ledgerEntries.line })
          .from(ledgerEntries)
          .where(inArray(ledgerEntries.id, righted));
  const secrets =
    entries.length === 0 || !can(viewer.roles, "ledger.see")
      ? []
      : await db
          .select()
          .from(ledgerPrivate)
          .where(
            inArray(
              ledgerPrivate.entryId,
              entries.map((entry) => entry.id),
            ),
          );
  const accountIds = [...new Set(secrets.flatMap((secret) => secret.body?.accountId ?? []))];
  const names =
    accountIds.length === 0
      ? []
      : await db
          .select({ id: accounts.id, name: parties.name })
          .from(accounts)
          .innerJoin(parties, eq(parties.id, accounts.partyId))
          .where(inArray(accounts.id, accountIds));
  return {
    total,
    page: at,
    pages,
    lines: entries.flatMap((entry) => {
      if (!isEntryKind(entry.kind) || edition === undefined) return [];
      const body = readBody(entry.body);
      const secret = secrets.find((one) => one.entryId === entry.id)?.body ?? null;
      return [
        {
          line: entry.line,
          kind: entry.kind,
          recordedAt: entry.recordedAt,
          happenedAt: entry.happenedAt,
          happenedPrecision: entry.happenedPrecision,
          mark: body.mark,
          sheet: body.sheet,
          body: body.facts,
          actor: entry.actor,
          corrects: named.find((one) => one.id === entry.corrects)?.line ?? null,
          seal:
            entry.commitment === null
              ? null
              : `${entry.commitment.slice(0, 4)}…${entry.commitment.slice(-2)}`,
          secret:
            secret === null
              ? null
              : {
                  who: names.find((one) => one.id === secret.accountId)?.name ?? null,
                  partyId: secret.partyId ?? null,
                  partyName: secret.partyName ?? null,
                  orderId: secret.orderId ?? null,
                  orderNumber: secret.orderNumber ?? null,
                  amount: secret.amount ?? null,
                  currency: secret.currency ?? null,
                  reason: secret.reason ?? null,
                },
        },
      ];
    }),
  };
}

export type EditionLine = {
  id: string;
  printId: string;
  title: string;
  picture: StudioPicture;
  state: "draft" | "open" | "closed";
  limit: number;
  outside: number;
  /** "Smooth cotton, 420 × 520 mm" for each format. */
  formats: string[];
  releaseAt: Date | null;
  released: boolean;
  copies: { run: Run; number: number; placement: CopyPlacement }[];
  left: number;
};

export type EditionsAsked = {
  q: string;
  state: "" | "draft" | "coming" | "open" | "closed" | "gone";
  sort: "title" | "limit" | "left" | "release";
  down: boolean;
};

/** Reads what the list is asked for from the address; what is not understood counts as not asked. */
export function editionsAsked(search: URLSearchParams): EditionsAsked {
  const states = ["", "draft", "coming", "open", "closed", "gone"] as const;
  const sorts = ["title", "limit", "left", "release"] as const;
  return {
    q: (search.get("q") ?? "").trim().slice(0, 100),
    state: states.find((state) => state === search.get("state")) ?? "",
    sort: sorts.find((sort) => sort === search.get("sort")) ?? "title",
    down: search.get("down") === "1",
  };
}

/** Editions of the studio as asked for. */
export async function studioEditions(asked: EditionsAsked): Promise<EditionLine[]> {
  const at = now();
  const rows = await db
    .select({ edition: editions, title: prints.title })
    .from(editions)
    .innerJoin(prints, eq(prints.id, editions.printId))
    .orderBy(asc(prints.title), asc(editions.createdAt));
  if (rows.length === 0) return [];
  const [formatRows, copyRows, pictures] = await Promise.all([
    db
      .select({ format: formats, paper: papers.name })
      .from(formats)
      .innerJoin(papers, eq(papers.id, formats.paperId))
      .orderBy(asc(formats.position)),
    db
      .select({
        editionId: copies.editionId,
        run: copies.run,
        number: copies.number,
        placement: copies.placement,
      })
      .from(copies)
      .orderBy(asc(copies.number)),
    firstPictures([...new Set(rows.map(({ edition }) => edition.printId))]),
  ]);
  const byEdition = new Map<string, (typeof copyRows)[number][]>();
  for (const copy of copyRows) {
    const own = byEdition.get(copy.editionId);
    if (own === undefined) byEdition.set(copy.editionId, [copy]);
    else own.push(copy);
  }
  const lines = rows.map(({ edition, title }): EditionLine => {
    const own = byEdition.get(edition.id) ?? [];
    const numbered = own.filter((copy) => copy.run === "numbered");
    return {
      id: edition.id,
      printId: edition.printId,
      title,
      picture: pictures.get(edition.printId) ?? { alt: "", proofs: [], width: 5, height: 4 },
      state: edition.state,
      limit: edition.limit,
      outside: RUNS.filter((run) => run !== "numbered").reduce((all, run) => all + runTotal(edition, run), 0),
      formats: formatRows
        .filter(({ format }) => format.editionId === edition.id)
        .map(({ format, paper }) => `${paper}, ${format.sheetWidthMm} × ${format.sheetHeightMm} mm`),
      releaseAt: edition.releaseAt,
      released: edition.releaseAt !== null && edition.releaseAt <= at,
      copies: numbered,
      left: edition.state === "open" ? numbered.filter((copy) => copy.placement === "in_hand").length : 0,
    };
  });
  const is: Record<Exclude<EditionsAsked["state"], "">, (line: EditionLine) => boolean> = {
    draft: (line) => line.state === "draft",
    coming: (line) => line.state === "open" && !line.released,
    open: (line) => line.state === "open" && line.released && line.left > 0,
    gone: (line) => line.state === "open" && line.left === 0,
    closed: (line) => line.state === "closed",
  };
  const wanted = asked.q.toLocaleLowerCase("en");
  const found = lines.filter(
    (line) =>
      (asked.state === "" || is[asked.state](line)) &&
      (wanted === "" ||
        [line.title, ...line.formats].some((text) => text.toLocaleLowerCase("en").includes(wanted))),
  );
  const by: Record<EditionsAsked["sort"], (a: EditionLine, b: EditionLine) => number> = {
    title: () => 0,
    limit: (a, b) => a.limit - b.limit,
    left: (a, b) => a.left - b.left,
    release: (a, b) => (a.releaseAt?.getTime() ?? 0) - (b.releaseAt?.getTime() ?? 0),
  };
  const sorted = found.toSorted(by[asked.sort]);
  return asked.down ? sorted.reverse() : sorted;
}

/** How many pictures a print has: a copy is made of as many sheets. */
export async function picturesOf(printId: string): Promise<number> {
  return db.$count(printPictures, eq(printPictures.printId, printId));
}
