// Woods and orchards.
import { clamp, mix, smooth, tile } from "../noise.mjs";
import { drawTree, growTree } from "../trees.mjs";
import { groundNoise, mist, sky } from "./common.mjs";

/** A bough with side shoots, thinning as it goes; shoots alternate, as on a beech. */
function bough(p, r, x, y, a, len, rad, tone, depth, lift = -0.5) {
  const n = depth > 1 ? 14 : depth > 0 ? 9 : 5;
  let s = r.pick([-1, 1]),
    turn = 0;
  for (let i = 0; i < n; i++) {
    const l = len / n,
      nx = x + Math.cos(a) * l,
      ny = y + Math.sin(a) * l,
      nr = Math.max(rad * 0.9, 0.00028);
    p.branch(x, y, nx, ny, rad, nr, tone);
    x = nx;
    y = ny;
    rad = nr;
    turn = turn * 0.6 + r.gauss() * 0.07;
    a += turn + lift * 0.05 - Math.sin(a) * 0.015;
    if (depth > 0 && i > 0 && r.chance(0.85)) {
      bough(
        p,
        r,
        x,
        y,
        a + s * r.range(0.5, 0.95),
        len * r.range(0.22, 0.46) * (1.1 - (i / n) * 0.5),
        Math.max(rad * 0.5, 0.0003),
        tone,
        depth - 1,
        lift * 0.3,
      );
      s = -s;
    }
  }
}

/**
 * A wood in fog. `long`: seen through a long lens, trunks only, the ground below the frame.
 */
