/*
 * What the demo studio has printed, opened and sold. Everything here is invented: people, addresses, reasons.
 * Telephone numbers are from the range kept free for drama (01632 960xxx).
 */

export type PlannedFormat = {
  /** A paper of `reference.ts`, by its place in that list. */
  paper: number;
  process: string;
  /** Long side of the image in mm; the other follows from the picture. */
  long: number;
  /** White around the image at the sides and top, mm; the lower margin is as wide and carries the signature. */
  margin: number;
  /** From number, to number, price in pence. */
  steps: [number, number, number][];
};

export type PlannedEdition = {
  print: string;
  limit: number;
  ap: number;
  pp?: number;
  bat?: number;
  exhibition?: number;
  /** First day, "2024-03-04", or "coming" for the one that is to be released. */
  opened: string;
  formats: PlannedFormat[];
  further: string;
};

const PIGMENT = "Pigment print";
const SILVER = "Gelatin silver print";
const NEVER = "No other edition of this picture will be made, in any size.";
const LARGER = "A larger edition of at most seven may follow; it will be named on every certificate.";

const small = (paper: number, steps: PlannedFormat["steps"]): PlannedFormat => ({
  paper,
  process: PIGMENT,
  long: 300,
  margin: 60,
  steps,
});
const large = (paper: number, steps: PlannedFormat["steps"]): PlannedFormat => ({
  paper,
  process: PIGMENT,
  long: 500,
  margin: 70,
  steps,
});
const silver = (steps: PlannedFormat["steps"]): PlannedFormat => ({
  paper: 2,
  process: SILVER,
  long: 240,
  margin: 80,
  steps,
});

