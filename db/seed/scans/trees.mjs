// Trees grown by space colonisation in three dimensions, thickened by the pipe model, finished with twigs.
import { rng } from "./noise.mjs";

const CROWNS = {
  // each returns a point inside the crown; the tree stands at the origin and is 1 high
  round: (r) => {
    const p = ball(r);
    return [p[0] * 0.42, 0.64 + p[1] * 0.36, p[2] * 0.42];
  },
  broad: (r) => {
    const p = ball(r);
    return [p[0] * 0.58, 0.6 + p[1] * 0.4, p[2] * 0.5];
  },
  tall: (r) => {
    const p = ball(r);
    return [p[0] * 0.27, 0.6 + p[1] * 0.4, p[2] * 0.27];
  },
  poplar: (r) => {
    const p = ball(r);
    const y = p[1] * 0.46;
    return [p[0] * 0.095 * (1 - 0.35 * p[1]), 0.54 + y, p[2] * 0.095];
  },
  wind: (r) => {
    // wedge swept to the right, flat beneath, as on an open down
    for (;;) {
      const x = r.range(-0.3, 0.85),
        y = r.range(0.36, 1),
        z = r.range(-0.34, 0.34);
      const roof = 0.98 - 0.55 * (x - 0.12) ** 2 - (x < 0.05 ? (0.05 - x) * 0.9 : 0),
        floor = 0.46 + 0.2 * Math.abs(x - 0.1);
      if (y < roof - z * z * 1.2 && y > floor && Math.abs(z) < 0.34 - 0.22 * Math.abs(x - 0.15))
        return [x, y, z];
    }
  },
  cup: (r) => {
    const a = r.range(0, 6.283),
      q = 0.2 + 0.36 * Math.sqrt(r.next()),
      y = 0.42 + 0.58 * r.next();
    return [Math.cos(a) * q * (0.5 + y * 0.6), y - q * 0.25, Math.sin(a) * q];
  },
};
function ball(r) {
  for (;;) {
    const p = [r.range(-1, 1), r.range(-1, 1), r.range(-1, 1)],
      d = p[0] * p[0] + p[1] * p[1] + p[2] * p[2];
    if (d < 1 && (d > 0.22 || r.chance(0.35))) return p;
  }
}

/** How many lumps a crown is made of; crowns not named are filled evenly. */
const LUMPS = { round: 9, broad: 9, tall: 9 };
const cache = new Map();