function wood(p, r, long) {
  const A = p.A,
    yh = long ? 1.35 : r.range(0.66, 0.71),
    gx = A * (long ? r.range(0.25, 0.75) : r.range(0.38, 0.66)),
    gy = r.range(0.34, 0.48),
    dens = r.range(0.3, 0.4);
  const n = tile("soft"),
    c = tile("cloud"),
    f = tile("fine"),
    o = r.next();
  const fw = long ? 0.62 : 0.36;
  // brightest at one place; looked up, for it is asked of every pixel of every trunk
  const fh = long ? 0.75 : 0.4;
  const across = Float32Array.from({ length: 2048 }, (_, i) => Math.exp(-(((i / 1024 - gx) / fw) ** 2)));
  const down = Float32Array.from({ length: 2048 }, (_, i) => Math.exp(-(((i / 1024 - gy) / fh) ** 2)));
  const step = (v) => Math.max(0, Math.min(2047, v * 1024)) | 0;
  const fog = (x, y) => 0.42 + 0.72 * across[step(x)] * down[step(y)];
  p.wash((x, y) => fog(x, y) * (1 + 0.06 * n.at(x * 0.3 + o, y * 0.3)), "set", 12);
  const leafTone = (x, _y, e) =>
    mix(fog(x, yh), r.pick([0.012, 0.03, 0.06, 0.11, 0.2]) * (0.5 + fog(x, gy)), clamp(e));
  if (!long) {
    const ground = groundNoise(r, { yh, freq: 1.6, A });
    const edge = (x) => yh + 0.012 * n.at(x * 0.25 + o, 0.4) + 0.004 * c.at(x * 0.5, o);
    p.hill(edge, (x, y) => {
      const z = 0.3 / (y - yh + 0.03),
        e = Math.exp(-(z - 1) * dens * 0.9),
        g = ground(x, y);
      return mix(fog(x, Math.min(y, yh)), 0.085 * Math.exp(0.42 * g) * (0.7 + 0.9 * fog(x, gy)), clamp(e));
    });
    // leaf litter
    for (let i = 0; i < 26000; i++) {
      const u = r.next() ** 0.8,
        y = yh + 0.015 + (1.02 - yh) * u,
        z = 0.3 / (y - yh + 0.03),
        s = (0.0042 / z) * r.range(0.5, 1.25),
        x = r.range(0, A),
        e = Math.exp(-(z - 1) * dens * 0.9);
      p.dab(x, y, s * r.range(0.5, 1), s * r.range(0.16, 0.5), leafTone(x, y, e), 0.8, 0.15);
    }
  }
  const trunk = (x, z, lean) => {
    const e = Math.min(1, 1.12 * Math.exp(-(z - 1) * dens)),
      base = yh + 0.26 / z + r.gauss() * 0.006,
      w = (0.033 / z) * r.range(0.5, 1.35),
      side = x < gx ? 1 : -1;
    const tone = mix(fog(x, yh * 0.6) * 0.86, 0.024, e),
      near = w > 0.012;
    const pts = [],
      N = 60,
      k = r.next(),
      sw = r.range(0.5, 1.4);
    for (let i = 0; i <= N; i++) {
      const t = (i / N) ** 1.4,
        y = base - t * (base + 0.06);
      pts.push([
        x +
          lean * (base - y) +
          (0.014 * sw * n.at(k, y * 0.35)) / Math.sqrt(z) +
          (0.004 / z) * c.at(k, y * 0.5),
        y,
        w *
          (1 - 0.3 * t) *
          (1 + 0.05 * c.at(k + 0.3, y * 0.8)) *
          (1 + 0.22 * Math.exp(-(base - y) / (w * 4)) + 0.34 * Math.exp(-(base - y) / (w * 0.9))),
      ]);
    }
    // across the trunk: the turn of the surface and the light on it
    const turn = new Float32Array(513);
    const lit = new Float32Array(513);
    for (let i = 0; i < 513; i++) {
      const u = (i - 256) / 256;
      turn[i] = Math.asin(u) * w * 9;
      lit[i] = mix(1, 0.22 + 0.95 * Math.max(0, u * side * 0.75 + Math.sqrt(1 - u * u) * 0.4), e);
    }
    const close = w > 0.008;
    p.limb(pts, (u, X, y) => {
      const at = ((u + 1) * 256) | 0;
      const uw = turn[at];
      // smooth bark: slow blotches of lichen, damp runs down it, fine rings across it
      const tex = close
        ? 0.5 * c.at(uw * 0.4 + k, y * 0.7 + k) +
          0.32 * c.at(uw * 1.5 + k, y * 0.16) +
          0.26 * f.at(uw * 0.35 + k, y * 2.6) +
          0.2 * f.at(uw * 2.2, y * 2.2 + k)
        : 0.4 * c.at(uw + k, y * 0.4);
      const foot = 1 - 0.45 * Math.exp(-(base - y) / (w * 2.2));
      return (
        mix(fog(X, y) * 0.86, 0.03 * lit[at] * foot * Math.exp(tex * 0.8), e) * (1 + 0.1 * (1 - e) * u * side)
      );
    });
    const bark = tone * mix(1, 0.85, e);
    // the foot spreads into roots and is buried in litter
    if (z < 7) {
      p.dab(x, base, w * 1.62, w * 0.3, bark * 0.75, 1, 0.1);
      for (let i = 0; i < 7; i++) {
        const q = r.range(-1, 1),
          L = w * r.range(0.6, 1.5);
        p.branch(
          x + q * w * 1.1,
          base - w * 0.3,
          x + q * (w + L),
          base + w * (0.34 - 0.2 * Math.abs(q)),
          w * 0.24,
          w * 0.05,
          bark * mix(0.6, 1, q * side * 0.5 + 0.5),
        );
      }
      for (let i = 0; i < 560 / Math.sqrt(z); i++) {
        const q = r.gauss(),
          X = x + q * w * 1.35,
          Y = base + w * (0.36 - 0.16 * q * q - 0.5 * r.next() ** 2 + 0.3 * r.next()),
          s = (0.0045 / z) * r.range(0.5, 1.3);
        p.dab(X, Y, s * r.range(0.5, 1), s * r.range(0.2, 0.55), leafTone(X, Y, e), 0.9, 0.15);
      }
    }
    if (near) {
      // scars where boughs were shed
      for (let i = 0; i < 4; i++) {
        const q = pts[r.int(14, N - 2)],
          u = r.range(-0.5, 0.5);
        p.dab(q[0] + u * q[2], q[1], q[2] * 0.17, q[2] * 0.1, bark * 0.25, 0.75, 0.5);
        for (const m of [-1, 1])
          p.line(
            [
              [q[0] + u * q[2], q[1] - q[2] * 0.1],
              [q[0] + u * q[2] + m * q[2] * 0.22, q[1] + q[2] * 0.02],
              [q[0] + u * q[2] + m * q[2] * 0.34, q[1] + q[2] * 0.2],
            ],
            q[2] * 0.03,
            q[2] * 0.01,
            bark * 0.4,
            0.6,
          );
      }
    }
    const count = z > 6 ? 2 : z > 3.5 ? 4 : 6;
    for (let i = 0; i < count; i++) {
      const q = pts[r.int(Math.floor(N * 0.5), N - 1)],
        s = r.pick([-1, 1]);
      bough(
        p,
        r,
        q[0] + s * q[2] * 0.35,
        q[1],
        s > 0 ? -r.range(0.35, 1.05) : Math.PI + r.range(0.35, 1.05),
        r.range(0.25, 0.62) / z ** 0.75,
        w * r.range(0.08, 0.2),
        bark,
        z > 7 ? 1 : 2,
        s > 0 ? -0.5 : 0.5,
      );
    }
  };
  if (long) {
    // rank behind rank, each paler than the one in front
    for (let i = 0; i < 70; i++) trunk(r.range(-0.03, A + 0.03), r.range(6.5, 12), r.gauss() * 0.012);
    mist(p, r, { tone: 0.95, amount: (x, y) => 0.34 * fog(x, y), rough: 0.5 });
    for (let i = 0; i < 26; i++) trunk(A * ((i + r.next()) / 26), r.range(3.6, 5.6), r.gauss() * 0.014);
    mist(p, r, { tone: 0.97, amount: (x, y) => 0.2 * fog(x, y), rough: 0.5 });
    for (let i = 0; i < 9; i++) trunk(A * ((i + r.range(0.1, 0.9)) / 9), r.range(2, 2.9), r.gauss() * 0.012);
    const first = r.range(0.08, 0.2);
    for (const [at, z] of [
      [first, 1.15],
      [first + r.range(0.3, 0.42), 1.5],
      [r.range(0.8, 0.95), 1.0],
    ])
      trunk(A * at, z, r.gauss() * 0.01);
  } else {
    // far to near, mist between the ranks
    for (let i = 0; i < 46; i++) trunk(r.range(-0.03, A + 0.03), r.range(7, 14), r.gauss() * 0.012);
    mist(p, r, {
      tone: 0.9,
      amount: (x, y) =>
        0.35 * smooth(0.15, yh, y) * (0.5 + 0.5 * fog(x, y)) * smooth(yh + 0.13, yh + 0.02, y),
      y1: yh + 0.14,
    });
    for (let i = 0; i < 13; i++)
      trunk(A * ((i + r.range(0.05, 0.95)) / 13), r.range(4.2, 6.6), r.gauss() * 0.015);
    mist(p, r, {
      tone: 0.95,
      amount: (x, y) => 0.22 * smooth(0.3, yh, y) * (1 - smooth(yh, yh + 0.1, y)) * fog(x, y),
      y1: yh + 0.12,
      rough: 0.5,
    });
    // bramble and dead grass in loose clumps
    for (let k = 0; k < 26; k++) {
      const yb = yh + 0.07 + 0.27 * r.next(),
        z = 0.3 / (yb - yh + 0.03),
        xb = r.range(0, A),
        e = Math.exp(-(z - 1) * dens);
      for (let i = 0; i < 26; i++) {
        let x = xb + (r.gauss() * 0.03) / z,
          y = yb + (r.gauss() * 0.006) / z,
          a = -1.57 + r.gauss() * 0.6,
          rad = 0.0007 / z;
        const L = (0.07 / z) * r.range(0.3, 1.2),
          bend = r.gauss() * 0.34,
          t = mix(fog(x, yh), r.pick([0.015, 0.03, 0.1]), e);
        for (let q = 0; q < 6; q++) {
          const nx = x + (Math.cos(a) * L) / 6,
            ny = y + (Math.sin(a) * L) / 6;
          p.stroke(x, y, nx, ny, rad, rad * 0.85, t, t, 0.85);
          x = nx;
          y = ny;
          a += bend;
          rad *= 0.85;
          if (r.chance(0.3)) p.dab(x, y, 0.0022 / z, 0.0012 / z, t * 1.5, 0.8, 0.2);
        }
      }
    }
    const left = r.chance(0.5);
    const xs = left ? [0.09, 0.3, 0.72, 0.93] : [0.06, 0.24, 0.66, 0.9];
    const near = xs.map((q, i) => [
      A * (q + r.gauss() * 0.02),
      [1.2, 2.7, 1.9, 3.1][(i + (left ? 0 : 2)) % 4],
      r.gauss() * 0.012,
    ]);
    near.sort((a, b) => b[1] - a[1]);
    for (const t of near) trunk(...t);
  }
  // light falling through the rank of trunks
  p.wash(
    (x, y) => {
      const a = Math.atan2(x - gx, y + 0.25);
      return Math.max(0, 0.06 * n.at(a * 0.9 + o, 0.1) + 0.03 * n.at(a * 2.7, o)) * smooth(1.0, 0.3, y);
    },
    "add",
    6,
  );
}