/** Twenty editions of fifteen prints: some sold out, one to be released, one run shared by two sizes, a portfolio. */
export const editions: PlannedEdition[] = [
  {
    print: "bridge-11",
    limit: 9,
    ap: 2,
    pp: 1,
    bat: 1,
    opened: "2024-02-05",
    further: NEVER,
    formats: [
      large(1, [
        [1, 3, 42_000],
        [4, 6, 54_000],
        [7, 9, 68_000],
      ]),
    ],
  },
  {
    print: "flood-lower-meadow",
    limit: 15,
    ap: 2,
    opened: "2024-02-05",
    further: LARGER,
    formats: [
      small(0, [
        [1, 5, 24_000],
        [6, 10, 30_000],
        [11, 15, 38_000],
      ]),
    ],
  },
  {
    print: "flood-lower-meadow",
    limit: 5,
    ap: 1,
    opened: "2025-01-20",
    further: NEVER,
    formats: [
      large(0, [
        [1, 3, 85_000],
        [4, 5, 110_000],
      ]),
    ],
  },
  {
    print: "reed-bed-no-wind",
    limit: 12,
    ap: 1,
    opened: "2024-05-13",
    further: NEVER,
    formats: [
      small(0, [
        [1, 6, 22_000],
        [7, 12, 28_000],
      ]),
    ],
  },
  {
    print: "landing-stage-four-minutes",
    limit: 15,
    ap: 2,
    opened: "2024-05-13",
    further: NEVER,
    formats: [
      small(0, [
        [1, 5, 26_000],
        [6, 10, 32_000],
        [11, 15, 40_000],
      ]),
      {
        ...large(0, [
          [1, 5, 48_000],
          [6, 10, 58_000],
          [11, 15, 70_000],
        ]),
        long: 450,
      },
    ],
  },
  {
    print: "saint-orrins-mill",
    limit: 10,
    ap: 2,
    opened: "2024-09-02",
    further: LARGER,
    formats: [
      small(1, [
        [1, 4, 28_000],
        [5, 8, 34_000],
        [9, 10, 46_000],
      ]),
    ],
  },
  {
    print: "saint-orrins-mill",
    limit: 3,
    ap: 1,
    opened: "2026-03-09",
    further: NEVER,
    formats: [
      {
        ...large(1, [
          [1, 2, 140_000],
          [3, 3, 180_000],
        ]),
        long: 760,
      },
    ],
  },
  {
    print: "beeches-pell-wood",
    limit: 25,
    ap: 3,
    bat: 1,
    opened: "2024-09-02",
    further: NEVER,
    formats: [
      small(0, [
        [1, 5, 24_000],
        [6, 15, 30_000],
        [16, 25, 38_000],
      ]),
    ],
  },
  {
    print: "ranks-pell-wood",
    limit: 15,
    ap: 2,
    opened: "2025-02-10",
    further: NEVER,
    formats: [
      small(0, [
        [1, 5, 24_000],
        [6, 10, 30_000],
        [11, 15, 36_000],
      ]),
    ],
  },
  {
    print: "the-drove-january",
    limit: 7,
    ap: 1,
    opened: "2025-02-10",
    further: NEVER,
    formats: [
      silver([
        [1, 4, 36_000],
        [5, 7, 45_000],
      ]),
    ],
  },
  {
    print: "old-orchard-thaw",
    limit: 12,
    ap: 1,
    opened: "2025-05-05",
    further: LARGER,
    formats: [
      small(0, [
        [1, 6, 22_000],
        [7, 12, 28_000],
      ]),
    ],
  },
  {
    print: "chalk-ridges-first-light",
    limit: 15,
    ap: 2,
    pp: 1,
    opened: "2025-05-05",
    further: LARGER,
    formats: [
      small(0, [
        [1, 5, 28_000],
        [6, 10, 34_000],
        [11, 15, 42_000],
      ]),
    ],
  },
  {
    print: "chalk-ridges-first-light",
    limit: 7,
    ap: 1,
    opened: "2025-09-15",
    further: NEVER,
    formats: [
      large(1, [
        [1, 3, 78_000],
        [4, 7, 98_000],
      ]),
    ],
  },
  {
    print: "thorn-hag-down",
    limit: 10,
    ap: 1,
    exhibition: 1,
    opened: "2025-09-15",
    further: NEVER,
    formats: [
      small(0, [
        [1, 5, 26_000],
        [6, 10, 34_000],
      ]),
    ],
  },
  {
    print: "thorn-square",
    limit: 9,
    ap: 1,
    opened: "2025-11-03",
    further: NEVER,
    formats: [
      silver([
        [1, 4, 34_000],
        [5, 9, 42_000],
      ]),
    ],
  },
  {
    print: "winter-plough",
    limit: 12,
    ap: 1,
    opened: "2026-01-12",
    further: NEVER,
    formats: [
      small(0, [
        [1, 6, 24_000],
        [7, 12, 30_000],
      ]),
    ],
  },
  {
    print: "old-orchard-thaw",
    limit: 5,
    ap: 1,
    opened: "2026-02-16",
    further: NEVER,
    formats: [
      large(1, [
        [1, 3, 72_000],
        [4, 5, 90_000],
      ]),
    ],
  },
  {
    print: "reed-bed-no-wind",
    limit: 5,
    ap: 1,
    opened: "2026-04-20",
    further: NEVER,
    formats: [
      silver([
        [1, 3, 38_000],
        [4, 5, 48_000],
      ]),
    ],
  },
  {
    print: "low-water-portfolio",
    limit: 5,
    ap: 1,
    opened: "2026-06-01",
    further: "The portfolio is made once. Its pictures are also sold singly, as named here.",
    formats: [
      {
        paper: 0,
        process: PIGMENT,
        long: 260,
        margin: 60,
        steps: [
          [1, 3, 120_000],
          [4, 5, 150_000],
        ],
      },
    ],
  },
  {
    print: "fence-in-snow",
    limit: 25,
    ap: 3,
    opened: "coming",
    further: NEVER,
    formats: [
      small(0, [
        [1, 5, 24_000],
        [6, 15, 30_000],
        [16, 25, 38_000],
      ]),
    ],
  },
];

/** What has happened outside orders, by edition (index) and copy. */
export const byHand: {
  edition: number;
  run: "numbered" | "ap" | "pp" | "exhibition";
  number: number;
  kind: "given" | "kept" | "consigned" | "retired";
  on: string;
  reason: string;
  to?: string;
}[] = [
  { edition: 0, run: "ap", number: 1, kind: "kept", on: "2024-02-06", reason: "for the studio" },
  {
    edition: 0,
    run: "pp",
    number: 1,
    kind: "given",
    on: "2024-02-20",
    reason: "to the printer, as agreed",
    to: "Millrace Press",
  },
  {
    edition: 1,
    run: "numbered",
    number: 15,
    kind: "given",
    on: "2024-06-02",
    reason: "for the auction of the flood fund",
    to: "Lower Meadow Flood Fund",
  },
  { edition: 7, run: "ap", number: 1, kind: "kept", on: "2024-09-03", reason: "for the studio" },
  {
    edition: 7,
    run: "numbered",
    number: 24,
    kind: "consigned",
    on: "2025-10-06",
    reason: "autumn wall, commission 40 %",
    to: "Lockside Gallery",
  },
  {
    edition: 7,
    run: "numbered",
    number: 25,
    kind: "consigned",
    on: "2025-10-06",
    reason: "autumn wall, commission 40 %",
    to: "Lockside Gallery",
  },
  {
    edition: 8,
    run: "numbered",
    number: 9,
    kind: "retired",
    on: "2025-06-20",
    reason: "the paper was creased in the press twice",
  },
  {
    edition: 11,
    run: "ap",
    number: 1,
    kind: "given",
    on: "2025-12-24",
    reason: "to the keeper of Hag Down",
    to: "Tobiah Wren",
  },
  {
    edition: 13,
    run: "exhibition",
    number: 1,
    kind: "consigned",
    on: "2026-05-04",
    reason: "for the open studios, to come back in June",
    to: "Amberley Library",
  },
];

