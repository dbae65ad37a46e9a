import { describe, expect, it } from "vitest";
import { parseHappened } from "./happened";

const now = new Date("2026-12-01T10:00:00Z");
const read = (text: string) => parseHappened(text, { zone: "Europe/London", now });

describe("when something happened, as typed", () => {
  it("is now when nothing is said, and unknown when that is said", () => {
    expect(read(" ")).toEqual({ ok: true, happened: { precision: "instant", at: now } });
    expect(read("Unknown")).toEqual({ ok: true, happened: { precision: "unknown" } });
  });

  it("keeps how much of it is known", () => {
    const noon = (day: string) => new Date(`${day}T12:00:00Z`);
    expect(read("2021")).toEqual({ ok: true, happened: { precision: "year", at: noon("2021-01-01") } });
    expect(read("2021-02")).toEqual({ ok: true, happened: { precision: "month", at: noon("2021-02-01") } });
    expect(read("2021-02-03")).toEqual({ ok: true, happened: { precision: "day", at: noon("2021-02-03") } });
  });

  it("refuses what is no date and what has not come", () => {
    expect(read("3 Feb")).toEqual({ ok: false, problem: "not_a_date" });
    expect(read("2026-12-02")).toEqual({ ok: false, problem: "in_the_future" });
    expect(read("2026-12-01")).toMatchObject({ ok: true });
    expect(read("2027")).toEqual({ ok: false, problem: "in_the_future" });
    expect(read("2026-12-01T10:00:01Z")).toEqual({ ok: false, problem: "in_the_future" });
  });
});