export const beech = {
  look: { ev: 0.05, vignette: 0.24, glow: 0.1, contrast: 1.06 },
  paint: (p, r) => wood(p, r, false),
};

export const ranks = {
  look: { ev: 0.02, vignette: 0.26, glow: 0.1, contrast: 1.12 },
  paint: (p, r) => wood(p, r, true),
};

export const orchard = {
  look: { ev: 0.1, contrast: 1.1, vignette: 0.26, glow: 0.1 },
  paint(p, r) {
    const A = p.A;
    const yh = r.range(0.55, 0.59);
    const vx = A * r.range(0.4, 0.6);
    const n = tile("soft");
    const c = tile("cloud");
    const o = r.next();
    const fogTone = 0.8;
    const air = (z) => clamp(Math.exp(-(z - 1) * 0.34));
    sky(p, r, { top: 0.5, low: 0.86, at: yh, gx: vx / A, gy: yh - 0.1, glow: 0.16, size: 0.4, cloud: 0.06 });
    const g = groundNoise(r, { yh: yh - 0.02, freq: 2.6, A });
    // thin old snow, gone grey, with the grass coming through it between the rows
    p.hill(
      (x) => yh + 0.003 * n.at(x * 0.3, o),
      (x, y) => {
        const z = 0.28 / (y - yh + 0.012);
        const X = (x - vx) * z;
        const thaw = smooth(-0.5, 0.9, 1.1 * c.at(X * 0.12 + o, z * 0.09) + 0.7 * Math.cos(X * 6.83));
        return mix(fogTone, mix(0.62, 0.13, thaw) * Math.exp(0.26 * g(x, y)), air(z));
      },
    );
    for (let i = 0; i < 26000; i++) {
      const y = yh + 0.02 + (1.02 - yh) * r.next() ** 1.2;
      const z = 0.28 / (y - yh + 0.012);
      const x = r.range(0, A);
      const X = (x - vx) * z;
      const L = (0.0065 / z) * r.range(0.3, 1.2);
      const a = -1.57 + r.gauss() * 0.6;
      if (1.1 * c.at(X * 0.12 + o, z * 0.09) + 0.7 * Math.cos(X * 6.83) < r.gauss() * 0.35) continue;
      const t = mix(fogTone, r.pick([0.02, 0.04, 0.09, 0.2, 0.36]), air(z));
      p.stroke(x, y, x + Math.cos(a) * L, y + Math.sin(a) * L, 0.0003 / z + 0.00006, 0.0001 / z, t, t, 0.8);
    }
    const trees = [];
    for (let row = -5; row <= 5; row++)
      for (let k = 0; k < 8; k++)
        trees.push({
          X: (row + 0.5 + r.gauss() * 0.05) * 0.92,
          z: 1.12 + k * 0.78 + r.gauss() * 0.06,
          m: r.int(0, 4),
          f: r.chance(0.5),
          s: r.range(0.85, 1.15),
          l: r.gauss() * 0.07,
        });
    trees.sort((a, b) => b.z - a.z);
    let veil = 9;
    for (const t of trees) {
      const x = vx + (t.X * 0.62) / t.z;
      const y = yh + 0.28 / t.z - 0.012;
      const size = (0.62 / t.z) * t.s;
      if (t.z < veil) {
        // a breath of mist between one row of trees and the next
        mist(p, r, {
          tone: fogTone * 1.06,
          amount: (_x, v) => 0.16 * Math.exp(-(((v - yh - 0.02) / 0.07) ** 2)),
          y0: yh - 0.16,
          y1: yh + 0.2,
          rough: 0.6,
        });
        veil = t.z - 0.78;
      }
      if (x < -size * 0.6 || x > A + size * 0.6) continue;
      const e = air(t.z);
      const model = growTree({
        seed: 60 + t.m,
        crown: "cup",
        points: 760,
        trunk: 0.22,
        lean: 0.06,
        step: 0.018,
        kill: 0.038,
        pull: [0, 0.25, 0],
        tip: 0.0011,
        pipe: 2.12,
        twigs: 3.4,
        twigLen: 0.045,
        wobble: 0.3,
      });
      p.dab(x, y + 0.003 / t.z, size * 0.16, size * 0.018, mix(fogTone, 0.1, e), 0.5, 1);
      drawTree(p, model, x, y, size, {
        tone: mix(fogTone, 0.014, e ** 0.8),
        flip: t.f,
        rot: t.l,
        thick: 1.15,
        min: t.z > 2.4 ? 0.0001 : 0,
      });
      for (let i = 0; i < 46; i++) {
        const a = r.gauss() * 0.6 - 1.57;
        const L = size * 0.035 * r.range(0.4, 1.2);
        const q = x + r.gauss() * size * 0.03;
        const v = mix(fogTone, r.pick([0.03, 0.08, 0.2]), e);
        p.stroke(q, y + 0.006 / t.z, q + Math.cos(a) * L, y + Math.sin(a) * L, 0.0005 / t.z, 0.0002 / t.z, v);
      }
    }
  },
};