/** Returns { n, seg }: seg holds x0 y0 x1 y1 r0 r1 z per piece, thickest first, y upwards. */
export function growTree({
  seed = 1,
  crown = "round",
  points = 700,
  trunk = 0.3,
  lean = 0,
  step = 0.02,
  kill = 0.045,
  reach = 0.3,
  pull = [0, 0.12, 0],
  tip = 0.0011,
  pipe = 2.35,
  twigs = 3,
  twigLen = 0.05,
  wobble = 0.16,
}) {
  // everything the tree depends on: a frame must not depend on which frames were drawn before it
  const key = JSON.stringify([
    seed,
    crown,
    points,
    trunk,
    lean,
    step,
    kill,
    reach,
    pull,
    tip,
    pipe,
    twigs,
    twigLen,
    wobble,
  ]);
  if (cache.has(key)) return cache.get(key);
  const r = rng(seed * 7919 + 13);
  const most = 9600;
  const X = new Float64Array(most);
  const Y = new Float64Array(most);
  const Z = new Float64Array(most);
  const P = new Int32Array(most);
  P[0] = -1;
  let n = 1;
  let vx = lean;
  let vz = 0;
  while (Y[n - 1] < trunk) {
    vx += r.range(-1, 1) * wobble * 0.22 + (lean - vx) * 0.1;
    vz += r.range(-1, 1) * wobble * 0.22 - vz * 0.1;
    const l = step / Math.sqrt(vx * vx + 1 + vz * vz);
    X[n] = X[n - 1] + vx * l;
    Y[n] = Y[n - 1] + l;
    Z[n] = Z[n - 1] + vz * l;
    P[n] = n - 1;
    n++;
  }
  const ax = new Float64Array(points);
  const ay = new Float64Array(points);
  const az = new Float64Array(points);
  const near = new Int32Array(points);
  const nd = new Float64Array(points).fill(Infinity);
  // lumps and gaps: no crown is a clean ellipsoid
  const lumps =
    LUMPS[crown] && Array.from({ length: LUMPS[crown] }, () => [...CROWNS[crown](r), r.range(0.1, 0.21)]);
  const inLump = (p) =>
    !lumps || lumps.some((l) => (p[0] - l[0]) ** 2 + (p[1] - l[1]) ** 2 + (p[2] - l[2]) ** 2 < l[3] * l[3]);
  for (let i = 0; i < points; i++) {
    let p = CROWNS[crown](r);
    for (let k = 0; k < 12 && !inLump(p); k++) p = CROWNS[crown](r);
    ax[i] = p[0] + lean * 0.3;
    ay[i] = p[1];
    az[i] = p[2];
  }
  // points still to be reached, kept close together
  const left = Int32Array.from({ length: points }, (_, a) => a);
  let waiting = points;
  const kids = new Int32Array(most * 3).fill(-1);
  const sx = new Float64Array(most);
  const sy = new Float64Array(most);
  const sz = new Float64Array(most);
  const drawn = new Int32Array(most);
  const full = new Uint8Array(most);
  let from = 0;
  for (let round = 1; round <= 160; round++) {
    let kept = 0;
    for (let m = 0; m < waiting; m++) {
      const a = left[m];
      const px = ax[a];
      const py = ay[a];
      const pz = az[a];
      let best = nd[a];
      for (let i = from; i < n; i++) {
        const dx = X[i] - px;
        const dy = Y[i] - py;
        const dz = Z[i] - pz;
        const d = dx * dx + dy * dy + dz * dz;
        if (d < best) {
          best = d;
          near[a] = i;
        }
      }
      nd[a] = best;
      if (best >= kill * kill) left[kept++] = a;
    }
    waiting = kept;
    from = n;
    const lim = round <= 12 ? 9 : reach * reach;
    const pulled = [];
    for (let m = 0; m < waiting; m++) {
      const a = left[m];
      if (nd[a] > lim) continue;
      const i = near[a];
      const l = Math.sqrt(nd[a]) || 1;
      if (drawn[i] !== round) {
        drawn[i] = round;
        pulled.push(i);
        sx[i] = sy[i] = sz[i] = 0;
      }
      sx[i] += (ax[a] - X[i]) / l;
      sy[i] += (ay[a] - Y[i]) / l;
      sz[i] += (az[a] - Z[i]) / l;
    }
    if (!pulled.length) break;
    const before = n;
    let stuck = false;
    for (const i of pulled) {
      let l = Math.sqrt(sx[i] * sx[i] + sy[i] * sy[i] + sz[i] * sz[i]) || 1;
      // keep some of the parent's heading so that limbs sweep instead of kinking
      const p = P[i];
      const q = p >= 0 ? 0.45 / step : 0;
      const dx = sx[i] / l + pull[0] + (p >= 0 ? (X[i] - X[p]) * q : 0) + r.range(-1, 1) * wobble;
      const dy = sy[i] / l + pull[1] + (p >= 0 ? (Y[i] - Y[p]) * q : 0) + r.range(-1, 1) * wobble;
      const dz = sz[i] / l + pull[2] + (p >= 0 ? (Z[i] - Z[p]) * q : 0) + r.range(-1, 1) * wobble;
      l = step / (Math.sqrt(dx * dx + dy * dy + dz * dz) || 1);
      const x = X[i] + dx * l;
      const y = Y[i] + dy * l;
      const z = Z[i] + dz * l;
      // a node forks at most three ways, and never twice the same way
      let slot = 0;
      let crowded = false;
      for (; slot < 3 && kids[i * 3 + slot] >= 0; slot++) {
        const j = kids[i * 3 + slot];
        if ((X[j] - x) ** 2 + (Y[j] - y) ** 2 + (Z[j] - z) ** 2 < step * step * 0.3) crowded = true;
      }
      if (crowded || slot > 2 || n >= most) {
        full[i] = 1;
        stuck = true;
        continue;
      }
      kids[i * 3 + slot] = n;
      X[n] = x;
      Y[n] = y;
      Z[n] = z;
      P[n] = i;
      n++;
    }
    if (stuck) {
      kept = 0;
      for (let m = 0; m < waiting; m++) if (!full[near[left[m]]]) left[kept++] = left[m];
      waiting = kept;
      full.fill(0, 0, n);
    }
    if (n === before && !stuck) break;
    if (n > 9000) break;
  }
  const area = new Float64Array(n);
  const end = tip ** pipe;
  for (let i = n - 1; i > 0; i--) {
    if (area[i] === 0) area[i] = end;
    area[P[i]] += area[i];
  }
  const rad = area.map((v) => v ** (1 / pipe));
  const flare = (k) => 1 + 0.6 * Math.exp(-Y[k] / 0.03);
  const out = new Pieces();
  for (let i = 1; i < n; i++) {
    const p = P[i];
    // a child leaves a much thicker parent at its own thickness
    const rp = Math.min(rad[p], rad[i] * 1.25);
    out.push(X[p], Y[p], X[i], Y[i], rp * flare(p), rad[i] * flare(i), Z[i]);
    if (rad[i] < tip * 3.2 && twigs > 0) {
      const count = r.next() < twigs % 1 ? Math.ceil(twigs) : Math.floor(twigs);
      const base = Math.atan2(Y[i] - Y[p], X[i] - X[p]);
      for (let c = 0; c < count; c++) {
        const a = base + r.range(-1.1, 1.1);
        sprig(out, r, X[i], Y[i], a, twigLen * r.range(0.4, 1.2), tip * 0.72, Z[i], 0);
      }
    }
  }
  const tree = out.thickestFirst();
  cache.set(key, tree);
  return tree;
}