export type Stage =
  | "paid"
  | "printing"
  | "signed"
  | "sent"
  | "arrived"
  | "cancelled"
  | "expired"
  | "transfer"
  | "pay_link";

export type PlannedOrder = {
  on: string;
  buyer: number;
  /** Edition (index), and the format where it has two. */
  lines: [edition: number, format?: number][];
  by: "card" | "transfer" | "cash";
  stage: Stage;
  reduction?: { pence: number; reason: string };
  spoiled?: string;
};

const order = (
  on: string,
  buyer: number,
  lines: PlannedOrder["lines"],
  by: PlannedOrder["by"],
  stage: Stage,
  more: Partial<PlannedOrder> = {},
): PlannedOrder => ({ on, buyer, lines, by, stage, ...more });

/** Forty-odd orders, oldest first. */
export const orders: PlannedOrder[] = [
  order("2024-02-11", 0, [[0]], "card", "arrived"),
  order("2024-02-14", 1, [[0]], "card", "arrived"),
  order("2024-03-02", 2, [[0], [1]], "cash", "arrived"),
  order("2024-04-19", 3, [[0]], "card", "arrived", { spoiled: "a hair in the sky, upper left" }),
  order("2024-05-20", 4, [[4, 0]], "card", "arrived"),
  order("2024-06-01", 5, [[4, 1]], "cash", "arrived"),
  order("2024-06-09", 0, [[3], [4, 0]], "card", "arrived"),
  order("2024-07-21", 6, [[0]], "transfer", "arrived"),
  order("2024-09-08", 7, [[5], [7]], "card", "arrived"),
  order("2024-09-30", 8, [[7]], "card", "arrived"),
  order("2024-10-12", 9, [[7], [1]], "cash", "arrived"),
  order("2024-11-23", 10, [[0]], "card", "arrived"),
  order("2024-12-07", 11, [[7]], "card", "arrived"),
  order("2025-01-25", 1, [[2]], "card", "arrived"),
  order("2025-02-15", 12, [[9]], "card", "arrived"),
  order("2025-02-16", 3, [[9], [8]], "cash", "arrived"),
  order("2025-03-08", 13, [[9]], "card", "arrived"),
  order("2025-03-30", 14, [[9]], "transfer", "arrived", {
    reduction: { pence: 2_000, reason: "bought two the year before" },
  }),
  order("2025-04-12", 6, [[9]], "card", "arrived"),
  order("2025-05-10", 7, [[9], [11]], "card", "arrived"),
  order("2025-05-11", 15, [[9], [10]], "cash", "arrived"),
  order("2025-06-14", 8, [[0]], "card", "arrived"),
  order("2025-07-05", 2, [[8]], "card", "cancelled"),
  order("2025-09-20", 10, [[12]], "card", "arrived"),
  order("2025-10-18", 16, [[0]], "card", "arrived"),
  order("2025-11-15", 17, [[14]], "card", "arrived"),
  order("2025-12-02", 0, [[0], [13]], "card", "arrived"),
  order("2026-01-17", 4, [[15]], "card", "arrived"),
  order("2026-02-21", 18, [[16]], "card", "arrived"),
  order("2026-03-14", 5, [[6]], "transfer", "arrived"),
  order("2026-06-06", 12, [[18]], "card", "arrived"),
  order("2026-08-09", 19, [[17]], "card", "arrived"),
  order("2026-10-03", 9, [[11]], "card", "expired"),
  order("2026-10-24", 13, [[12]], "card", "sent"),
  order("2026-11-07", 20, [[7], [8]], "card", "sent"),
  order("2026-11-14", 14, [[6]], "card", "signed"),
  order("2026-11-18", 21, [[4, 1]], "card", "signed"),
  order("2026-11-21", 7, [[13]], "cash", "printing"),
  order("2026-11-24", 22, [[1]], "card", "printing", { spoiled: "banding in the fog, lower third" }),
  order("2026-11-27", 16, [[14]], "card", "paid"),
  order("2026-11-28", 23, [[7], [15]], "card", "paid"),
  order("2026-11-29", 11, [[18]], "transfer", "transfer"),
  order("2026-11-30", 17, [[5]], "card", "pay_link"),
];

