// Still water, reeds, floods.
import { clamp, mix, smooth, tile } from "../noise.mjs";
import { blur } from "../plate.mjs";
import { drawTree, grassEdge, growTree, limbLight, treeLine } from "../trees.mjs";
import { mist, sky, streaks } from "./common.mjs";

export const flood = {
  look: { ev: 0.12, contrast: 1.14, vignette: 0.34 },
  paint(p, r) {
    const yw = r.range(0.36, 0.42),
      A = p.A,
      gx = r.range(0.3, 0.7);
    sky(p, r, { top: 0.34, low: 0.95, at: yw * 1.1, gx, gy: yw, glow: 0.35, size: 0.4, cloud: 0.03 });
    streaks(p, r, { vx: gx, yh: yw, strength: 0.22, freq: 0.7, along: 0.02, to: yw });
    const far = (x) => yw - 0.004 + 0.002 * tile("soft").at(x * 0.3, 0.3);
    treeLine(p, r, far, { size: 0.035, tone: 0.62, fill: 0.5, gap: 0.5 });
    treeLine(p, r, () => yw, { from: A * 0.6, to: A * 1.05, size: 0.05, tone: 0.42, fill: 0.45, gap: 0.42 });
    mist(p, r, {
      tone: 0.92,
      amount: (_x, y) => 0.85 * Math.exp(-(((y - yw) / 0.028) ** 2)),
      y0: yw - 0.1,
      y1: yw + 0.1,
    });
    p.reflect(yw, { ripple: 0.001, spread: 0.12, dim: 0.97, deep: 0.6, seed: 3 });
    // long exposure lays a slow shimmer on the surface
    const n = tile("soft"),
      c = tile("cloud"),
      o = r.next();
    p.wash(
      (x, y) => {
        const z = 1 / (y - yw + 0.03);
        return (
          1 +
          0.05 * n.at((x - 0.5) * z * 0.03 + o, z * 0.04) +
          0.035 * c.at((x - 0.5) * z * 0.02, z * 0.12 + o)
        );
      },
      "multiply",
      4,
      yw,
      1,
    );
    // the fence walks out into the water
    const vx = A * (gx < 0.5 ? r.range(0.6, 0.68) : r.range(0.34, 0.4)),
      nx = A * (gx < 0.5 ? r.range(0.2, 0.3) : r.range(0.72, 0.8));
    const posts = [],
      N = 11;
    for (let i = 0; i < N; i++) {
      const z = 1 + i * 0.95 + r.range(-0.1, 0.1),
        s = 1 / z,
        y = yw + 0.005 + 0.47 * s;
      posts.push({
        x: mix(vx, nx, s) + r.gauss() * 0.006 * s,
        y,
        s,
        tilt: r.gauss() * 0.07 + (i === 3 ? 0.16 : 0),
        hgt: (0.235 + r.gauss() * 0.02) * s,
        w: 0.0125 * s * r.range(0.85, 1.15),
      });
    }
    posts.reverse();
    const light = limbLight(gx < 0.5 ? -1 : 1, 0.35, 0.5);
    const fine = tile("fine");
    const post = (q, _k, up) => {
      const fog = mix(0.5, 0.018, smooth(0.08, 0.5, q.s)),
        dy = up ? -q.hgt : q.hgt * 0.92,
        tx = q.x + q.tilt * q.hgt;
      if (up) {
        // split and weathered: grain runs up it, and one side has the light
        const k0 = r.next();
        const upright = [
          [q.x, q.y, q.w],
          [mix(q.x, tx, 0.5) + r.gauss() * q.w * 0.06, q.y + dy * 0.5, q.w * r.range(0.95, 1.02)],
          [tx, q.y + dy, q.w * 0.94],
        ];
        p.limb(upright, (u, X, y) => {
          const round = Math.asin(u) * 0.5;
          const up = (q.y - y) / q.hgt;
          const grain =
            0.5 * fine.at(round * 0.16 + k0, up * 0.1) +
            0.4 * fine.at(round * 0.42 + k0, up * 0.28 + k0) +
            0.3 * c.at(round * 0.3 + X * 0.1, up * 0.5 + k0);
          const wet = mix(0.45, 1, smooth(0.05, 0.3, up + 0.05 * c.at(round * 0.4, k0)));
          return mix(
            fog,
            fog * 1.6 * light[((u + 1) * 16) | 0] * Math.exp(0.75 * grain) * wet,
            smooth(0.1, 0.5, q.s),
          );
        });
        p.dab(tx, q.y + dy, q.w * 0.94, q.w * 0.24, fog * 2.2, 0.8, 0.2);
      } else {
        const pts = [
          [tx + 0.002, Math.min(1.1, q.y + dy * 1.25), q.w * 1.15],
          [q.x, q.y, q.w],
        ];
        p.limb(pts, (_u, _X, y, old) =>
          mix(old, fog * 1.3 + 0.02, 0.85 * Math.exp(-(((y - q.y) / (q.hgt * 0.95)) ** 2))),
        );
      }
    };
    for (const q of posts) post(q, 0, false);
    for (let i = 0; i < posts.length; i++) {
      const a = posts[i],
        b = posts[i + 1];
      if (b)
        for (const hgt of [0.86, 0.5]) {
          const fog = mix(0.55, 0.03, smooth(0.08, 0.5, a.s)),
            pts = [],
            rp = [];
          for (let k = 0; k <= 10; k++) {
            const t = k / 10,
              sag = 0.018 * a.s * 4 * t * (1 - t) * (hgt < 0.6 ? 1.8 : 1),
              s = mix(a.hgt, b.hgt, t) * hgt;
            const x = mix(a.x + a.tilt * a.hgt * hgt, b.x + b.tilt * b.hgt * hgt, t);
            pts.push([x, mix(a.y, b.y, t) - s + sag]);
            rp.push([x, mix(a.y, b.y, t) + s - sag]);
          }
          p.line(rp, 0.0008 * a.s, 0.0008 * b.s, fog * 1.4, 0.4);
          p.line(pts, 0.0011 * a.s, 0.0011 * b.s, fog);
        }
      post(a, 0, true);
      p.dab(a.x, a.y + 0.001 * a.s, a.w * 2.2, 0.0022 * a.s, 0.9, 0.4, 1);
    }
  },
};

