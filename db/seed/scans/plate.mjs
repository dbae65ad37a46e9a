// A plate of linear light and the few drawing operations the scenes use.
// Coordinates are in picture heights: y 0..1 downwards, x 0..A (A = width / height).
import { clamp, tile } from "./noise.mjs";

export class Plate {
  /** `px`, if given, is cleared and used instead of new memory. */
  constructor(w, h, px = new Float32Array(w * h)) {
    this.w = w;
    this.h = h;
    this.A = w / h;
    this.air = 1; // how thick the mist is, 1 as the scene was drawn
    this.px = px.fill(0);
  }

  /** Replace each pixel between rows y0 and y1 by fn(x, y, old). */
  map(fn, y0 = 0, y1 = 1) {
    const { w, h, px } = this,
      s = 1 / h;
    const a = Math.max(0, Math.floor(y0 * h)),
      b = Math.min(h, Math.ceil(y1 * h));
    for (let j = a; j < b; j++) {
      const y = (j + 0.5) * s;
      for (let i = 0, k = j * w; i < w; i++, k++) px[k] = fn((i + 0.5) * s, y, px[k]);
    }
  }

  /**
   * Lays a slowly changing field over rows y0 to y1: fn(x, y) is evaluated on a grid of `div` pixels at 3000
   * (wider on larger plates, so that the work does not grow with the file) and interpolated.
   * mode: "set", "multiply", "add", "veil" (mix towards `tone`) or a function of (old, value).
   */
  wash(fn, mode, div = 4, y0 = 0, y1 = 1, tone = 0) {
    const { w, h, px } = this;
    const s = 1 / h;
    const step = Math.max(1, Math.round((div * Math.max(w, h)) / 3000));
    const a = Math.max(0, Math.floor(y0 * h));
    const b = Math.min(h, Math.ceil(y1 * h));
    if (b <= a) return;
    const gw = Math.ceil(w / step) + 2;
    const gh = Math.ceil((b - a) / step) + 2;
    const g = new Float32Array(gw * gh);
    for (let j = 0; j < gh; j++)
      for (let i = 0; i < gw; i++) g[j * gw + i] = fn(i * step * s, (a + j * step) * s);
    const row = new Float32Array(w);
    for (let j = a; j < b; j++) {
      coarseRow(g, gw, step, j - a, row);
      const k = j * w;
      if (mode === "set") px.set(row, k);
      else if (mode === "multiply") for (let i = 0; i < w; i++) px[k + i] *= row[i];
      else if (mode === "add") for (let i = 0; i < w; i++) px[k + i] += row[i];
      else if (mode === "veil") for (let i = 0; i < w; i++) px[k + i] += (tone - px[k + i]) * row[i];
      else for (let i = 0; i < w; i++) px[k + i] = mode(px[k + i], row[i]);
    }
  }

  /** A slowly changing fn(x, y), worked out every `div` pixels at 3000 and interpolated: cheap to ask often. */
  field(fn, div = 6) {
    const { w, h } = this;
    const step = Math.max(1, Math.round((div * Math.max(w, h)) / 3000));
    const gw = Math.ceil(w / step) + 2;
    const gh = Math.ceil(h / step) + 2;
    const g = new Float32Array(gw * gh);
    for (let j = 0; j < gh; j++)
      for (let i = 0; i < gw; i++) g[j * gw + i] = fn((i * step) / h, (j * step) / h);
    const scale = h / step;
    return (x, y) => {
      const fx = Math.max(0, Math.min(gw - 1.001, x * scale));
      const fy = Math.max(0, Math.min(gh - 1.001, y * scale));
      const i = fx | 0;
      const j = fy | 0;
      const q = j * gw + i;
      const tx = fx - i;
      const a = g[q] + (g[q + 1] - g[q]) * tx;
      const b = g[q + gw] + (g[q + gw + 1] - g[q + gw]) * tx;
      return a + (b - a) * (fy - j);
    };
  }

