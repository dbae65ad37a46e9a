import { describe, expect, it } from "vitest";
import { type EditionShown, picturesArePublic } from "./visibility";

const now = new Date("2026-12-01T18:00:00Z");
const open = (releaseAt: string): EditionShown => ({ state: "open", releaseAt: new Date(releaseAt) });
const published = { state: "published", shownBeforeRelease: false } as const;

describe("the pictures of a print", () => {
  it("are public from the very moment of a release", () => {
    expect(picturesArePublic(published, [open("2026-12-01T18:00:00Z")], now)).toBe(true);
    expect(picturesArePublic(published, [open("2026-12-01T18:00:00.001Z")], now)).toBe(false);
  });

  it("are public as soon as one of several editions is released", () => {
    expect(
      picturesArePublic(published, [open("2027-01-01T00:00:00Z"), open("2020-01-01T00:00:00Z")], now),
    ).toBe(true);
  });

  it("stay public when the edition has been closed", () => {
    expect(picturesArePublic(published, [{ state: "closed", releaseAt: new Date("2020-01-01") }], now)).toBe(
      true,
    );
  });

  it("are not public for an edition that was never opened, whatever its date", () => {
    expect(picturesArePublic(published, [{ state: "draft", releaseAt: new Date("2020-01-01") }], now)).toBe(
      false,
    );
    expect(picturesArePublic(published, [], now)).toBe(false);
  });

  it("may be shown before any release if the photographer says so, but only while published", () => {
    for (const state of ["draft", "published", "withdrawn"] as const) {
      const shown = picturesArePublic({ state, shownBeforeRelease: true }, [], now);
      expect(shown).toBe(state === "published");
    }
  });

  it("are taken back with the print", () => {
    const released = [open("2020-01-01T00:00:00Z")];
    expect(picturesArePublic({ ...published, state: "withdrawn" }, released, now)).toBe(false);
    expect(picturesArePublic({ ...published, state: "draft" }, released, now)).toBe(false);
  });
});
