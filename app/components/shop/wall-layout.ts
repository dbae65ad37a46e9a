/** Where sheets hang on the drawn wall. All lengths are millimetres, heights are from the wall's foot. */

export type WallSheet = {
  sheet: { width: number; height: number };
  picture: { width: number; height: number };
  /** Characters in the longest line written under it. */
  letters: number;
};

export type WallLayout = {
  width: number;
  height: number;
  /** Height of the floor's strip. */
  floor: number;
  /** For each sheet, in the order given: its left edge and its lower edge. */
  places: { x: number; bottom: number }[];
  chair: { x: number; bottom: number; width: number; height: number };
};

/** The middle of a picture hangs at the height of a standing person's eyes; common practice in galleries. */
const eyeLevel = 1500;
const floor = 130;
/** Room under a sheet for its two lines of words. */
const words = 260;
/** Width of a letter where the wall is drawn smallest in each view: the words keep their size, the wall does not. */
const letter = { wide: 30, narrow: 46 };

/**
 * Lays sheets on a wall. `wide` hangs them in one row, their middles at eye level; `narrow`, for a
 * telephone, in as many rows as it takes, above or beside the chair.
 */
export function layOutWall(sheets: readonly WallSheet[], view: "wide" | "narrow"): WallLayout {
  return view === "wide" ? inOneRow(sheets) : inRows(sheets);
}

function inOneRow(sheets: readonly WallSheet[]): WallLayout {
  const gap = 210;
  const chair = { width: 560, height: 880, bottom: 60 };
  const slot = (one: WallSheet) => Math.max(one.sheet.width + gap, one.letters * letter.wide + 60);
  const taken = sheets.reduce((sum, one) => sum + slot(one), 0) - gap;
  const beside = chair.width + 170;
  const width = Math.max(3800, 250 + Math.max(taken, 0) + gap + beside);
  const tallest = Math.max(0, ...sheets.map((one) => one.sheet.height));
  let x = (width - beside - Math.max(taken, 0)) / 2;
  const places = sheets.map((one) => {
    const place = { x, bottom: eyeLevel - one.sheet.height / 2 };
    x += slot(one);
    return place;
  });
  return {
    width,
    height: Math.max(2060, eyeLevel + tallest / 2 + 110),
    floor,
    places,
    chair: { ...chair, x: width - 170 - chair.width },
  };
}

function inRows(sheets: readonly WallSheet[]): WallLayout {
  const margin = 130;
  const gap = 100;
  const slot = (one: WallSheet) => Math.max(one.sheet.width, one.letters * letter.narrow);
  const width = Math.max(2200, ...sheets.map((one) => slot(one) + 2 * margin));
  const chair = { width: 480, height: 754, bottom: 60, x: width - 50 - 480 };
  const rows: { at: number; one: WallSheet }[][] = [];
  let right = Number.POSITIVE_INFINITY;
  sheets.forEach((one, at) => {
    if (right + slot(one) > width - margin) {
      rows.push([]);
      right = margin;
    }
    rows.at(-1)?.push({ at, one });
    right += slot(one) + gap;
  });
  const places: WallLayout["places"] = sheets.map(() => ({ x: 0, bottom: 0 }));
  const overChair = chair.bottom + chair.height + words - 60;
  let foot = floor + words;
  for (const row of rows.toReversed()) {
    const taken = row.reduce((sum, { one }) => sum + slot(one) + gap, margin - gap);
    /* a row may stand beside the chair when it is short enough */
    if (taken > chair.x - 60) foot = Math.max(foot, overChair);
    let x = margin;
    let tallest = 0;
    for (const { at, one } of row) {
      places[at] = { x, bottom: foot };
      x += slot(one) + gap;
      tallest = Math.max(tallest, one.sheet.height);
    }
    foot += tallest + words;
  }
  return { width, height: Math.max(foot - words + 130, 1400), floor, places, chair };
}