  /**
   * Everything below the line top(x), antialiased; tone(x, y, depthBelowLine, old). `hidden`, if given, holds a y
   * for each column from which something painted later will cover it.
   */
  hill(top, tone, hidden = null) {
    const { w, h, px } = this;
    const s = 1 / h;
    const t = new Float32Array(w);
    const end = new Float32Array(w).fill(h);
    let lo = h;
    let hi = 0;
    for (let i = 0; i < w; i++) {
      t[i] = top((i + 0.5) * s) * h;
      if (hidden) end[i] = Math.min(h, hidden[i] * h + 2);
      lo = Math.min(lo, t[i]);
      hi = Math.max(hi, end[i]);
    }
    for (let j = Math.max(0, Math.floor(lo)); j < hi; j++) {
      const y = (j + 0.5) * s;
      for (let i = 0, k = j * w; i < w; i++, k++) {
        const c = j + 1 - t[i];
        if (c <= 0 || j > end[i]) continue;
        const v = tone((i + 0.5) * s, y, (j + 0.5 - t[i]) * s, px[k]);
        px[k] = c >= 1 ? v : px[k] + (v - px[k]) * c;
      }
    }
  }

  /**
   * Tapered stroke. r0, r1 are half widths. lut (33 values over the width, left to right or top to
   * bottom) shades the stroke as a round limb.
   */
  stroke(x0, y0, x1, y1, r0, r1, t0, t1 = t0, alpha = 1, lut = null) {
    const { w, h, px } = this;
    x0 *= h;
    y0 *= h;
    x1 *= h;
    y1 *= h;
    r0 *= h;
    r1 *= h;
    const dx = x1 - x0,
      dy = y1 - y0,
      len = Math.sqrt(dx * dx + dy * dy);
    if (len < 1e-6) return;
    const steep = Math.abs(dy) >= Math.abs(dx);
    // a runs along the major axis, b across it
    let a0 = steep ? y0 : x0,
      a1 = steep ? y1 : x1,
      b0 = steep ? x0 : y0,
      b1 = steep ? x1 : y1;
    if (a0 > a1) {
      let q = a0;
      a0 = a1;
      a1 = q;
      q = b0;
      b0 = b1;
      b1 = q;
      q = r0;
      r0 = r1;
      r1 = q;
      q = t0;
      t0 = t1;
      t1 = q;
    }
    // wide pieces end on whole rows so that joints in a limb leave no seam
    if (r0 > 0.8 && r1 > 0.6) {
      a0 = Math.round(a0);
      a1 = Math.round(a1);
      if (a0 === a1) return;
    }
    const am = steep ? h : w,
      bm = steep ? w : h,
      da = a1 - a0,
      inv = 1 / da,
      k = len * inv;
    const js = Math.max(0, Math.floor(a0)),
      je = Math.min(am, Math.ceil(a1));
    for (let j = js; j < je; j++) {
      const lo = Math.max(j, a0),
        hi = Math.min(j + 1, a1),
        cov = hi - lo;
      if (cov <= 0) continue;
      const t = ((lo + hi) * 0.5 - a0) * inv,
        c = b0 + (b1 - b0) * t,
        hw = (r0 + (r1 - r0) * t) * k;
      const s0 = c - hw,
        s1 = c + hw,
        tone = t0 + (t1 - t0) * t;
      if (s1 <= 0 || s0 >= bm) continue;
      const is = s0 > 0 ? Math.floor(s0) : 0,
        ie = s1 < bm ? Math.ceil(s1) : bm,
        ca = cov * alpha;
      for (let i = is; i < ie; i++) {
        const l = Math.max(i, s0),
          r = Math.min(i + 1, s1);
        const p = steep ? j * w + i : i * w + j;
        let v = tone;
        if (lut) {
          let q = ((i + 0.5 - c) / hw + 1) * 16;
          q = q < 0 ? 0 : Math.min(q, 32);
          v *= lut[q | 0];
        }
        px[p] += (v - px[p]) * (r - l) * ca;
      }
    }
  }