export const reeds = {
  look: { ev: 0.1, contrast: 1.2, vignette: 0.28, glow: 0.05 },
  paint(p, r) {
    const n = tile("soft"),
      c = tile("cloud"),
      o = r.next(),
      A = p.A;
    p.wash((x, y) => mix(1.05, 0.4, smooth(0, 1.05, y)) * (1 + 0.07 * n.at(x * 0.2 + o, y * 0.3)), "set", 8);
    const stems = [],
      clusters = Array.from({ length: 7 }, () => [r.range(-0.05, 1.05) * A, r.range(0.02, 0.09)]);
    for (let i = 0; i < 92; i++) {
      const k = r.pick(clusters),
        depth = r.next(),
        x = r.chance(0.8) ? k[0] + r.gauss() * k[1] : r.range(0, A);
      stems.push({
        x,
        y: mix(0.18, 0.8, depth ** 0.8),
        s: mix(0.45, 1, depth),
        lean: r.gauss() * 0.11,
        bend: r.gauss() * 0.38,
        len: r.range(0.16, 0.46),
        broken: r.chance(0.13),
        ang: r.range(0.7, 2.2) * r.pick([-1, 1]),
        w: r.range(0.0011, 0.0024),
      });
    }
    stems.sort((a, b) => a.y - b.y);
    const curve = (s, up) => {
      const pts = [],
        N = 14;
      let x = s.x,
        y = s.y,
        a = s.lean;
      const brk = s.broken ? Math.floor(N * r.range(0.35, 0.7)) : 99;
      const l = (s.len * s.s) / N;
      for (let i = 0; i <= N; i++) {
        pts.push([x, up ? y : 2 * s.y - y]);
        if (i === brk) a += s.ang;
        a += (s.bend / N) * (i > brk ? 2 : 1);
        x += Math.sin(a) * l;
        y -= Math.cos(a) * l;
        if (y > s.y && i > 1) {
          pts.push([x, up ? y : 2 * s.y - y]);
          break;
        }
      }
      return pts;
    };
    // reflections first, wavering with distance from the stem's foot
    for (const s of stems) {
      s.pts = curve(s, true);
      const tone = mix(0.42, 0.05, s.s * s.s);
      const ref = [];
      for (let i = 0; i < s.pts.length - 1; i++)
        for (let k = 0; k < 5; k++) {
          const t = k / 5,
            x = mix(s.pts[i][0], s.pts[i + 1][0], t),
            y = 2 * s.y - mix(s.pts[i][1], s.pts[i + 1][1], t),
            d = y - s.y;
          ref.push([
            x +
              0.0028 * clamp(d * 5) * c.at(x * 0.12, y * 1.5 + o) +
              0.0013 * clamp(d * 8) * c.at(x * 0.3 + o, y * 4),
            y,
          ]);
        }
      p.line(ref, s.w * s.s, s.w * s.s * 0.8, tone * 1.25 + 0.03, 0.78);
    }
    p.wash((x, y) => 1 + 0.012 * c.at(x * 0.3, y * 1.3 + o), "multiply", 4);
    blur(p.px, p.w, p.h, p.h * 0.0005, p.h * 0.0011);
    for (const s of stems) {
      const tone = mix(0.3, 0.012, s.s * s.s);
      p.line(s.pts, s.w * s.s, s.w * s.s * 0.62, tone);
      for (let i = 3; i < s.pts.length - 1; i += 4)
        if (s.s > 0.6)
          p.dab(s.pts[i][0], s.pts[i][1], s.w * s.s * 1.35, s.w * s.s * 1.2, tone * 1.6, 0.8, 0.3);
      if (r.chance(0.14) && s.s > 0.55) {
        // a dead leaf
        const q = s.pts[Math.min(s.pts.length - 2, 5)],
          dir = r.pick([-1, 1]),
          leaf = [];
        const L = r.range(0.05, 0.12) * s.s;
        for (let i = 0; i <= 10; i++) {
          const t = i / 10;
          leaf.push([q[0] + dir * L * t, q[1] - L * 0.55 * Math.sin(t * 2.7) + L * 0.42 * t * t]);
        }
        p.line(leaf, s.w * 1.1 * s.s, s.w * 0.15, tone * 1.4);
        p.line(
          leaf.map(([x, y]) => [x, 2 * s.y - y]),
          s.w * s.s,
          s.w * 0.15,
          0.25,
          0.5,
        );
      }
      p.dab(
        s.x + r.gauss() * 0.001,
        s.y + 0.0008,
        r.range(0.003, 0.009) * s.s,
        0.0016 * s.s,
        1.15,
        r.range(0.25, 0.6),
        1,
      );
    }
  },
};

