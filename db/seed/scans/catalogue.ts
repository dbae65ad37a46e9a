/**
 * What the demo studio has on film: four rolls, and the prints chosen from them.
 *
 * Everything here is invented. `scene` and `seed` tell the renderer what to draw; the rest is what a
 * photographer would write on the sleeve. Exposures are for film of ISO 125 in the light described,
 * lengthened where the metered time passes one second by t = metered^1.31 (common practice for
 * traditional films; the exponent is from memory and differs between films).
 */
import type { FilmFormat, SceneName } from "./render.mjs";

/** A day as written on the sleeve; with the precision "month" the day of the month means nothing. */
export type ExposedOn = { date: `${number}-${number}-${number}`; precision: "day" | "month" };

export type CatalogueExposure = {
  /** f-number */
  aperture: number;
  /** seconds the shutter was open */
  timeSeconds: number;
  filter?: string;
  /** what the light was, in words */
  light: string;
};

export type CatalogueFrame = {
  /** 1-based place on the roll */
  position: number;
  scene: SceneName;
  seed: number;
  /** pixels; the height follows from the roll's format and `upright` */
  width: number;
  /** the camera was turned: the frame is taller than wide */
  upright?: boolean;
  /** a working title, where the frame was given one */
  title?: string;
  place: string;
  note: string;
  exposure: CatalogueExposure;
};

export type CatalogueRoll = {
  number: number;
  format: FilmFormat;
  /** how many frames the film holds; fewer may have been scanned */
  capacity: number;
  /** the renderer's glass, where it is not the scene's own */
  lens?: "pinhole";
  camera: string;
  film: string;
  exposedOn: ExposedOn;
  notes: string;
  frames: CatalogueFrame[];
};

export type SeriesSlug = "low-water" | "under-leaf" | "high-chalk";

export type CatalogueSeries = { slug: SeriesSlug; title: string; statement: string };

/** Which frame: roll number and place on it. */
export type FrameRef = { roll: number; position: number };

/** Parts of the frame from its upper left corner, 0 to 1. */
export type CatalogueCrop = { x: number; y: number; width: number; height: number };

export type CataloguePrint = {
  slug: string;
  title: string;
  year: number;
  /** one frame for a print, several for a portfolio */
  frames: [FrameRef, ...FrameRef[]];
  crop: CatalogueCrop;
  /** what is to be seen, for those who cannot see it */
  alt: string;
  /** the photographer's own words */
  statement: string;
  series: SeriesSlug;
};

/** The number of the roll and the place on it, which name a frame everywhere in the demo: "203-04". */
export function frameKey({ roll, position }: FrameRef): string {
  return `${roll}-${String(position).padStart(2, "0")}`;
}

const whole: CatalogueCrop = { x: 0, y: 0, width: 1, height: 1 };