  /** A piece of a branch: round-ended when it is wide enough to show its ends, a stroke otherwise. */
  branch(x0, y0, x1, y1, r0, r1, tone, alpha = 1, lut = null) {
    const { w, h, px } = this;
    if (alpha < 1 || r0 * h < 1.1) return this.stroke(x0, y0, x1, y1, r0, r1, tone, tone, alpha, null);
    x0 *= h;
    y0 *= h;
    x1 *= h;
    y1 *= h;
    r0 *= h;
    r1 *= h;
    const dx = x1 - x0,
      dy = y1 - y0,
      l2 = dx * dx + dy * dy || 1e-9,
      m = Math.max(r0, r1) + 1,
      flip = (Math.abs(dy) >= Math.abs(dx) ? -Math.sign(dy) : Math.sign(dx)) || 1;
    const j0 = Math.max(0, Math.floor(Math.min(y0, y1) - m)),
      j1 = Math.min(h - 1, Math.ceil(Math.max(y0, y1) + m));
    const i0 = Math.max(0, Math.floor(Math.min(x0, x1) - m)),
      i1 = Math.min(w - 1, Math.ceil(Math.max(x0, x1) + m)),
      il = 1 / Math.sqrt(l2);
    const level = Math.abs(dy) < 0.2 * Math.abs(dx);
    const reach = level ? 0 : (m * Math.sqrt(l2)) / Math.abs(dy);
    for (let j = j0; j <= j1; j++) {
      // unless it lies nearly flat, a row crosses only a short stretch of the box round the piece
      const mid = level ? 0 : x0 + (dx * (j + 0.5 - y0)) / dy;
      const from = level ? i0 : Math.max(i0, Math.floor(mid - reach) - 1);
      const to = level ? i1 : Math.min(i1, Math.ceil(mid + reach));
      for (let i = from; i <= to; i++) {
        const ax = i + 0.5 - x0,
          ay = j + 0.5 - y0,
          t = clamp((ax * dx + ay * dy) / l2),
          ex = ax - dx * t,
          ey = ay - dy * t,
          r = r0 + (r1 - r0) * t,
          c = r + 0.5 - Math.sqrt(ex * ex + ey * ey);
        if (c <= 0) continue;
        let v = tone;
        if (lut) v *= lut[((clamp(((dx * ay - dy * ax) * il * flip) / r, -1, 1) + 1) * 16) | 0];
        const k = j * w + i;
        px[k] += (v - px[k]) * Math.min(c, 1);
      }
    }
  }

  /** Upright limb through [x, y, r] points given from foot to top; shade(u, x, y, old) with u -1..1 across. */
  limb(pts, shade) {
    const { w, h, px } = this,
      s = 1 / h;
    for (let n = 0; n + 1 < pts.length; n++) {
      const [x0, y0, r0] = pts[n + 1],
        [x1, y1, r1] = pts[n],
        a = y0 * h,
        b = y1 * h;
      for (let j = Math.max(0, Math.ceil(a - 0.5)); j < Math.min(h, Math.ceil(b - 0.5)); j++) {
        const t = (j + 0.5 - a) / (b - a),
          c = (x0 + (x1 - x0) * t) * h,
          q = (r0 + (r1 - r0) * t) * h,
          lo = c - q,
          hi = c + q;
        for (let i = Math.max(0, Math.floor(lo)); i < Math.min(w, Math.ceil(hi)); i++) {
          const cov = Math.min(i + 1, hi) - Math.max(i, lo),
            k = j * w + i;
          px[k] +=
            (shade(clamp((i + 0.5 - c) / q, -1, 1), (i + 0.5) * s, (j + 0.5) * s, px[k]) - px[k]) * cov;
        }
      }
    }
  }

  line(pts, r0, r1, tone, alpha = 1, lut = null) {
    const n = pts.length - 1;
    for (let i = 0; i < n; i++) {
      const a = r0 + (r1 - r0) * (i / n),
        b = r0 + (r1 - r0) * ((i + 1) / n);
      this.stroke(pts[i][0], pts[i][1], pts[i + 1][0], pts[i + 1][1], a, b, tone, tone, alpha, lut);
    }
  }

  /** Ellipse with an edge that is hard (soft = 0) to fully feathered (soft = 1). */
  dab(x, y, rx, ry, tone, alpha = 1, soft = 0) {
    const { w, h, px } = this;
    x *= h;
    y *= h;
    rx *= h;
    ry *= h;
    const edge = Math.max(soft, 1 / Math.max(1, Math.min(rx, ry)));
    const j0 = Math.max(0, Math.floor(y - ry)),
      j1 = Math.min(h - 1, Math.ceil(y + ry));
    const i0 = Math.max(0, Math.floor(x - rx)),
      i1 = Math.min(w - 1, Math.ceil(x + rx));
    for (let j = j0; j <= j1; j++) {
      const v = (j + 0.5 - y) / ry,
        vv = v * v;
      for (let i = i0; i <= i1; i++) {
        const u = (i + 0.5 - x) / rx,
          d = u * u + vv;
        if (d >= 1) continue;
        let a = (1 - Math.sqrt(d)) / edge;
        a = a > 1 ? alpha : a * a * (3 - 2 * a) * alpha;
        const k = j * w + i;
        px[k] += (tone - px[k]) * a;
      }
    }
  }