/** Name, town, postcode, country; the first is the collector who has an account. */
export const buyers: { name: string; line1: string; city: string; postcode: string; country: string }[] = [
  {
    name: "Merrin Oakshade",
    line1: "3 Malthouse Row",
    city: "Thorn Lane",
    postcode: "VE3 7QX",
    country: "GB",
  },
  {
    name: "Ines Varga-Holt",
    line1: "21 Tollhouse Street",
    city: "Amberley",
    postcode: "VE1 2AB",
    country: "GB",
  },
  { name: "Rufus Pallister", line1: "The Old Forge", city: "Hag Down", postcode: "VE4 9JT", country: "GB" },
  { name: "Dagny Okoro", line1: "8 Chandler's Wharf", city: "Amberley", postcode: "VE1 4RD", country: "GB" },
  {
    name: "Tobias Wrenfield",
    line1: "14 Sallow Bank",
    city: "Lower Meadow",
    postcode: "VE2 5LP",
    country: "GB",
  },
  { name: "Petra Lindqvist-Hale", line1: "Björkgatan 11", city: "Norrby", postcode: "111 22", country: "SE" },
  { name: "Corvin Abernethy", line1: "2 Weir Cottages", city: "Pell", postcode: "VE2 8SN", country: "GB" },
  { name: "Halina Brandt", line1: "Lindenhof 7", city: "Oberau", postcode: "12345", country: "DE" },
  { name: "Osric Tamworth", line1: "45 Tannery Rise", city: "Amberley", postcode: "VE1 6GH", country: "GB" },
  {
    name: "Linnet Farrow",
    line1: "1 Signal Terrace",
    city: "Thorn Lane",
    postcode: "VE3 1DB",
    country: "GB",
  },
  {
    name: "Aurelio Santacroce",
    line1: "Via dei Tigli 4",
    city: "Valchiara",
    postcode: "00100",
    country: "IT",
  },
  { name: "Maud Ellery", line1: "Orchard End", city: "Pell", postcode: "VE2 3WS", country: "GB" },
  { name: "Josephine Quill", line1: "77 Lantern Way", city: "Eastmoor", postcode: "VE5 2ZA", country: "GB" },
  {
    name: "Anselm Drew",
    line1: "Flat 3, Mill House",
    city: "Saint Orrin",
    postcode: "VE6 4TN",
    country: "GB",
  },
  { name: "Beatrix Lorne", line1: "16 Causeway", city: "Lower Meadow", postcode: "VE2 5QR", country: "GB" },
  { name: "Gideon Ashpole", line1: "9 Quarry Lane", city: "Hag Down", postcode: "VE4 1UE", country: "GB" },
  { name: "Solveig Aune", line1: "Fjordveien 30", city: "Nordvik", postcode: "0150", country: "NO" },
  {
    name: "Percival Stroud",
    line1: "5 Lockkeeper's Row",
    city: "Amberley",
    postcode: "VE1 9XF",
    country: "GB",
  },
  { name: "Nadia Ferreyra", line1: "118 Alder Avenue", city: "Fallbrook", postcode: "01001", country: "US" },
  { name: "Ewart Mallory", line1: "The Drift", city: "Pell", postcode: "VE2 7HC", country: "GB" },
  { name: "Clemence Dufour", line1: "12 rue des Saules", city: "Valmont", postcode: "75001", country: "FR" },
  { name: "Hester Wynn", line1: "6 Bakehouse Yard", city: "Eastmoor", postcode: "VE5 8BD", country: "GB" },
  { name: "Lucian Marsh", line1: "33 Paddock Road", city: "Thorn Lane", postcode: "VE3 6JL", country: "GB" },
  { name: "Rosalind Keane", line1: "2 Heron Court", city: "Amberley", postcode: "VE1 3PT", country: "GB" },
];