export const rolls: CatalogueRoll[] = [
  {
    number: 187,
    format: "6x6",
    capacity: 12,
    camera: "6x6 twin-lens camera, 80 mm",
    film: "ISO 125 traditional film, 120",
    exposedOn: { date: "2021-11-14", precision: "day" },
    notes:
      "One day along the water, dark to dark. Fog off the cut until eleven, then a white sky and no wind. Developed long by a tenth; the light was flat.",
    frames: [
      {
        position: 1,
        scene: "bridge",
        seed: 4,
        width: 2400,
        place: "Amberley Locks",
        note: "Bridge 11 from the far bank. Fog thick beyond the arch; nothing behind it yet.",
        exposure: { aperture: 16, timeSeconds: 1 / 2, light: "Fog before sunrise, no direction to it" },
      },
      {
        position: 2,
        scene: "bridge",
        seed: 2,
        width: 5400,
        title: "Bridge 11",
        place: "Amberley Locks",
        note: "Moved a pace left so that the arch and its reflection close. Water quite still. This one.",
        exposure: { aperture: 16, timeSeconds: 1 / 4, light: "Fog with the sun behind it, soft and frontal" },
      },
      {
        position: 3,
        scene: "flood",
        seed: 1,
        width: 3000,
        place: "Lower Meadow",
        note: "Fence from the gate. Too much sky.",
        exposure: {
          aperture: 16,
          timeSeconds: 28,
          filter: "6-stop neutral",
          light: "Thin fog, sun not through",
        },
      },
      {
        position: 4,
        scene: "flood",
        seed: 4,
        width: 3000,
        title: "Flood, Lower Meadow",
        place: "Lower Meadow",
        note: "Nearer post upright in the frame, far posts going out one by one. Metered 13 s, gave 28.",
        exposure: {
          aperture: 16,
          timeSeconds: 28,
          filter: "6-stop neutral",
          light: "Thin fog, sun not through",
        },
      },
      {
        position: 5,
        scene: "flood",
        seed: 6,
        width: 3000,
        place: "Lower Meadow",
        note: "Same, a little lower. The second post cuts the far bank.",
        exposure: { aperture: 16, timeSeconds: 28, filter: "6-stop neutral", light: "Thin fog, lifting" },
      },
      {
        position: 6,
        scene: "reeds",
        seed: 4,
        width: 3000,
        title: "Reed Bed, No Wind",
        place: "Mill Pond, Saint Orrin's",
        note: "Waited twenty minutes for a moorhen to finish. Water gone completely flat.",
        exposure: { aperture: 11, timeSeconds: 1 / 15, light: "White sky, even" },
      },
      {
        position: 7,
        scene: "reeds",
        seed: 8,
        width: 3000,
        place: "Mill Pond, Saint Orrin's",
        note: "From the other side of the sluice. Busier, less good.",
        exposure: { aperture: 11, timeSeconds: 1 / 15, light: "White sky, even" },
      },
      {
        position: 8,
        scene: "milestone",
        seed: 6,
        width: 3000,
        title: "Milestone, Thorn Lane",
        place: "Thorn Lane",
        note: "Nine miles, to where it does not say. Close-up lens, wide open for the hedge behind.",
        exposure: { aperture: 4, timeSeconds: 1 / 125, light: "White sky, a little from the left" },
      },
      {
        position: 9,
        scene: "milestone",
        seed: 4,
        width: 2400,
        place: "Thorn Lane",
        note: "The next stone along. Grass longer, letters shallower.",
        exposure: { aperture: 4, timeSeconds: 1 / 125, light: "White sky, a little from the left" },
      },
      {
        position: 10,
        scene: "stage",
        seed: 3,
        width: 3000,
        place: "Amberley Water",
        note: "Landing stage, first try. Sky still too bright.",
        exposure: {
          aperture: 22,
          timeSeconds: 90,
          filter: "6-stop neutral",
          light: "Half an hour before dusk",
        },
      },
      {
        position: 11,
        scene: "stage",
        seed: 2,
        width: 3000,
        title: "Landing Stage, Four Minutes",
        place: "Amberley Water",
        note: "Metered 64 s, gave four minutes by the watch. Chop gone from the water entirely.",
        exposure: {
          aperture: 22,
          timeSeconds: 240,
          filter: "6-stop neutral",
          light: "Dusk, clear band in the west",
        },
      },
      {
        position: 12,
        scene: "stage",
        seed: 6,
        width: 3000,
        place: "Amberley Water",
        note: "Last frame. Metered just under two minutes, gave eight. Fingers numb, counted aloud.",
        exposure: { aperture: 22, timeSeconds: 480, filter: "6-stop neutral", light: "Dusk, nearly gone" },
      },
    ],
  },
  {
    number: 203,
    format: "6x7",
    capacity: 10,
    camera: "6x7 folding camera, 90 mm",
    film: "ISO 125 traditional film, 120",
    exposedOn: { date: "2023-01-01", precision: "month" },
    notes:
      "January, four outings. Fog in Pell Wood, the thaw after the second week's snow, and a clear night at the mill pond. Normal development.",
    frames: [
      {
        position: 1,
        scene: "beech",
        seed: 2,
        width: 2400,
        upright: true,
        place: "Pell Wood",
        note: "From the bank above the ride. Near trunk too central.",
        exposure: { aperture: 22, timeSeconds: 1, light: "Thick fog under trees" },
      },
      {
        position: 2,
        scene: "beech",
        seed: 9,
        width: 4800,
        upright: true,
        title: "Beeches, Pell Wood",
        place: "Pell Wood",
        note: "Twenty yards on. The ranks open here. Two seconds metered, gave two and a half.",
        exposure: {
          aperture: 22,
          timeSeconds: 2.5,
          light: "Thick fog, brighter low down between the trunks",
        },
      },
      {
        position: 3,
        scene: "beech",
        seed: 4,
        width: 2400,
        upright: true,
        title: "Beech with a Long Bough",
        place: "Pell Wood",
        note: "The one with the bough reaching left. Fog thinning.",
        exposure: { aperture: 22, timeSeconds: 1, light: "Fog, thinner" },
      },
      {
        position: 4,
        scene: "ranks",
        seed: 1,
        width: 3000,
        title: "Ranks, Pell Wood",
        place: "Pell Wood",
        note: "Long lens from across the dell, ground left out. Counted nine trees deep on the glass.",
        exposure: { aperture: 22, timeSeconds: 1, light: "Fog, even, no shadows at all" },
      },
      {
        position: 5,
        scene: "drove",
        seed: 10,
        width: 2400,
        upright: true,
        title: "The Drove, January",
        place: "The Drove, above Thorn Lane",
        note: "Ruts holding water. Nobody had been along it.",
        exposure: { aperture: 22, timeSeconds: 1 / 4, light: "Fog, sun high behind it" },
      },
      {
        position: 6,
        scene: "orchard",
        seed: 6,
        width: 3000,
        title: "Old Orchard, Thaw",
        place: "Orchard at Thorn Lane",
        note: "Snow going from between the rows first. Mist coming up off it as I set up.",
        exposure: { aperture: 22, timeSeconds: 1 / 4, light: "Overcast, mist rising" },
      },
      {
        position: 7,
        scene: "lock",
        seed: 3,
        width: 3000,
        title: "Lower Gates",
        place: "Amberley Locks",
        note: "The gates have leaked since I was a child. Four seconds metered, six given, for the water.",
        exposure: {
          aperture: 22,
          timeSeconds: 6,
          filter: "3-stop neutral",
          light: "Fog behind, open sky overhead",
        },
      },
      {
        position: 8,
        scene: "mill",
        seed: 5,
        width: 3000,
        place: "Saint Orrin's Mill",
        note: "From the weir side. Chimney on the edge of things.",
        exposure: {
          aperture: 16,
          timeSeconds: 240,
          filter: "10-stop neutral",
          light: "Thin high cloud, low sun",
        },
      },
      {
        position: 9,
        scene: "mill",
        seed: 3,
        width: 3000,
        title: "Saint Orrin's Mill",
        place: "Saint Orrin's Mill",
        note: "Square on, from the reeds. Metered 64 s, gave four minutes; the cloud drew out, the mill did not mind.",
        exposure: {
          aperture: 16,
          timeSeconds: 240,
          filter: "10-stop neutral",
          light: "Thin high cloud, low sun",
        },
      },
      {
        position: 10,
        scene: "stars",
        seed: 2,
        width: 2400,
        upright: true,
        title: "Two Hours, Mill Pond",
        place: "Mill Pond, Saint Orrin's",
        note: "Shutter open 9.40, closed 11.40. Wiped the lens twice for dew, hat over it meanwhile.",
        exposure: { aperture: 5.6, timeSeconds: 7200, light: "Clear night, no moon, town glow low down" },
      },
    ],
  },
  {
    number: 209,
    format: "6x6",
    capacity: 12,
    lens: "pinhole",
    camera: "6x6 pinhole, 50 mm at f/192",
    film: "ISO 125 traditional film, 120",
    exposedOn: { date: "2023-11-19", precision: "day" },
    notes:
      "The box camera that was my father's. Only the first four; the back came open on the bus and the rest is fog of the wrong kind.",
    frames: [
      {
        position: 1,
        scene: "orchard",
        seed: 4,
        width: 2400,
        place: "Orchard at Thorn Lane",
        note: "Camera on the ground, on a brick. 8 s metered, 15 given.",
        exposure: { aperture: 192, timeSeconds: 15, light: "Overcast, first light snow" },
      },
      {
        position: 2,
        scene: "drove",
        seed: 2,
        width: 2400,
        place: "The Drove, above Thorn Lane",
        note: "Counted thirty. A dog went through it twice and is not there.",
        exposure: { aperture: 192, timeSeconds: 30, light: "Fog" },
      },
      {
        position: 3,
        scene: "poplars",
        seed: 9,
        width: 2400,
        place: "Long Pound, Amberley",
        note: "Whole row. Light going.",
        exposure: { aperture: 192, timeSeconds: 40, light: "Overcast, darker" },
      },
      {
        position: 4,
        scene: "poplars",
        seed: 4,
        width: 3000,
        title: "Poplars, Pinhole",
        place: "Long Pound, Amberley",
        note: "Nearer, and the gaps where they came down last winter. 25 s metered, 68 given.",
        exposure: { aperture: 192, timeSeconds: 68, light: "Overcast, an hour before dusk" },
      },
    ],
  },
  {
    number: 214,
    format: "6x9",
    capacity: 8,
    camera: "6x9 folding camera, 105 mm",
    film: "ISO 125 traditional film, 120",
    exposedOn: { date: "2024-02-01", precision: "month" },
    notes:
      "Hag Down and the fields below it, before and after the snow. Light leak looked for at frame 5; none found.",
    frames: [
      {
        position: 1,
        scene: "ridges",
        seed: 7,
        width: 3000,
        place: "Hag Down, north edge",
        note: "Sun not yet up. Mist high in the valleys.",
        exposure: { aperture: 16, timeSeconds: 1, filter: "orange", light: "Ten minutes before sunrise" },
      },
      {
        position: 2,
        scene: "ridges",
        seed: 14,
        width: 6000,
        title: "Chalk Ridges, First Light",
        place: "Hag Down, north edge",
        note: "Sun just clear of the cloud bank. Lens shaded with the dark slide.",
        exposure: { aperture: 16, timeSeconds: 1 / 3, filter: "orange", light: "First sun, into the lens" },
      },
      {
        position: 3,
        scene: "ridges",
        seed: 9,
        width: 3000,
        place: "Hag Down, north edge",
        note: "Mist burning off. Half the valley gone back to fields.",
        exposure: { aperture: 16, timeSeconds: 1 / 8, filter: "orange", light: "Sun a hand above the ridge" },
      },
      {
        position: 4,
        scene: "thorn",
        seed: 6,
        width: 3000,
        place: "Hag Down",
        note: "The thorn from the dew pond. Cloud coming fast over the top.",
        exposure: { aperture: 16, timeSeconds: 57, filter: "10-stop neutral", light: "Bright, broken cloud" },
      },
      {
        position: 5,
        scene: "thorn",
        seed: 12,
        width: 6000,
        title: "Thorn, Hag Down",
        place: "Hag Down",
        note: "Lower, so that the whole crown stands on sky. No wind at the ground, plenty above. 22 s metered, 57 given.",
        exposure: {
          aperture: 16,
          timeSeconds: 57,
          filter: "10-stop neutral",
          light: "Bright, cloud breaking up",
        },
      },
      {
        position: 6,
        scene: "furrows",
        seed: 2,
        width: 3000,
        title: "Winter Plough, Weather Coming",
        place: "Fields below Hag Down",
        note: "Asked at the farm first. Lines up on the oak if you stand by the trough.",
        exposure: {
          aperture: 22,
          timeSeconds: 1 / 4,
          filter: "orange",
          light: "Low sun, front coming from the west",
        },
      },
      {
        position: 7,
        scene: "furrows",
        seed: 7,
        width: 3000,
        place: "Fields below Hag Down",
        note: "From the other headland, five minutes on.",
        exposure: { aperture: 22, timeSeconds: 1 / 2, filter: "orange", light: "Same, sun going in" },
      },
      {
        position: 8,
        scene: "snow",
        seed: 10,
        width: 3000,
        title: "Fence in Snow",
        place: "Hag Down, south slope",
        note: "A week later. One and a third stops over the meter to keep the snow white.",
        exposure: {
          aperture: 16,
          timeSeconds: 1 / 15,
          filter: "yellow",
          light: "Overcast, brighter to the left",
        },
      },
    ],
  },
];

