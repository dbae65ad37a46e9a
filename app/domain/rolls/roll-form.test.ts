import { describe, expect, it } from "vitest";
import { editRollForm, exposedColumns, exposedDate } from "./roll-form";

const roll = { intent: "edit", number: "214", filmFormat: "120-6x7" };
const exposed = (text: string) => editRollForm.safeParse({ ...roll, exposed: text });

describe("the day a roll was exposed", () => {
  it.each([
    ["2026-11-29", "2026-11-29", "day"],
    ["2026-11", "2026-11-01", "month"],
    ["2026", "2026-01-01", "year"],
    ["", null, "unknown"],
  ])("%j is kept as %s, known to the %s, and read back as typed", (text, exposedOn, exposedPrecision) => {
    const form = exposed(text);
    if (!form.success) throw form.error;
    const columns = exposedColumns(form.data.exposed);
    expect(columns).toEqual({ exposedOn, exposedPrecision });
    expect(exposedDate(columns).value).toBe(text);
  });

  it.each(["29 November", "2026-02-30", "2026-13", "2026-11-29T10:00:00Z"])("is not %j", (text) => {
    expect(exposed(text).success).toBe(false);
  });
});

describe("a roll", () => {
  it.each(["0", "-1", "2.5", "", "a"])("has no number %j", (number) => {
    expect(editRollForm.safeParse({ ...roll, number }).success).toBe(false);
  });

  it("is of a format that films have", () => {
    expect(editRollForm.safeParse({ ...roll, filmFormat: "120-5x5" }).success).toBe(false);
  });
});