  /** Filled polygons with exact area coverage; tone is a number or fn(x, y, old). */
  poly(polys, tone, alpha = 1) {
    const { w, h, px } = this;
    let top = h,
      bot = 0,
      left = w,
      right = 0;
    for (const p of polys)
      for (const [x, y] of p) {
        top = Math.min(top, y * h);
        bot = Math.max(bot, y * h);
        left = Math.min(left, x * h);
        right = Math.max(right, x * h);
      }
    top = Math.max(0, Math.floor(top));
    bot = Math.min(h, Math.ceil(bot));
    left = Math.max(0, Math.floor(left));
    right = Math.min(w, Math.ceil(right) + 1);
    if (bot <= top || right <= left) return;
    // a band of rows at a time: the sums stay small whatever the size of the polygon
    const width = right - left;
    const W = width + 2;
    const band = 64;
    const acc = new Float32Array(W * Math.min(band, bot - top) + 2);
    const fn = typeof tone === "function";
    const s = 1 / h;
    const turns = polys.map((p) => {
      let area = 0;
      for (let i = 0; i < p.length; i++) {
        const a = p[i];
        const b = p[(i + 1) % p.length];
        area += a[0] * b[1] - b[0] * a[1];
      }
      return area < 0 ? -1 : 1;
    });
    for (let from = top; from < bot; from += band) {
      const rows = Math.min(band, bot - from);
      if (from > top) acc.fill(0);
      for (let n = 0; n < polys.length; n++) {
        const p = polys[n];
        for (let i = 0; i < p.length; i++) {
          const a = p[i];
          const b = p[(i + 1) % p.length];
          const ya = a[1] * h - from;
          const yb = b[1] * h - from;
          if ((ya < 0 && yb < 0) || (ya > rows && yb > rows)) continue;
          edge(acc, W, width, rows, a[0] * h - left, ya, b[0] * h - left, yb, turns[n]);
        }
      }
      for (let j = 0; j < rows; j++) {
        let c = 0;
        for (let i = 0, k = (from + j) * w + left, q = j * W; i < width; i++, k++, q++) {
          c += acc[q];
          const m = c < 0 ? -c : c;
          if (m < 0.002) continue;
          const v = fn ? tone((left + i + 0.5) * s, (from + j + 0.5) * s, px[k]) : tone;
          px[k] += (v - px[k]) * Math.min(m, 1) * alpha;
        }
      }
    }
  }

  /** Still or ruffled water below yw mirrors what stands above it. */
  reflect(
    yw,
    {
      ripple = 0.006,
      scale = 1,
      dim = 0.86,
      deep = 0.55,
      spread = 0.03,
      body = 0.012,
      seed = 0,
      still = 0.02,
      cap = 1e9,
    } = {},
  ) {
    const { w, h, px } = this;
    const n = tile("cloud");
    const s = 1 / h;
    const j0 = Math.ceil(yw * h);
    const o = (seed % 97) / 97;
    const last = j0 - 1;
    const rows = h - j0;
    // by blocks of columns, so that a block and its running sums stay in the cache
    const block = 128;
    const tmp = new Float32Array(rows * block);
    const sum = new Float32Array((rows + 1) * block);
    const grid = 8;
    for (let i0 = 0; i0 < w; i0 += block) {
      const bw = Math.min(block, w - i0);
      for (let j = j0; j < h; j++) {
        const d = (j + 0.5) * s - yw;
        const p = 1 / (d + still);
        const amp = ripple * clamp(d * 6 + 0.08) * h;
        const fx = (0.22 * p * scale) / (1 + 0.06 * p * p * still);
        const vy = 0.16 * p * scale + o;
        const base = last - (j - j0);
        let shift = n.at(((i0 + 0.5) * s - this.A / 2) * fx + o, vy) * amp;
        for (let i = 0, q = (j - j0) * block; i < bw; i += grid) {
          const end = Math.min(grid, bw - i);
          const next = n.at(((i0 + i + grid + 0.5) * s - this.A / 2) * fx + o, vy) * amp;
          const slope = (next - shift) / grid;
          for (let k = 0; k < end; k++, q++) {
            let f = base + shift + slope * k;
            f = f < 0 ? -f : f;
            if (f > last - 1) f = last > 1 ? last - 1 : 0;
            const r = f | 0;
            const m = r * w + i0 + i + k;
            let v = px[m];
            v += (px[m + w] - v) * (f - r);
            tmp[q] = Math.min(v, cap);
          }
          shift = next;
        }
      }
      // the image lengthens with distance from the bank: running sums give any window
      for (let pass = 0; pass < 2; pass++) {
        for (let j = 0, q = 0; j < rows; j++)
          for (let i = 0; i < block; i++, q++) sum[q + block] = sum[q] + tmp[q];
        for (let j = 0; j < rows; j++) {
          const win = spread * j * 0.8 + 0.6;
          const a = Math.max(0, Math.floor(j - win)) * block;
          const b = Math.min(rows, Math.ceil(j + win) + 1) * block;
          const inv = block / (b - a);
          const q = j * block;
          for (let i = 0; i < block; i++) tmp[q + i] = (sum[b + i] - sum[a + i]) * inv;
        }
      }
      for (let j = 0; j < rows; j++) {
        const d = (j + 0.5) * s;
        const k = dim + (deep - dim) * clamp(d * 1.6);
        const q = j * block;
        const m = (j0 + j) * w + i0;
        for (let i = 0; i < bw; i++) px[m + i] = tmp[q + i] * k + body;
      }
    }
  }