export const stage = {
  look: { ev: 0.1, vignette: 0.36 },
  paint(p, r) {
    const A = p.A,
      yw = r.range(0.38, 0.43),
      vx = A * r.range(0.46, 0.54);
    sky(p, r, { top: 0.2, low: 1.0, at: yw * 1.15, gx: vx / A, gy: yw, glow: 0.3, size: 0.3, cloud: 0.05 });
    streaks(p, r, { vx: 0.5, yh: yw, strength: 0.3, freq: 0.5, along: 0.02, to: yw });
    const n = tile("soft"),
      c = tile("cloud");
    p.hill(
      (x) =>
        yw -
        0.012 -
        0.03 * smooth(0.2, 1.1, x / A) * (1 + 0.3 * n.at(x * 0.2, 0.1)) -
        0.003 * c.at(x * 0.8, 0.4),
      (_x, _y, d) => mix(0.5, 0.75, clamp(d / 0.03)),
    );
    treeLine(p, r, () => yw, { from: -0.05, to: A * 0.36, size: 0.04, tone: 0.34, fill: 0.5, gap: 0.4 });
    mist(p, r, {
      tone: 1.0,
      amount: (_x, y) => 0.9 * Math.exp(-(((y - yw) / 0.022) ** 2)),
      y0: yw - 0.08,
      y1: yw + 0.08,
    });
    p.reflect(yw, { ripple: 0.001, spread: 0.25, dim: 0.95, deep: 0.42 });
    const o = r.next();
    p.wash(
      (x, y) => {
        const z = 1 / (y - yw + 0.04);
        return 1 + 0.05 * c.at((x - 0.5) * z * 0.02 + o, z * 0.11);
      },
      "multiply",
      4,
      yw,
      1,
    );
    // boards in perspective, each slightly its own
    const yEnd = yw + 0.085,
      tip = yEnd;
    const P = (u, z) => {
      const y = yw + 0.62 / z;
      return [vx + (u * 0.3) / z, y];
    };
    const z0 = 0.9,
      z1 = 0.62 / (tip - yw);
    const posts = [
      [-1.08, z1, 0.55],
      [1.08, z1, 0.5],
      [-1.08, z1 * 0.55, 0.5],
      [1.08, z1 * 0.55, 0.53],
      [-1.1, z1 * 0.3, 0.5],
      [1.1, z1 * 0.3, 0.52],
    ];
    for (const [u, z, hgt] of posts) {
      const q = P(u, z),
        w = 0.036 / z,
        L = (hgt * 0.5) / z;
      p.limb(
        [
          [q[0], q[1] + L, w * 1.15],
          [q[0], q[1], w],
        ],
        (_a, _X, y, old) => mix(old, 0.03, 0.85 * Math.exp(-(((y - q[1]) / (L * 0.6)) ** 2))),
      );
    }
    // shadow side and its reflection
    p.poly(
      [
        [
          [P(-1, z0)[0], P(-1, z0)[1] + 0.1],
          [P(-1, z1)[0], P(-1, z1)[1] + 0.012],
          [P(1, z1)[0], P(1, z1)[1] + 0.012],
          [P(1, z0)[0], P(1, z0)[1] + 0.1],
        ],
      ],
      0.012,
      0.9,
    );
    const step = 0.105,
      wood = tile("fine");
    for (let z = z1, _i = 0; z > z0 - 0.4; z -= step, _i++) {
      const g = 0.014,
        l = 1 + r.gauss() * 0.025,
        rr = 1 + r.gauss() * 0.025,
        base = 0.15 * Math.exp(r.gauss() * 0.3),
        oo = r.next(),
        dz = r.gauss() * 0.006;
      const a = P(-l, z + dz),
        b = P(rr, z - dz),
        d = P(rr, z - step + g - dz),
        e = P(-l, z - step + g + dz);
      p.poly([[a, b, d, e]], (x, y) => {
        const zz = 0.62 / (y - yw),
          u = (x - vx) * zz;
        return (
          base *
          Math.exp(
            0.2 * wood.at(u * 0.16 + oo, zz * 1.5 + oo) +
              0.22 * wood.at(u * 0.3 + oo, zz * 6 + oo) * clamp(3 / zz) +
              0.15 * c.at(u * 0.5 + oo, zz * 0.3),
          ) *
          (1 + 0.55 * smooth(1, 4, zz))
        );
      });
      p.stroke(e[0], e[1], d[0], d[1], 0.0016 / z, 0.0016 / z, 0.006, 0.006, 0.9);
    }
    const light = limbLight(-1, 0.25, 0.4);
    for (const [u, z, hgt] of posts) {
      const q = P(u, z),
        w = 0.036 / z,
        H = (hgt * 0.42) / z,
        tilt = r.gauss() * 0.03 * H;
      p.limb(
        [
          [q[0], q[1] + 0.03 / z, w],
          [q[0] + tilt, q[1] - H, w * 0.95],
        ],
        (a, _X, y) => {
          const k = Math.asin(a) * w * 7;
          return (
            0.085 *
            light[((a + 1) * 16) | 0] *
            Math.exp(0.34 * wood.at(k * 1.4 + u, y * 0.22 + z) + 0.25 * c.at(k + u, y * 0.4 + z)) *
            (1 - 0.6 * smooth(q[1] - 0.05 / z, q[1], y))
          );
        },
      );
      p.dab(q[0] + tilt, q[1] - H, w * 0.95, w * 0.32, 0.26, 1);
    }
  },
};

