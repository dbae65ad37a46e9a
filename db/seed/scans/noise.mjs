// Seeded randomness and tiled noise. Everything is a pure function of its seed.

export function hash(text, seed = 0) {
  let h = 2166136261 ^ Math.imul(seed | 0, 2654435761);
  for (let i = 0; i < text.length; i++) h = Math.imul(h ^ text.charCodeAt(i), 16777619);
  h ^= h >>> 15;
  h = Math.imul(h, 2246822519);
  h ^= h >>> 13;
  return h >>> 0;
}

/** Small fast generator with the distributions the scenes need. */
export function rng(seed) {
  let a = seed >>> 0;
  const next = () => {
    a = (a + 0x6d2b79f5) | 0;
    let t = Math.imul(a ^ (a >>> 15), 1 | a);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
  return {
    next,
    range: (lo, hi) => lo + (hi - lo) * next(),
    int: (lo, hi) => lo + Math.floor(next() * (hi - lo + 1)),
    gauss: () => (next() + next() + next() + next() - 2) * 1.732,
    chance: (p) => next() < p,
    pick: (list) => list[Math.floor(next() * list.length)],
  };
}

/** Periodic fractal noise held in a square tile: period 1, mean 0, deviation 1. */
class Tile {
  constructor(seed, { size = 512, base = 4, octaves = 7, gain = 0.5 } = {}) {
    this.size = size;
    this.mask = size - 1;
    const d = new Float32Array(size * size);
    const r = rng(seed);
    let amp = 1;
    for (let o = 0, cells = base; o < octaves && cells <= size / 2; o++, cells *= 2, amp *= gain) {
      const g = new Float32Array(cells * cells * 2);
      for (let i = 0; i < g.length; i += 2) {
        const t = r.next() * Math.PI * 2;
        g[i] = Math.cos(t);
        g[i + 1] = Math.sin(t);
      }
      const step = cells / size;
      for (let y = 0; y < size; y++) {
        const fy = y * step,
          iy = Math.floor(fy),
          ty = fy - iy,
          sy = ty * ty * ty * (ty * (ty * 6 - 15) + 10);
        const r0 = iy * cells,
          r1 = ((iy + 1) % cells) * cells;
        for (let x = 0; x < size; x++) {
          const fx = x * step,
            ix = Math.floor(fx),
            tx = fx - ix,
            sx = tx * tx * tx * (tx * (tx * 6 - 15) + 10);
          const jx = (ix + 1) % cells;
          const a = (r0 + ix) * 2,
            b = (r0 + jx) * 2,
            c = (r1 + ix) * 2,
            e = (r1 + jx) * 2;
          const n0 = g[a] * tx + g[a + 1] * ty,
            n1 = g[b] * (tx - 1) + g[b + 1] * ty;
          const n2 = g[c] * tx + g[c + 1] * (ty - 1),
            n3 = g[e] * (tx - 1) + g[e + 1] * (ty - 1);
          const u = n0 + (n1 - n0) * sx,
            v = n2 + (n3 - n2) * sx;
          d[y * size + x] += amp * (u + (v - u) * sy);
        }
      }
    }
    normalise(d);
    this.d = d;
  }

  at(x, y) {
    const s = this.size,
      m = this.mask,
      d = this.d;
    const fx = x * s,
      fy = y * s,
      ix = Math.floor(fx),
      iy = Math.floor(fy),
      tx = fx - ix,
      ty = fy - iy;
    const x0 = ix & m,
      x1 = (ix + 1) & m,
      r0 = (iy & m) * s,
      r1 = ((iy + 1) & m) * s;
    const a = d[r0 + x0],
      c = d[r1 + x0];
    const u = a + (d[r0 + x1] - a) * tx,
      v = c + (d[r1 + x1] - c) * tx;
    return u + (v - u) * ty;
  }
}

function normalise(d) {
  let m = 0,
    v = 0;
  for (let i = 0; i < d.length; i++) m += d[i];
  m /= d.length;
  for (let i = 0; i < d.length; i++) {
    d[i] -= m;
    v += d[i] * d[i];
  }
  const k = 1 / Math.sqrt(v / d.length);
  for (let i = 0; i < d.length; i++) d[i] *= k;
}

const tiles = new Map();
/** `cloud`: full fractal; `soft`: few octaves; `fine`: mostly small detail. */
export function tile(kind) {
  if (!tiles.has(kind)) {
    tiles.set(
      kind,
      kind === "soft"
        ? new Tile(71, { octaves: 3, gain: 0.42 })
        : kind === "fine"
          ? new Tile(137, { base: 16, octaves: 5, gain: 0.72 })
          : new Tile(29, { octaves: 7, gain: 0.54 }),
    );
  }
  return tiles.get(kind);
}

/** White noise blurred to a grain clump of `sigma` pixels, periodic, deviation 1. */
export function grainTile(size, sigma, seed) {
  const key = `g${size}:${sigma.toFixed(2)}:${seed}`;
  if (!tiles.has(key)) {
    const r = rng(seed);
    let d = new Float32Array(size * size);
    for (let i = 0; i < d.length; i++) d[i] = r.gauss();
    const rad = Math.max(1, Math.ceil(sigma * 3)),
      k = [];
    for (let i = -rad; i <= rad; i++) k.push(Math.exp(-(i * i) / (2 * sigma * sigma)));
    for (let pass = 0; pass < 2; pass++) {
      const o = new Float32Array(d.length);
      for (let y = 0; y < size; y++)
        for (let x = 0; x < size; x++) {
          let s = 0;
          for (let i = -rad; i <= rad; i++) s += k[i + rad] * d[y * size + ((x + i + size) % size)];
          o[x * size + y] = s;
        }
      d = o;
    }
    normalise(d);
    tiles.set(key, d);
  }
  return tiles.get(key);
}

export const clamp = (v, lo = 0, hi = 1) => (v < lo ? lo : Math.min(v, hi));
export const mix = (a, b, t) => a + (b - a) * t;
export const smooth = (lo, hi, v) => {
  const t = clamp((v - lo) / (hi - lo));
  return t * t * (3 - 2 * t);
};