export const series: CatalogueSeries[] = [
  {
    slug: "low-water",
    title: "Low Water",
    statement:
      "The cut at Amberley was dug to carry stone, and the stone is gone. What is left is a great deal of level water and the things people built to keep it level. I walk it when there is fog because then there is only one thing to look at, at a time.",
  },
  {
    slug: "under-leaf",
    title: "Under Leaf",
    statement:
      "Pell Wood, the drove and the orchard lie within a mile of each other, and I have photographed them for nineteen winters. In summer they are green and I leave them alone. When the leaf is down you can see how a tree is made.",
  },
  {
    slug: "high-chalk",
    title: "High Chalk",
    statement:
      "Hag Down is four hundred feet of chalk with grass on it. There is little up there, and it has to be put in the right place. Most of these took several visits and one or two exposures.",
  },
];

export const prints: CataloguePrint[] = [
  {
    slug: "bridge-11",
    title: "Amberley Locks, Bridge 11",
    year: 2021,
    frames: [{ roll: 187, position: 2 }],
    crop: whole,
    alt: "A brick canal bridge seen square on. Its half-round arch and the reflection below it make a full circle; inside the circle are pale trees in fog and the same trees upside down in still water.",
    statement:
      "There are fourteen bridges at Amberley and this is the only one where you can stand on the axis without getting wet. The circle lasts as long as nobody opens a paddle. I had about ten minutes.",
    series: "low-water",
  },
  {
    slug: "flood-lower-meadow",
    title: "Flood, Lower Meadow",
    year: 2021,
    frames: [{ roll: 187, position: 4 }],
    crop: whole,
    alt: "A line of fence posts joined by slack wire walks away into smooth flood water. The nearest post is black, the furthest almost gone; beyond them a faint row of trees lies along the far bank in fog.",
    statement:
      "The meadow goes under most Novembers. The fence belongs to a neighbour who would rather I photographed it mended.",
    series: "low-water",
  },
  {
    slug: "reed-bed-no-wind",
    title: "Reed Bed, No Wind",
    year: 2021,
    frames: [{ roll: 187, position: 6 }],
    crop: whole,
    alt: "Thin dark reed stems, some bent or snapped, stand in water so still and pale that it cannot be told from the sky. Their reflections join them into angles and loops.",
    statement:
      "Reeds are drawn with a hard pencil. I printed it light, and kept the few black strokes for the stems that broke.",
    series: "low-water",
  },
  {
    slug: "landing-stage-four-minutes",
    title: "Landing Stage, Four Minutes",
    year: 2021,
    frames: [{ roll: 187, position: 11 }],
    crop: whole,
    alt: "A weathered wooden landing stage runs straight out from the viewer over smooth grey water towards a thin far shore. Posts stand in pairs at its sides; the evening sky is dark above and pale at the horizon.",
    statement:
      "It was choppy. Four minutes of chop is flat. The boards are sharp because they were nailed down; everything else in the picture moved.",
    series: "low-water",
  },
  {
    slug: "saint-orrins-mill",
    title: "Saint Orrin's Mill",
    year: 2023,
    frames: [{ roll: 203, position: 9 }],
    crop: whole,
    alt: "A four-storey brick mill with a stair tower and a tall chimney stands across a wide pond, doubled by its reflection. Mist lies along the waterline; streaked cloud fans out behind, and reeds rise at the lower corner.",
    statement:
      "It stopped in the year my mother left it. I have no photograph of it working. This is how it looks from the place where the hands ate their lunch.",
    series: "low-water",
  },
  {
    slug: "beeches-pell-wood",
    title: "Beeches, Pell Wood",
    year: 2023,
    frames: [{ roll: 203, position: 2 }],
    crop: whole,
    alt: "A beech wood in thick fog. One dark trunk stands near at the right, with thin boughs reaching out; behind it rank after rank of trunks grow paler until they are lost. Fallen leaves cover the ground.",
    statement:
      "Fog does what a wood will not do by itself: it puts the trees in order. The near one is about my age.",
    series: "under-leaf",
  },
  {
    slug: "ranks-pell-wood",
    title: "Ranks, Pell Wood",
    year: 2023,
    frames: [{ roll: 203, position: 4 }],
    crop: whole,
    alt: "Upright beech trunks fill the picture from edge to edge with no ground to be seen, three of them black and near, the rest in paler and paler ranks behind, laced with fine bare twigs.",
    statement:
      "A long lens presses a wood flat. I wanted the trunks as a row of greys, dark to light, and the wood had them in another order, so I left it as it was.",
    series: "under-leaf",
  },
  {
    slug: "the-drove-january",
    title: "The Drove, January",
    year: 2023,
    frames: [{ roll: 203, position: 5 }],
    crop: whole,
    alt: "A wide farm track with water in its ruts runs straight into fog between rough verges and bare hedgerow trees, brightest where the trees meet in the distance.",
    statement:
      "Sheep went to market down this until the railway came. It is still the width of a flock. I use it to get to the orchard.",
    series: "under-leaf",
  },
  {
    slug: "old-orchard-thaw",
    title: "Old Orchard, Thaw",
    year: 2023,
    frames: [{ roll: 203, position: 6 }],
    crop: whole,
    alt: "Old apple trees with wide dark crowns stand in rows on thin melting snow, bare grass showing between the rows; the trees behind fade into low mist.",
    statement:
      "Nobody prunes it now. The snow goes first where the sheep walk, so for a morning you can see the plan of the place.",
    series: "under-leaf",
  },
  {
    slug: "chalk-ridges-first-light",
    title: "Chalk Ridges, First Light",
    year: 2024,
    frames: [{ roll: 214, position: 2 }],
    crop: whole,
    alt: "Ridge behind ridge of downland, the nearest almost black and lined with trees, the furthest pale grey, with bands of mist lying in the valleys between them and thin cloud drawn across a bright sky.",
    statement:
      "From the north edge you can count nine ridges on a good morning. I count seven here. The other two are in the mist and I have left room for them.",
    series: "high-chalk",
  },
  {
    slug: "thorn-hag-down",
    title: "Thorn, Hag Down",
    year: 2024,
    frames: [{ roll: 214, position: 5 }],
    crop: whole,
    alt: "A single hawthorn, its crown swept to the right by the wind, stands black on the brow of a dark hill. Streaks of cloud spread across the wide sky behind it; pale downs show at the right edge.",
    statement:
      "The wind on Hag Down comes from one side and the thorn has taken its advice. On this day there was none below the knee and a gale above the hat.",
    series: "high-chalk",
  },
  {
    slug: "thorn-square",
    title: "Thorn, Square",
    year: 2024,
    frames: [{ roll: 214, position: 5 }],
    crop: { x: 0.16, y: 0, width: 2 / 3, height: 1 },
    alt: "The same wind-swept hawthorn, cut to a square: the tree in the middle on its dark brow, the streaked sky fanning out above it.",
    statement:
      "The same negative as the long one. I cut it square for a friend with a narrow wall and found I liked the tree better without the view.",
    series: "high-chalk",
  },
  {
    slug: "winter-plough",
    title: "Winter Plough, Weather Coming",
    year: 2024,
    frames: [{ roll: 214, position: 6 }],
    crop: whole,
    alt: "Ploughed furrows run from the foot of the picture to a low horizon where one small bare tree stands. Above it flat clouds break apart in a bright sky.",
    statement:
      "A good ploughman leaves you lines you could not draw. He wanted to know what was wrong with the picture he had on his telephone, which was also good.",
    series: "high-chalk",
  },
  {
    slug: "fence-in-snow",
    title: "Fence in Snow",
    year: 2024,
    frames: [{ roll: 214, position: 8 }],
    crop: whole,
    alt: "A wire fence climbs across an unmarked field of snow to a single broad, bare tree on the brow, under a plain grey sky.",
    statement:
      "Snow leaves out most of a field. What is left here is a fence and a tree. I walked round by the road so as not to add to it.",
    series: "high-chalk",
  },
];

