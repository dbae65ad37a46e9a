import { db, inTransaction } from "db/client.server";
import { deliveryRates, studio, taxRates, vatRegistrations } from "db/schema/schema";
import { and, asc, eq, isNull } from "drizzle-orm";
import { addDays } from "~/domain/dates";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { newId } from "~/platform/ids.server";
import { currencyCode, parseMoney } from "~/platform/money";
import type { SettingsForm } from "./settings-form";
import { forgetStudio, theStudio } from "./studio.server";

/** The studio with its dated tables, for the settings page. */
export async function settingsPage() {
  const row = await theStudio();
  const [registrations, rates, delivery] = await Promise.all([
    db.select().from(vatRegistrations).orderBy(asc(vatRegistrations.validFrom)),
    db.select().from(taxRates).orderBy(asc(taxRates.country), asc(taxRates.kind), asc(taxRates.validFrom)),
    db
      .select()
      .from(deliveryRates)
      .where(isNull(deliveryRates.validTo))
      .orderBy(asc(deliveryRates.zone), asc(deliveryRates.upToGrams)),
  ]);
  return { studio: row, registrations, rates, delivery };
}

export type SettingsOutcome = { code: "changed" } | { code: "refused"; field: string; sentence: string };

const changed: SettingsOutcome = { code: "changed" };
const refused = (field: string, sentence: string): SettingsOutcome => ({ code: "refused", field, sentence });

/**
 * Changes one part of the settings. Dated tables are never overwritten: a new rate or price ends the one before
 * it on the day before its own first day, so that old orders stay explained.
 */
export async function changeSettings(actor: Actor, form: SettingsForm): Promise<SettingsOutcome> {
  mustBeAllowed(actor, "settings.change");
  const outcome = await inTransaction(async (tx): Promise<SettingsOutcome> => {
    switch (form.intent) {
      case "studio": {
        const { intent: _, ...values } = form;
        await tx.db.update(studio).set({ ...values, country: values.address.country });
        return changed;
      }
      case "register":
        await tx.db
          .insert(vatRegistrations)
          .values({ id: newId(), country: form.country, number: form.number, validFrom: form.validFrom });
        return changed;
      case "end-registration": {
        const [row] = await tx.db
          .select()
          .from(vatRegistrations)
          .where(eq(vatRegistrations.id, form.registrationId));
        if (row === undefined || form.validTo < row.validFrom) {
          return refused("validTo", "The last day cannot be before the first.");
        }
        await tx.db
          .update(vatRegistrations)
          .set({ validTo: form.validTo })
          .where(eq(vatRegistrations.id, row.id));
        return changed;
      }
      case "rate": {
        const [before] = await tx.db
          .select()
          .from(taxRates)
          .where(
            and(eq(taxRates.country, form.country), eq(taxRates.kind, form.kind), isNull(taxRates.validTo)),
          );
        if (before !== undefined) {
          if (form.validFrom <= before.validFrom)
            return refused("validFrom", "A new rate begins after the one before it.");
          await tx.db
            .update(taxRates)
            .set({ validTo: addDays(form.validFrom, -1) })
            .where(eq(taxRates.id, before.id));
        }
        await tx.db.insert(taxRates).values({
          id: newId(),
          country: form.country,
          kind: form.kind,
          basisPoints: Math.round(Number(form.percent.replace(",", ".")) * 100),
          validFrom: form.validFrom,
          source: form.source,
        });
        return changed;
      }
      case "delivery": {
        const [before] = await tx.db
          .select()
          .from(deliveryRates)
          .where(eq(deliveryRates.id, form.rateId))
          .for("update");
        if (before === undefined || before.validTo !== null)
          return refused("amount", "This price has been replaced already.");
        const amount = parseMoney(form.amount, currencyCode(before.currency));
        if (!amount.ok || amount.money.amount < 0)
          return refused("amount", "Write the sum in figures, for example 14.50.");
        if (form.validFrom <= before.validFrom)
          return refused("validFrom", "A new price begins after the one before it.");
        await tx.db
          .update(deliveryRates)
          .set({ validTo: addDays(form.validFrom, -1) })
          .where(eq(deliveryRates.id, before.id));
        await tx.db.insert(deliveryRates).values({
          ...before,
          id: newId(),
          amount: amount.money.amount,
          validFrom: form.validFrom,
          validTo: null,
          example: false,
        });
        return changed;
      }
    }
  });
  forgetStudio();
  return outcome;
}
