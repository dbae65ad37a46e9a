/** Types of render.mjs, which stays plain JavaScript so that worker threads can load it without a compiler. */

export type FilmFormat = "6x6" | "6x7" | "6x9";

export type SceneName =
  | "beech"
  | "bridge"
  | "drove"
  | "flood"
  | "furrows"
  | "lock"
  | "milestone"
  | "mill"
  | "orchard"
  | "poplars"
  | "ranks"
  | "reeds"
  | "ridges"
  | "snow"
  | "stage"
  | "stars"
  | "thorn";

export type RenderJob = {
  scene: SceneName;
  /** frames of one scene differ by seed in framing, mist and exposure */
  seed: number;
  /** pixels */
  width: number;
  height: number;
  format: FilmFormat;
  /** a pinhole is soft and falls off far more towards the corners; each scene has its own glass otherwise */
  lens?: "pinhole";
};

export type RenderedScan = {
  /** the whole file: 16-bit grey, uncompressed, Gray Gamma 2.2 profile */
  tiff: Uint8Array<ArrayBuffer>;
  /** its picture alone, row after row, encoded with a gamma of 2.2; shares the file's memory */
  samples: Uint16Array<ArrayBuffer>;
  width: number;
  height: number;
  /** pixels per inch of film */
  dpi: number;
};

/** Draws one frame of film. The same job gives the same bytes on the same version of Node. */
export function render(job: RenderJob): RenderedScan;