  /** Throws the whole plate out of focus; sigma in picture heights. */
  defocus(sigma) {
    const { w, h, px } = this;
    const { g, gw, k } = softened(px, w, h, (sigma * h) / 5, (f, fw, fh, k) =>
      blur(f, fw, fh, (sigma * h) / k),
    );
    const row = new Float32Array(w);
    for (let j = 0; j < h; j++) {
      coarseRow(g, gw, k, j, row);
      px.set(row, j * w);
    }
  }
}

function edge(acc, W, w, h, x0, y0, x1, y1, sgn) {
  if (y0 === y1) return;
  let dir = sgn;
  if (y0 > y1) {
    let t = x0;
    x0 = x1;
    x1 = t;
    t = y0;
    y0 = y1;
    y1 = t;
    dir = -sgn;
  }
  const dxdy = (x1 - x0) / (y1 - y0);
  let x = x0;
  if (y0 < 0) x -= y0 * dxdy;
  const je = Math.min(h, Math.ceil(y1));
  for (let j = Math.max(0, Math.floor(y0)); j < je; j++) {
    const dy = Math.min(j + 1, y1) - Math.max(j, y0),
      nx = x + dxdy * dy,
      d = dy * dir;
    let a = Math.min(x, nx),
      b = Math.max(x, nx);
    a = a < 0 ? 0 : Math.min(a, w);
    b = b < 0 ? 0 : Math.min(b, w);
    const q = j * W,
      ai = Math.floor(a),
      bi = Math.ceil(b);
    if (bi <= ai + 1) {
      const m = 0.5 * (a + b) - ai;
      acc[q + ai] += d - d * m;
      acc[q + ai + 1] += d * m;
    } else {
      const s = 1 / (b - a),
        af = a - ai,
        a0 = 0.5 * s * (1 - af) * (1 - af),
        bf = b - bi + 1,
        am = 0.5 * s * bf * bf;
      acc[q + ai] += d * a0;
      if (bi === ai + 2) acc[q + ai + 1] += d * (1 - a0 - am);
      else {
        const a1 = s * (1.5 - af);
        acc[q + ai + 1] += d * (a1 - a0);
        for (let i = ai + 2; i < bi - 1; i++) acc[q + i] += d * s;
        acc[q + bi - 1] += d * (1 - (a1 + (bi - ai - 3) * s) - am);
      }
      acc[q + bi] += d * am;
    }
    x = nx;
  }
}

/** Gaussian-like blur in place: three running means each way, sigma in pixels. */
export function blur(px, w, h, sx, sy = sx) {
  if (sx >= 0.3) for (const r of boxes(sx)) boxH(px, w, h, r);
  if (sy >= 0.3) for (const r of boxes(sy)) boxV(px, w, h, r);
}

function boxes(s) {
  let lo = Math.floor(Math.sqrt(4 * s * s + 1));
  if (lo % 2 === 0) lo--;
  const m = Math.round((12 * s * s - 3 * lo * lo - 12 * lo - 9) / (-4 * lo - 4));
  return [0, 1, 2].map((i) => ((i < m ? lo : lo + 2) - 1) / 2).filter((r) => r > 0);
}