/** Pieces of a tree as they are made, seven numbers each. */
class Pieces {
  n = 0;
  d = new Float32Array(7 * 16384);

  push(x0, y0, x1, y1, r0, r1, z) {
    let k = this.n++ * 7;
    if (k + 7 > this.d.length) {
      const more = new Float32Array(this.d.length * 2);
      more.set(this.d);
      this.d = more;
    }
    const d = this.d;
    d[k++] = x0;
    d[k++] = y0;
    d[k++] = x1;
    d[k++] = y1;
    d[k++] = r0;
    d[k++] = r1;
    d[k] = z;
  }

  thickestFirst() {
    const { n, d } = this;
    // the order of equal pieces is that of their making: sorted as whole numbers, thickness above place
    const keys = new Float64Array(n);
    for (let i = 0; i < n; i++) keys[i] = -Math.round(d[i * 7 + 4] * 1e7) * 1048576 + i;
    keys.sort();
    const seg = new Float32Array(n * 7);
    let top = 0;
    for (let i = 0; i < n; i++) {
      const k = (((keys[i] % 1048576) + 1048576) % 1048576) * 7;
      for (let m = 0; m < 7; m++) seg[i * 7 + m] = d[k + m];
      top = Math.max(top, d[k + 3]);
    }
    return { n, seg, top };
  }
}

function sprig(out, r, x, y, a, len, rad, z, depth) {
  const n = 3;
  const bend = r.range(-0.35, 0.35);
  for (let i = 0; i < n; i++) {
    const l = len / n,
      nx = x + Math.cos(a) * l,
      ny = y + Math.sin(a) * l;
    out.push(x, y, nx, ny, rad, rad * 0.8, z);
    x = nx;
    y = ny;
    rad *= 0.8;
    a += bend + r.range(-0.2, 0.2);
    if (depth < 1 && r.chance(0.55))
      sprig(out, r, x, y, a + r.pick([-1, 1]) * r.range(0.4, 0.9), len * 0.55, rad * 0.8, z, depth + 1);
  }
}

/**
 * Stand a tree at (x, y), `size` high. tone: number or fn(height 0..1, z). frost > 0 lays light on the
 * upper sides and twigs.
 */