export const poplars = {
  look: { ev: 0.3, contrast: 1.12, glow: 0.12 },
  paint(p, r) {
    const A = p.A,
      yw = r.range(0.55, 0.6),
      gx = r.range(0.6, 0.75);
    sky(p, r, { top: 0.42, low: 1.05, at: yw, gx, gy: yw, glow: 0.3, cloud: 0.05 });
    streaks(p, r, { vx: -0.4, yh: yw + 0.3, strength: 0.4, freq: 0.55, along: 0.03, to: yw });
    treeLine(p, r, () => yw - 0.006, { size: 0.045, tone: 0.5, fill: 0.6, gap: 0.36 });
    mist(p, r, {
      tone: 0.95,
      amount: (_x, y) => 0.6 * Math.exp(-(((y - yw) / 0.04) ** 2)),
      y0: yw - 0.12,
      y1: yw + 0.02,
    });
    let x = A * r.range(0.08, 0.14),
      s = r.range(0.4, 0.46);
    for (let i = 0; x < A * 0.86; i++) {
      const t = mix(0.012, 0.1, x / A),
        tree = growTree({
          seed: 20 + (i % 4),
          crown: "poplar",
          points: 900,
          trunk: 0.1,
          step: 0.014,
          kill: 0.022,
          reach: 0.2,
          pull: [0, 0.9, 0],
          tip: 0.0009,
          twigs: 4,
          twigLen: 0.034,
          wobble: 0.1,
        });
      drawTree(p, tree, x, yw - 0.002, s * r.range(0.9, 1.08), { tone: t, flip: r.chance(0.5), thick: 2 });
      for (let k = 0; k < 90; k++) {
        const v = r.next();
        p.dab(x + r.gauss() * 0.017 * (1.2 - v), yw - s * (0.08 + 0.82 * v), 0.008, 0.026, t, 0.2, 1);
      }
      if (r.chance(0.15) && i > 2) x += 0.06;
      x += 0.083 * r.range(0.85, 1.2) * (s / 0.43);
      s *= 0.955;
    }
    p.hill(
      (q) => yw - 0.008 - 0.004 * tile("cloud").at(q * 0.5, 0.2),
      () => 0.03,
    );
    grassEdge(p, r, () => yw - 0.004, { n: 5200, len: 0.018, tone: [0.015, 0.05], drop: 0.004 });
    p.reflect(yw, { ripple: 0.004, spread: 0.05, dim: 0.9, deep: 0.5, seed: r.int(0, 90) });
    grassEdge(p, r, () => yw + 0.003, { n: 900, len: 0.012, tone: [0.02, 0.06] });
  },
};

