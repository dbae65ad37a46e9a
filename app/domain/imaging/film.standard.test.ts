import { describe, expect, it } from "vitest";
import { FILM_FORMATS, filmFormat } from "./film";

// Frame tables for 120 roll film (ISO 732), nominal mm across and along the film; 135 film (ISO 1007) from memory.
describe("film formats", () => {
  it.each([
    ["120-6x4.5", 56, 41.5, 15],
    ["120-6x6", 56, 56, 12],
    ["120-6x7", 56, 70, 10],
    ["120-6x8", 56, 77, 9],
    ["120-6x9", 56, 84, 8],
    ["120-6x12", 56, 118, 6],
    ["120-6x17", 56, 168, 4],
    ["120-6x24", 56, 224, 3],
    ["135-24x36", 24, 36, 36],
  ])("%s is %f x %f mm, %i frames", (key, heightMm, widthMm, frames) => {
    expect(filmFormat(key)).toMatchObject({ heightMm, widthMm });
    expect(filmFormat(key)?.frames[0]).toBe(frames);
  });

  it("have keys of their own", () => {
    expect(new Set(FILM_FORMATS.map((format) => format.key)).size).toBe(FILM_FORMATS.length);
    expect(filmFormat("none")).toBeNull();
  });
});
