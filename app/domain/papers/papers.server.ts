import { db, inTransaction } from "db/client.server";
import { editions, formats, papers, prints } from "db/schema/schema";
import { and, asc, eq, max, ne, sql } from "drizzle-orm";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { AppError } from "~/platform/errors";
import type { PaperFields } from "./paper-form";

export type PaperLine = typeof papers.$inferSelect & { openedEditions: number; drafts: number };

/** Every paper in the studio's order, with how many editions are on it. */
export async function studioPapers(): Promise<PaperLine[]> {
  const rows = await db
    .select()
    .from(papers)
    .orderBy(asc(papers.retired), asc(papers.position), asc(papers.name));
  const used = await db
    .select({
      paperId: formats.paperId,
      opened: sql<number>`count(distinct ${editions.id}) filter (where ${editions.state} <> 'draft')`,
      drafts: sql<number>`count(distinct ${editions.id}) filter (where ${editions.state} = 'draft')`,
    })
    .from(formats)
    .innerJoin(editions, eq(editions.id, formats.editionId))
    .groupBy(formats.paperId);
  return rows.map((paper) => {
    const own = used.find((row) => row.paperId === paper.id);
    return { ...paper, openedEditions: own?.opened ?? 0, drafts: own?.drafts ?? 0 };
  });
}

export type PaperPage = typeof papers.$inferSelect & {
  editions: { id: string; title: string; limit: number; state: "draft" | "open" | "closed" }[];
};

/** A paper and the editions on it; null when there is none. */
export async function studioPaper(paperId: string): Promise<PaperPage | null> {
  const [paper] = await db.select().from(papers).where(eq(papers.id, paperId));
  if (paper === undefined) return null;
  const own = await db
    .selectDistinct({ id: editions.id, title: prints.title, limit: editions.limit, state: editions.state })
    .from(formats)
    .innerJoin(editions, eq(editions.id, formats.editionId))
    .innerJoin(prints, eq(prints.id, editions.printId))
    .where(eq(formats.paperId, paperId))
    .orderBy(asc(prints.title), asc(editions.limit));
  return { ...paper, editions: own };
}

/** Adds a paper behind the others; sent twice with one id it is added once. Throws AppError `not_allowed`. */
export async function makePaper(actor: Actor, id: string, fields: PaperFields): Promise<void> {
  mustBeAllowed(actor, "papers.change");
  await inTransaction(async (tx) => {
    const [last] = await tx.db.select({ position: max(papers.position) }).from(papers);
    await tx.db
      .insert(papers)
      .values({ id, ...fields, position: (last?.position ?? 0) + 1 })
      .onConflictDoNothing();
  });
}

export type PaperOutcome = { kind: "done" } | { kind: "promised" };

/** What an opened edition says of its paper stays said: name and weight then no longer change. */
export async function editPaper(actor: Actor, paperId: string, fields: PaperFields): Promise<PaperOutcome> {
  mustBeAllowed(actor, "papers.change");
  return inTransaction(async (tx): Promise<PaperOutcome> => {
    const [paper] = await tx.db.select().from(papers).where(eq(papers.id, paperId)).for("update");
    if (paper === undefined) throw new AppError("not_found");
    if (paper.name !== fields.name || paper.grammage !== fields.grammage) {
      const [opened] = await tx.db
        .select({ id: editions.id })
        .from(formats)
        .innerJoin(editions, eq(editions.id, formats.editionId))
        .where(and(eq(formats.paperId, paperId), ne(editions.state, "draft")))
        .limit(1);
      if (opened !== undefined) return { kind: "promised" };
    }
    await tx.db.update(papers).set(fields).where(eq(papers.id, paperId));
    return { kind: "done" };
  });
}

/** Retires a paper, so that no new edition takes it, or brings it back. Editions on it stay as they are. */
export async function retirePaper(actor: Actor, paperId: string, retired: boolean): Promise<void> {
  mustBeAllowed(actor, "papers.change");
  const changed = await db
    .update(papers)
    .set({ retired })
    .where(eq(papers.id, paperId))
    .returning({ id: papers.id });
  if (changed.length === 0) throw new AppError("not_found");
}

/** Moves a paper one place in the list that forms offer. */
export async function movePaper(actor: Actor, paperId: string, to: "earlier" | "later"): Promise<void> {
  mustBeAllowed(actor, "papers.change");
  await inTransaction(async (tx) => {
    const rows = await tx.db
      .select({ id: papers.id, position: papers.position })
      .from(papers)
      .where(eq(papers.retired, false))
      .orderBy(asc(papers.position), asc(papers.name))
      .for("update");
    const at = rows.findIndex((row) => row.id === paperId);
    const other = to === "earlier" ? at - 1 : at + 1;
    const [one, two] = [rows[at], rows[other]];
    if (at === -1 || one === undefined || two === undefined) return;
    rows[at] = two;
    rows[other] = one;
    for (const [index, row] of rows.entries()) {
      if (row.position === index + 1) continue;
      await tx.db
        .update(papers)
        .set({ position: index + 1 })
        .where(eq(papers.id, row.id));
    }
  });
}