export function drawTree(
  p,
  tree,
  x,
  y,
  size,
  {
    tone = 0.02,
    flip = false,
    alpha = 1,
    frost = 0,
    frostTone = 0.9,
    thick = 1,
    min = 0,
    rot = 0,
    lut = null,
  } = {},
) {
  const { seg, n } = tree,
    s = size / Math.max(0.9, tree.top),
    f = flip ? -s : s,
    fn = typeof tone === "function";
  const c = Math.cos(rot),
    d = Math.sin(rot),
    px = 1 / p.h;
  for (let i = 0, k = 0; i < n; i++, k += 7) {
    const r0 = seg[k + 4] * s * thick,
      r1 = seg[k + 5] * s * thick;
    if (r0 < min) break;
    const ax = seg[k] * f,
      ay = seg[k + 1] * s,
      bx = seg[k + 2] * f,
      by = seg[k + 3] * s;
    const x0 = x + ax * c + ay * d,
      y0 = y - ay * c + ax * d,
      x1 = x + bx * c + by * d,
      y1 = y - by * c + bx * d;
    const t = fn ? tone(seg[k + 3], seg[k + 6]) : tone;
    const wide = r0 > px * 1.2;
    if (seg[k + 1] < 0.03) p.stroke(x0, y0, x1, y1, r0, r1, t, t, alpha, wide ? lut : null);
    else p.branch(x0, y0, x1, y1, r0, r1, t, alpha, wide ? lut : null);
    if (frost > 0) {
      const up = Math.abs(bx - ax) / (Math.sqrt((bx - ax) ** 2 + (by - ay) ** 2) + 1e-9),
        w = Math.min(r0, size * 0.0016) + 0.00007;
      if (wide && up < 0.35) continue;
      p.stroke(
        x0,
        y0 - r0 * 0.7,
        x1,
        y1 - r1 * 0.7,
        w * (0.4 + 0.6 * up),
        w * (0.4 + 0.6 * up),
        frostTone,
        frostTone,
        frost * (wide ? 0.25 + 0.6 * up : 0.9),
      );
    }
  }
}

/** Half-cylinder light for limbs: bright on `side` (-1 left, 1 right), darker at the edges. */
export function limbLight(side = -1, ambient = 0.5, rim = 0.15) {
  const t = new Float32Array(33);
  for (let i = 0; i < 33; i++) {
    const u = (i - 16) / 16,
      nz = Math.sqrt(Math.max(0, 1 - u * u));
    t[i] =
      ambient + (1 - ambient) * Math.max(0, u * side * 0.75 + nz * 0.55) + rim * Math.max(0, u * side) ** 6;
  }
  return t;
}

/** A far wood or hedgerow along base(x): many small tree shapes of one tone. */
export function treeLine(
  p,
  r,
  base,
  {
    from = 0,
    to = p.A,
    size = 0.05,
    vary = 0.65,
    tone = 0.1,
    gap = 0.55,
    alpha = 1,
    kinds = ["round", "broad", "tall"],
    fill = 0.4,
    full = false,
  },
) {
  const fn = typeof tone === "function";
  if (fill > 0)
    copse(p, r, base, {
      from,
      to,
      size: size * (full ? 0.6 : 0.34),
      vary: 0.6,
      gap: 0.5,
      tone,
      alpha: alpha * Math.min(0.85, fill * 1.2),
    });
  for (let x = from; x < to; ) {
    const s = size * r.range(1 - vary, 1 + vary),
      y = base(x),
      t = fn ? tone(x) : tone;
    const tree = growTree({
      seed: r.int(1, 3),
      crown: r.pick(kinds),
      points: 420,
      step: 0.026,
      kill: 0.05,
      twigs: 3,
      twigLen: 0.06,
      tip: 0.0018,
      trunk: 0.14,
    });
    drawTree(p, tree, x, y + s * 0.04, s, { tone: t, flip: r.chance(0.5), alpha, thick: 1.2 });
    x += s * gap * r.range(0.4, 1.7);
  }
}