export const stars = {
  look: { ev: 0.2, contrast: 1.05, vignette: 0.3, glow: 0.07, grain: 1.1 },
  paint(p, r) {
    const A = p.A,
      yw = r.range(0.66, 0.7),
      px = A * r.range(0.36, 0.64),
      py = r.range(0.25, 0.36);
    p.map(
      (x, y) =>
        mix(0.018, 0.11, smooth(0.1, yw, y)) *
        (1 + 0.8 * Math.exp(-(((x - A * 0.85) / 0.5) ** 2)) * smooth(0.2, yw, y)),
    );
    const arc = r.range(0.48, 0.56),
      n = tile("soft"),
      o = r.next();
    for (let i = 0; i < 1300; i++) {
      const q = 0.012 + 1.15 * Math.sqrt(r.next()),
        a0 = r.range(0, 6.283),
        mag = 1.7 * Math.exp(-4.6 * r.next() ** 0.6) + 0.05,
        w = 0.00032 + 0.00042 * Math.sqrt(mag) * r.range(0.6, 1);
      const N = Math.max(6, Math.ceil(q * arc * 90));
      let X = px + Math.cos(a0) * q,
        Y = py + Math.sin(a0) * q;
      for (let k = 1; k <= N; k++) {
        const a = a0 + (arc * k) / N,
          x = px + Math.cos(a) * q,
          y = py + Math.sin(a) * q;
        if (y < yw && x > -0.02 && x < A + 0.02)
          p.stroke(
            X,
            Y,
            x,
            y,
            w,
            w,
            mag * 1.5,
            undefined,
            clamp(0.75 * (1 + 0.25 * n.at(x + o, y)) * (1 - 0.55 * smooth(0.35, yw, y))),
          );
        X = x;
        Y = y;
      }
    }
    mist(p, r, {
      tone: 0.12,
      amount: (_x, y) => 0.75 * Math.exp(-(((y - yw) / 0.06) ** 2)),
      y0: yw - 0.25,
      y1: yw,
    });
    treeLine(p, r, () => yw - 0.01, { size: 0.05, tone: 0.028, fill: 0.7, gap: 0.3 });
    const tree = growTree({
      seed: 40 + r.int(0, 2),
      crown: "broad",
      points: 900,
      trunk: 0.25,
      kill: 0.04,
      tip: 0.0011,
      twigs: 3,
    });
    drawTree(p, tree, A * (px < A / 2 ? 0.78 : 0.22), yw, r.range(0.34, 0.42), {
      tone: 0.004,
      thick: 1.2,
      flip: r.chance(0.5),
    });
    treeLine(p, r, () => yw, {
      from: px < A / 2 ? A * 0.55 : -0.1,
      to: px < A / 2 ? A * 1.1 : A * 0.45,
      size: 0.09,
      tone: 0.005,
      fill: 0.8,
      gap: 0.3,
    });
    p.hill(
      (x) => yw - 0.006 - 0.004 * tile("cloud").at(x * 0.4, 0.7),
      () => 0.004,
    );
    p.reflect(yw, { ripple: 0.0025, spread: 0.07, dim: 0.7, deep: 0.42, body: 0.004, seed: 5, cap: 0.13 });
    mist(p, r, {
      tone: 0.13,
      amount: (_x, y) => 0.55 * Math.exp(-(((y - yw - 0.012) / 0.016) ** 2)),
      y0: yw - 0.03,
      y1: yw + 0.08,
      rough: 0.6,
      scale: 2,
    });
    grassEdge(p, r, () => 1.02, { n: 2600, len: 0.09, tone: [0.002, 0.012], width: 0.0009, lean: 0.1 });
  },
};