/** Written up, but no edition yet: pictures the studio may print next. */
export const laterPrints: CataloguePrint[] = [
  {
    slug: "lower-gates",
    title: "Amberley Locks, Lower Gates",
    year: 2023,
    frames: [{ roll: 203, position: 7 }],
    crop: whole,
    alt: "The closed lower gates of a canal lock between brick walls, their long white-ended beams reaching out to both sides. A white thread of water leaks where the gates meet and spreads on the dark pool; bare trees stand in fog behind.",
    statement:
      "Two oak gates, nine tons each, and one leak that has been there since before I could walk. The lengthsman calls it the tap. I gave it six seconds.",
    series: "low-water",
  },
  {
    slug: "two-hours-mill-pond",
    title: "Two Hours, Mill Pond",
    year: 2023,
    frames: [{ roll: 203, position: 10 }],
    crop: whole,
    alt: "Night. Star trails draw arcs round a point high in a dark sky; a bare tree stands black against them at the left, and its shape lies broken in the pond below.",
    statement:
      "Two hours is a twelfth of a turn. The tree kept still and I did my best. The bright band low down is the town.",
    series: "low-water",
  },
  {
    slug: "milestone-thorn-lane",
    title: "Milestone, Thorn Lane",
    year: 2021,
    frames: [{ roll: 187, position: 8 }],
    crop: whole,
    alt: "A lichened milestone cut with the figure nine in Roman letters stands in long grass, sharp against a soft grey lane and blurred winter trees.",
    statement: "It does not say nine miles to where. Everyone who needed it knew.",
    series: "under-leaf",
  },
  {
    slug: "poplars-pinhole",
    title: "Poplars, Pinhole",
    year: 2023,
    frames: [{ roll: 209, position: 4 }],
    crop: whole,
    alt: "Nine tall poplars on a dark bank, with gaps in the row, stand against a pale sky and are doubled, a little blurred, in the water below. The corners of the picture are dark.",
    statement:
      "A pinhole is everywhere equally unsharp. After a while it stops looking unsharp and looks like weather.",
    series: "low-water",
  },
];

/** Several pictures sold as one work. */
export const portfolios: CataloguePrint[] = [
  {
    slug: "low-water-portfolio",
    title: "Low Water: Five Pictures",
    year: 2023,
    frames: [
      { roll: 187, position: 2 },
      { roll: 187, position: 4 },
      { roll: 187, position: 6 },
      { roll: 187, position: 11 },
      { roll: 203, position: 9 },
    ],
    crop: whole,
    alt: "Five pictures of still water: a bridge and its reflection, a fence in a flood, reeds, a landing stage, and a mill across its pond.",
    statement:
      "The five I would keep. They are printed to one size so that they can be turned over like pages.",
    series: "low-water",
  },
];