function boxH(px, w, h, r) {
  const row = new Float32Array(w),
    inv = 1 / (2 * r + 1);
  for (let j = 0; j < h; j++) {
    const q = j * w;
    for (let i = 0; i < w; i++) row[i] = px[q + i];
    let s = row[0] * r;
    for (let i = 0; i < r; i++) s += row[i < w ? i : w - 1];
    for (let i = 0; i < w; i++) {
      const a = i + r,
        b = i - r - 1;
      s += row[a < w ? a : w - 1];
      px[q + i] = s * inv;
      s -= row[Math.max(b + 1, 0)];
    }
  }
}

function boxV(px, w, h, r) {
  const ring = 2 * r + 1,
    inv = 1 / ring,
    buf = new Float32Array(ring * w),
    s = new Float32Array(w);
  const put = (j, slot) => {
    const q = clamp(j, 0, h - 1) * w,
      o = slot * w;
    for (let i = 0; i < w; i++) {
      const v = px[q + i];
      buf[o + i] = v;
      s[i] += v;
    }
  };
  for (let j = -r; j < r; j++) put(j, j + r);
  for (let j = 0; j < h; j++) {
    const slot = (j + 2 * r) % ring;
    put(j + r, slot);
    const q = j * w,
      o = (j % ring) * w;
    // the row about to leave the window lies in slot j mod ring
    for (let i = 0; i < w; i++) {
      px[q + i] = s[i] * inv;
      s[i] -= buf[o + i];
    }
  }
}

/** Mean over k x k blocks; the last row and column of blocks may be smaller. */
export function shrink(px, w, h, k) {
  const gw = Math.ceil(w / k);
  const gh = Math.ceil(h / k);
  const g = new Float32Array(gw * gh);
  for (let J = 0; J < gh; J++) {
    const je = Math.min(h, (J + 1) * k);
    for (let j = J * k; j < je; j++)
      for (let I = 0, i = j * w, end = i; I < gw; I++) {
        end = Math.min(end + k, j * w + w);
        let sum = 0;
        for (; i < end; i++) sum += px[i];
        g[J * gw + I] += sum;
      }
    for (let I = 0; I < gw; I++) g[J * gw + I] /= (je - J * k) * (Math.min(w, (I + 1) * k) - I * k);
  }
  return { g, gw, gh };
}

/**
 * The plate reduced by about `by`, treated there, and laid out with its samples at multiples of k, for coarseRow.
 * treat(field, width, height, k) changes the reduced field in place.
 */
export function softened(px, w, h, by, treat) {
  const k = Math.max(1, Math.round(by));
  const { g: f, gw: fw, gh: fh } = shrink(px, w, h, k);
  treat(f, fw, fh, k);
  if (k === 1) {
    // one more row and column, for the interpolation to lean on
    const g = new Float32Array((fw + 2) * (fh + 2));
    for (let j = 0; j < fh + 2; j++) {
      const q = Math.min(j, fh - 1) * fw;
      for (let i = 0; i < fw + 2; i++) g[j * (fw + 2) + i] = f[q + Math.min(i, fw - 1)];
    }
    return { g, gw: fw + 2, k };
  }
  const gw = fw + 2;
  const gh = fh + 2;
  const g = new Float32Array(gw * gh);
  // the middle of a block lies half a block off the grid of samples
  for (let j = 0; j < gh; j++) {
    const a = clamp(j - 1, 0, fh - 1) * fw;
    const b = Math.min(j, fh - 1) * fw;
    for (let i = 0; i < gw; i++) {
      const l = clamp(i - 1, 0, fw - 1);
      const r = Math.min(i, fw - 1);
      g[j * gw + i] = 0.25 * (f[a + l] + f[a + r] + f[b + l] + f[b + r]);
    }
  }
  return { g, gw, k };
}

/** One row of a coarse field, `step` pixels to a cell, interpolated to full width into `row`. */
export function coarseRow(g, gw, step, j, row) {
  const w = row.length;
  const fy = j / step;
  const jy = Math.floor(fy);
  const ty = fy - jy;
  const r0 = jy * gw;
  const r1 = r0 + gw;
  const inv = 1 / step;
  let v = g[r0] + (g[r1] - g[r0]) * ty;
  for (let i = 0, c = 1; i < w; c++) {
    const next = g[r0 + c] + (g[r1 + c] - g[r0 + c]) * ty;
    const slope = (next - v) * inv;
    const end = Math.min(i + step, w);
    for (let t = v; i < end; i++, t += slope) row[i] = t;
    v = next;
  }
}