/** Distant trees and hedges along base(x): ragged domes that sit on the ground, with a few twigs. */
export function copse(
  p,
  r,
  base,
  { from = 0, to = p.A, size = 0.03, vary = 0.5, gap = 0.5, tone = 0.1, alpha = 0.9 },
) {
  const fn = typeof tone === "function";
  for (let x = from; x < to; ) {
    const s = size * r.range(1 - vary, 1 + vary),
      y = base(x),
      t = fn ? tone(x) : tone,
      wide = r.range(0.3, 0.55),
      tall = r.chance(0.12) ? 1.35 : 1;
    // detail depends on size in pixels, so it draws from a stream of its own
    const d = rng(r.int(0, 1e9));
    if (x > -s && x < p.A + s && y < 1 + s) {
      p.dab(x, y - s * 0.2, s * wide * 0.9, s * 0.36, t, alpha, 0.5);
      const n = s * p.h < 9 ? 9 : s * p.h < 30 ? 40 : 130;
      for (let i = 0; i < n; i++) {
        const a = d.range(0, Math.PI),
          q = Math.sqrt(d.next()),
          v = s * (n < 10 ? d.range(0.07, 0.14) : d.range(0.02, 0.085));
        p.dab(
          x + Math.cos(a) * q * s * wide,
          y - s * 0.14 - Math.sin(a) * q * s * 0.76 * tall,
          v * 1.1,
          v * 0.85,
          t,
          alpha * 0.8,
          0.5,
        );
      }
      if (s * p.h > 9)
        for (let i = 0; i < n; i++) {
          const a = d.range(0.15, Math.PI - 0.15),
            q = d.range(0.75, 1.02),
            X = x + Math.cos(a) * q * s * wide,
            Y = y - s * 0.14 - Math.sin(a) * q * s * 0.76 * tall,
            L = s * d.range(0.06, 0.17),
            b = -a + d.gauss() * 0.5;
          p.stroke(X, Y, X + Math.cos(b) * L, Y + Math.sin(b) * L, s * 0.006, s * 0.002, t, t, alpha);
        }
    }
    x += s * gap * r.range(0.35, 1.7);
  }
}

/** Far winter trees on a skyline: real crowns, unevenly spaced in clumps, over a low uneven hedge. */
export function hanger(
  p,
  r,
  base,
  { from = 0, to = p.A, size = 0.03, gap = 0.5, tone = 0.1, alpha = 1, hedge = 0.3, thick = 1.25 },
) {
  const fn = typeof tone === "function";
  if (hedge > 0)
    copse(p, r, base, { from, to, size: size * hedge, vary: 0.45, gap: 0.4, tone, alpha: 0.9 * alpha });
  for (let x = from; x < to; ) {
    const s = size * (0.55 + 0.75 * r.next() ** 1.4);
    const tree = growTree({
      seed: 30 + r.int(0, 3),
      crown: r.pick(["round", "broad", "tall"]),
      points: 420,
      trunk: 0.12,
      step: 0.024,
      kill: 0.044,
      tip: 0.0015,
      pipe: 2.25,
      twigs: 3,
      twigLen: 0.05,
      wobble: 0.22,
    });
    const flip = r.chance(0.5);
    if (x > -s && x < p.A + s)
      drawTree(p, tree, x, base(x) + s * 0.03, s, { tone: fn ? tone(x) : tone, flip, alpha, thick });
    // clumps and openings
    x += s * gap * (r.chance(0.14) ? r.range(2.5, 7) : r.range(0.4, 1.3));
  }
}

/** Blades of grass along base(x). */
export function grassEdge(
  p,
  r,
  base,
  {
    from = 0,
    to = p.A,
    n = 4000,
    len = 0.02,
    tone = [0.02, 0.06],
    lean = 0.15,
    width = 0.0005,
    alpha = 0.9,
    drop = 0,
  },
) {
  for (let i = 0; i < n; i++) {
    const x = r.range(from, to),
      d = drop * r.next() ** 1.5,
      y = base(x) + d,
      l = len * r.range(0.35, 1.25),
      a = lean + r.gauss() * 0.28;
    const t = r.range(tone[0], tone[1]),
      mx = x + Math.sin(a) * l * 0.55,
      my = y - Math.cos(a) * l * 0.55;
    p.stroke(x, y, mx, my, width, width * 0.7, t, t, alpha);
    p.stroke(
      mx,
      my,
      mx + Math.sin(a * 1.8) * l * 0.45,
      my - Math.cos(a * 1.8) * l * 0.45,
      width * 0.7,
      width * 0.2,
      t,
      t * 1.25,
      alpha,
    );
  }
}
