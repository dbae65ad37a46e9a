import { createHash } from "node:crypto";
import sharp from "sharp";
import { beforeAll, describe, expect, test } from "vitest";
import { frameKey, laterPrints, portfolios, prints, rolls, series } from "./catalogue";
import { render } from "./render.mjs";
import { type FinishedFrame, frameSize, renderAll } from "./render-all";

const every = rolls.flatMap((roll) =>
  roll.frames.map((frame) => ({
    roll,
    frame,
    key: frameKey({ roll: roll.number, position: frame.position }),
  })),
);

describe("the catalogue", () => {
  test("holds at least three rolls, thirty frames and twelve scenes, and never the same picture twice", () => {
    expect(rolls.length).toBeGreaterThanOrEqual(3);
    expect(every.length).toBeGreaterThanOrEqual(30);
    expect(new Set(every.map(({ frame }) => frame.scene)).size).toBeGreaterThanOrEqual(12);
    expect(new Set(every.map(({ frame }) => `${frame.scene} ${frame.seed}`)).size).toBe(every.length);
    expect(new Set(every.map(({ key }) => key)).size).toBe(every.length);
  });

  test("numbers the frames of a roll from 1 without a gap, and no more than the film holds", () => {
    for (const roll of rolls) {
      expect(roll.frames.map((frame) => frame.position)).toEqual(roll.frames.map((_, index) => index + 1));
      expect(roll.frames.length).toBeLessThanOrEqual(roll.capacity);
    }
  });

  test("makes prints only of frames it has, in a series it has, with a crop inside the frame", () => {
    const keys = new Set(every.map(({ key }) => key));
    const works = [...prints, ...laterPrints, ...portfolios];
    expect(prints.length).toBeGreaterThanOrEqual(12);
    expect(new Set(works.map((print) => print.slug)).size).toBe(works.length);
    for (const print of works) {
      for (const frame of print.frames) expect(keys).toContain(frameKey(frame));
      expect(series.map(({ slug }) => slug)).toContain(print.series);
      expect(print.crop.x + print.crop.width).toBeLessThanOrEqual(1);
      expect(print.crop.y + print.crop.height).toBeLessThanOrEqual(1);
      expect(print.alt.length).toBeGreaterThan(60);
    }
    for (const { slug } of series)
      expect(prints.filter((print) => print.series === slug).length).toBeGreaterThan(3);
  });

  test("is not printed in a year before it was exposed", () => {
    for (const print of [...prints, ...laterPrints, ...portfolios])
      for (const { roll } of print.frames) {
        const exposed = rolls.find(({ number }) => number === roll)?.exposedOn.date ?? "";
        expect(print.year).toBeGreaterThanOrEqual(Number(exposed.slice(0, 4)));
      }
  });

  test("has a few scans large enough for a big print", () => {
    const large = every.filter(({ roll, frame }) => {
      const { width, height } = frameSize(roll, frame);
      return Math.max(width, height) >= 6000;
    });
    expect(large.length).toBeGreaterThanOrEqual(3);
  });
});

// the first frame of each scene, small; a busy machine may take some seconds over the larger trees
const oneOfEach = every.filter(({ frame }, i) => every.findIndex((e) => e.frame.scene === frame.scene) === i);

describe("a rendered frame", { timeout: 60_000 }, () => {
  test.each(oneOfEach)(
    "$frame.scene ($key) is a picture with tones from dark to light",
    ({ roll, frame }) => {
      const size = frameSize(roll, frame);
      const scale = 320 / Math.max(size.width, size.height);
      const scan = render({
        scene: frame.scene,
        seed: frame.seed,
        width: Math.round(size.width * scale),
        height: Math.round(size.height * scale),
        format: roll.format,
        ...(roll.lens && { lens: roll.lens }),
      });
      const sorted = Uint16Array.from(scan.samples).sort();
      const at = (share: number) => (sorted[Math.floor((sorted.length - 1) * share)] ?? 0) / 65535;
      expect(at(0.99) - at(0.01)).toBeGreaterThan(0.35);
      // nothing is burnt out or blocked up over a large part of the picture
      expect(at(0.5)).toBeGreaterThan(0.08);
      expect(at(0.5)).toBeLessThan(0.95);
      expect(at(0.95)).toBeLessThan(0.99);
    },
  );
});

describe("renderAll", { timeout: 60_000 }, () => {
  const only = [
    { roll: 209, position: 3 },
    { roll: 203, position: 10 },
    { roll: 203, position: 5 },
  ];
  const digest = (frame: FinishedFrame) => createHash("sha256").update(frame.tiff).digest("hex");
  const collect = async (refs: typeof only, concurrency: number) => {
    const found = new Map<string, FinishedFrame>();
    await renderAll((frame) => void found.set(frame.key, frame), { only: refs, concurrency });
    return found;
  };
  let together: Map<string, FinishedFrame>;
  beforeAll(async () => {
    together = await collect(only, 2);
  }, 60_000);

  test("delivers exactly the frames asked for", () => {
    expect([...together.keys()].sort()).toEqual(["203-05", "203-10", "209-03"]);
    expect(together.get("203-10")?.fileName).toBe("roll-203-frame-10.tif");
  });

  test("gives a frame the same bytes whatever was drawn before it", async () => {
    // the last to be drawn above, now first and alone on a fresh thread
    const last = [...together.values()].at(-1);
    if (!last) throw new Error("nothing was drawn");
    const alone = await collect([{ roll: last.roll.number, position: last.frame.position }], 1);
    expect([...alone.values()].map(digest)).toEqual([digest(last)]);
  });

  test("writes 16-bit grey TIFF with its profile, size and scanning resolution", async () => {
    for (const frame of together.values()) {
      const meta = await sharp(frame.tiff).metadata();
      expect(meta).toMatchObject({
        format: "tiff",
        width: frame.width,
        height: frame.height,
        channels: 1,
        depth: "ushort",
        space: "grey16",
      });
      expect(meta.icc?.includes("Gray Gamma 2.2")).toBe(true);
      expect(meta.density).toBeCloseTo(frame.dpi, 0);
    }
  });

  test("passes on an error of the receiver and stops", async () => {
    const started = renderAll(
      () => {
        throw new Error("no room in storage");
      },
      { only: [{ roll: 209, position: 3 }] },
    );
    await expect(started).rejects.toThrow("no room in storage");
  });
});
