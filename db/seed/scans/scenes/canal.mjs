// Canal and mill: built things, standing in water.
import { clamp, mix, rng, smooth, tile } from "../noise.mjs";
import { drawTree, grassEdge, growTree, limbLight, treeLine } from "../trees.mjs";
import { mist, sky, streaks } from "./common.mjs";

/** Courses of brick or block: tone multiplier at (u, v), with mortar and weather. */
function masonry(seed, { course, unit, joint = 0.12, vary = 0.28, mortar = 1.5, weather = 0.3 }) {
  const f = tile("fine"),
    c = tile("cloud"),
    tone = new Float32Array(4096),
    r = rng(seed);
  for (let i = 0; i < 4096; i++) tone[i] = Math.exp(r.gauss() * vary);
  return (u, v, px = 0) => {
    const row = Math.floor(v / course),
      fv = v / course - row,
      su = u / unit + (row & 1 ? 0.5 : 0) + ((row * 37) % 11) * 0.013,
      col = Math.floor(su),
      fu = su - col;
    const keep = clamp(course / (px + 1e-9) / 3 - 0.4),
      jw = (joint * course) / unit;
    const inJoint = fv < joint || fu < jw ? 1 : 0;
    const t = tone[(Math.imul(row, 131) + Math.imul(col, 17)) & 4095];
    const skin =
      mix(1, inJoint ? mortar : t, keep) * (1 + 0.14 * f.at(u * 2.1, v * 2.1) + 0.1 * f.at(u * 8.3, v * 8.3));
    return weather ? skin * Math.exp(weather * c.at(u * 0.35, v * 0.5)) : skin;
  };
}

export const bridge = {
  look: { ev: 0.1, contrast: 1.05, vignette: 0.26, glow: 0.1 },
  paint(p, r) {
    const A = p.A,
      yw = r.range(0.558, 0.572),
      cx = A * r.range(0.48, 0.52),
      R = r.range(0.322, 0.334),
      n = tile("soft"),
      c = tile("cloud"),
      px = 1 / p.h;
    sky(p, r, { top: 0.5, low: 1.15, at: yw, gx: cx / A, gy: yw - 0.1, glow: 0.3, size: 0.25, cloud: 0.05 });
    // beyond the arch: the cut runs on into mist
    treeLine(p, r, () => yw - 0.01, { size: 0.13, tone: 0.62, fill: 0.55, gap: 0.3, full: true });
    mist(p, r, { tone: 1.05, amount: (_x, y) => 0.55 * smooth(yw - 0.2, yw, y), y0: yw - 0.3, y1: yw });
    for (const s of [-1, 1]) {
      const q = rng(r.int(0, 1e6));
      treeLine(p, q, () => yw - 0.008, {
        from: s < 0 ? cx - 0.34 : cx + 0.12,
        to: s < 0 ? cx - 0.1 : cx + 0.36,
        size: 0.17,
        tone: 0.3,
        fill: 0.45,
        gap: 0.28,
        full: true,
      });
    }
    mist(p, r, {
      tone: 1.1,
      amount: (_x, y) => 0.75 * Math.exp(-(((y - yw) / 0.035) ** 2)),
      y0: yw - 0.12,
      y1: yw + 0.01,
    });
    // the towing path comes out of the mist along the right-hand bank
    const path = (x) => yw + 0.001 - 0.026 * smooth(cx + 0.02, cx + 0.5, x) ** 1.3;
    const pathTone = (x) => mix(0.85, 0.1, smooth(cx + 0.03, cx + 0.3, x));
    const bank = [];
    for (let k = 0; k <= 24; k++) bank.push([cx + 0.02 + 0.02 * k, path(cx + 0.02 + 0.02 * k)]);
    p.poly([[...bank, [cx + 0.5, yw + 0.01], [cx + 0.02, yw + 0.01]]], (x) => pathTone(x));
    for (let i = 0; i < 1500; i++) {
      const x = cx + 0.04 + 0.4 * r.next();
      const s = smooth(cx, cx + 0.35, x);
      const y = path(x) + 0.012 * s * r.next();
      const L = 0.011 * s * r.range(0.3, 1.2);
      const a = -1.57 + r.gauss() * 0.35;
      p.stroke(
        x,
        y,
        x + Math.cos(a) * L,
        y + Math.sin(a) * L,
        0.00042 * s,
        0.00015 * s,
        pathTone(x) * r.range(0.5, 1.3),
      );
    }
    // trees standing behind the parapet
    const road = (x) =>
      yw -
      R -
      0.106 -
      0.024 * Math.exp(-(((x - cx) / 0.32) ** 2)) +
      0.02 * smooth(0.3, 0.9, Math.abs(x - cx));
    for (let i = 0; i < 4; i++) {
      const x = A * [0.03, 0.2, 0.86, 1.0][i] + r.gauss() * 0.02;
      drawTree(
        p,
        growTree({
          seed: 120 + (i % 2),
          crown: i % 2 ? "tall" : "broad",
          points: 800,
          trunk: 0.2,
          kill: 0.04,
          tip: 0.001,
          twigs: 3,
        }),
        x,
        0.32,
        r.range(0.34, 0.42),
        { tone: mix(0.3, 0.12, i % 2), flip: i > 1 },
      );
    }
    // masonry with the arch cut out of it
    const N = 120,
      outer = [];
    for (let i = 0; i <= 40; i++) {
      const x = mix(-0.05, A + 0.05, i / 40);
      outer.push([x, road(x)]);
    }
    outer.push([A + 0.05, yw + 0.01], [cx + R, yw + 0.01]);
    for (let i = 0; i <= N; i++) {
      const a = (Math.PI * i) / N;
      outer.push([cx + Math.cos(a) * R, yw - Math.sin(a) * R]);
    }
    outer.push([cx - R, yw + 0.01], [-0.05, yw + 0.01]);
    const brick = masonry(r.int(1, 999), { course: 0.0125, unit: 0.038, weather: 0 });
    const ring = masonry(r.int(1, 999), { course: 0.017, unit: 0.0145, vary: 0.3, joint: 0.09, weather: 0 });
    // underside of the vault first: the far face is smaller and set to one side
    const fx = cx + r.pick([-1, 1]) * 0.012,
      fr = R * 0.8;
    const vault = [];
    for (let i = 0; i <= N; i++) {
      const a = (Math.PI * i) / N;
      vault.push([cx + Math.cos(a) * (R + 0.014), yw + 0.006 - Math.sin(a) * (R + 0.014)]);
    }
    for (let i = N; i >= 0; i--) {
      const a = (Math.PI * i) / N;
      vault.push([fx + Math.cos(a) * fr, yw + 0.006 - Math.sin(a) * fr]);
    }
    p.poly([vault], (x, y) => {
      const dx = x - cx,
        dy = yw - y,
        a = Math.atan2(dy, dx),
        q = Math.sqrt(dx * dx + dy * dy),
        t = clamp((R - q) / (R - fr)),
        z = t / (1.02 - t * 0.75);
      const caustic = 1 + 0.5 * smooth(0.3, 1.6, c.at(a * 0.9 + 0.3, z * 0.2)) * Math.abs(Math.cos(a));
      return (
        (0.016 + 0.075 * Math.abs(Math.cos(a)) ** 1.4 * (0.4 + t)) *
          brick(a * R * 1.0, z * 0.18, px * 1.2) *
          caustic +
        0.02 * t * t
      );
    });
    // damp near the water, stains running down, the light from above: all of it changes slowly
    const weather = p.field(
      (x, y) =>
        mix(1, 0.35, smooth(0.09, 0, yw - y + 0.02 * c.at(x * 0.7, 0.2))) *
        Math.exp(
          0.42 * n.at(x * 0.35 + 0.2, y * 0.2) +
            0.22 * c.at(x * 1.4, y * 0.18) +
            0.3 * c.at(x * 0.35, (y - road(x) * 0.25) * 0.5),
        ),
      6,
    );
    const sag = Float32Array.from({ length: p.w }, (_, k) => road((k + 0.5) / p.h) * 0.25);
    p.poly([outer], (x, y) => {
      const dx = x - cx;
      const d = Math.sqrt(dx * dx + (y - yw) * (y - yw));
      const out = smooth(R + 0.034 - px, R + 0.034 + px, d);
      const stone = out < 1 ? 0.135 * ring(Math.atan2(yw - y, dx) * R, d - R + 0.017 * 3, px) : 0;
      if (out === 0) return stone * weather(x, y);
      const under = d > R + 0.05 ? 1 : 1 - 0.35 * smooth(0.05, 0.034, d - R);
      const course =
        0.088 * brick(x, y - sag[(x * p.h) | 0], px) * under * mix(1.25, 0.75, smooth(0.2, yw, y));
      return mix(stone, course, out) * weather(x, y);
    });
    // string course, parapet coping
    for (const [dy, th, t] of [
      [0, 0.009, 0.3],
      [0.012, 0.004, 0.02],
      [0.058, 0.005, 0.2],
      [0.066, 0.003, 0.022],
    ]) {
      const pts = [];
      for (let i = 0; i <= 60; i++) {
        const x = (A * i) / 60;
        pts.push([x, road(x) + dy]);
      }
      p.line(pts, th, th, t, t < 0.1 ? 0.7 : 0.85);
    }
    for (let i = 0; i < 46; i++) {
      const x = (A * (i + r.gauss() * 0.1)) / 45;
      p.stroke(x, road(x) - 0.008, x, road(x) + 0.007, 0.0007, 0.0007, 0.05, 0.05, 0.6);
    }
    // growth hanging from the brickwork and along the banks
    for (const side of [-1, 1])
      for (let k = 0; k < 5; k++) {
        const x0 = cx + side * r.range(R + 0.12, A * 0.52),
          y0 = road(x0) + 0.01,
          L = r.range(0.05, 0.2);
        // leaves lit from above: dark within and below, paler on the rounded outside
        for (let i = 0; i < 3200; i++) {
          const v = r.next() ** 1.4;
          const q = r.gauss();
          const x = x0 + q * 0.03 * (1.1 - v);
          const y = y0 + v * L + r.gauss() * 0.012;
          const s = r.range(0.0006, 0.0015);
          const t =
            r.pick([0.007, 0.01, 0.016, 0.026, 0.05]) *
            (1.35 - v) *
            (1 + 0.5 * clamp(c.at(x * 1.4, y * 1.4), -1, 1));
          p.dab(x, y, s * r.range(0.6, 1.1), s, t, 0.9, 0.25);
        }
      }
    for (const s of [-1, 1])
      grassEdge(p, r, () => yw + 0.004, {
        from: s < 0 ? -0.02 : cx + R + 0.01,
        to: s < 0 ? cx - R - 0.01 : A + 0.02,
        n: 2600,
        len: 0.05,
        tone: [0.008, 0.06],
        lean: 0,
        width: 0.0007,
      });
    p.reflect(yw, {
      ripple: 0.0022,
      spread: 0.022,
      dim: 0.88,
      deep: 0.62,
      body: 0.006,
      seed: r.int(0, 90),
      scale: 0.8,
    });
    mist(p, r, {
      tone: 0.9,
      amount: (x, y) => 0.3 * Math.exp(-(((y - yw) / 0.012) ** 2)) * smooth(R, R * 0.6, Math.abs(x - cx)),
      y0: yw - 0.04,
      y1: yw + 0.04,
      rough: 0.6,
    });
  },
};

export const lock = {
  look: { ev: 0.15, contrast: 1.05, vignette: 0.26, glow: 0.1 },
  paint(p, r) {
    const A = p.A,
      yw = r.range(0.7, 0.73),
      cx = A * r.range(0.48, 0.53),
      n = tile("soft"),
      c = tile("cloud"),
      f = tile("fine"),
      px = 1 / p.h,
      o = r.next();
    sky(p, r, { top: 0.55, low: 1.05, at: 0.5, gx: 0.5, gy: 0.4, glow: 0.18, size: 0.4, cloud: 0.06 });
    treeLine(p, r, () => 0.43, { size: 0.16, tone: 0.66, fill: 0.5, gap: 0.26 });
    mist(p, r, { tone: 0.98, amount: (_x, y) => 0.5 * smooth(0.22, 0.42, y), y1: 0.46 });
    for (const [x, s, t, k] of [
      [0.12, 0.42, 0.3, "broad"],
      [0.93, 0.36, 0.38, "tall"],
    ])
      drawTree(
        p,
        growTree({ seed: 130, crown: k, points: 900, trunk: 0.22, kill: 0.038, tip: 0.001, twigs: 3 }),
        A * x + r.gauss() * 0.03,
        0.46,
        s * r.range(0.9, 1.1),
        { tone: t, flip: r.chance(0.5) },
      );
    mist(p, r, { tone: 1.0, amount: (_x, y) => 0.72 * smooth(0.34, 0.45, y), y0: 0.3, y1: 0.5 });
    treeLine(p, r, () => 0.452, { size: 0.05, vary: 0.4, tone: 0.24, fill: 0.8, gap: 0.2, full: true });
    mist(p, r, { tone: 0.9, amount: (_x, y) => 0.35 * smooth(0.4, 0.45, y), y0: 0.38, y1: 0.48 });
    const W = 0.27,
      top = 0.455,
      lx = cx - W,
      rx = cx + W; // gate opening
    const bank = (x) => top - 0.004 + 0.004 * n.at(x * 0.4, o);
    p.hill(bank, (x, y) => 0.14 * Math.exp(0.3 * f.at(x * 1.2, y * 2)));
    grassEdge(p, r, bank, { n: 3000, len: 0.014, tone: [0.06, 0.2], drop: 0.012 });
    // wing walls, turning outwards below the gates
    const brick = masonry(r.int(1, 999), { course: 0.0115, unit: 0.035, vary: 0.2, mortar: 1.3 }),
      block = masonry(r.int(1, 999), { course: 0.048, unit: 0.12, joint: 0.05, vary: 0.16 });
    const stain = (x, y) =>
      Math.exp(0.35 * c.at(x * 1.3, y * 0.12) + 0.3 * n.at(x * 0.3, y * 0.4)) *
      mix(1, 0.25, smooth(yw - 0.1 + 0.012 * c.at(x * 0.6, 0.4), yw - 0.065, y));
    for (const s of [-1, 1]) {
      const X = (u) => cx + s * u;
      p.poly(
        [
          [
            [X(W + 0.05), top - 0.002],
            [X(1.3), top + 0.012],
            [X(1.3), yw + 0.02],
            [X(W + 0.05), yw + 0.01],
          ],
        ],
        (x, y) => 0.085 * brick(x, y, px) * stain(x, y) * mix(1.2, 0.8, clamp(Math.abs(x - cx) - W)),
      );
      p.poly(
        [
          [
            [X(W - 0.002), top - 0.012],
            [X(W + 0.058), top - 0.012],
            [X(W + 0.058), yw + 0.01],
            [X(W - 0.002), yw + 0.01],
          ],
        ],
        (x, y) => 0.15 * block(x, y, px) * stain(x, y) * (s > 0 ? 1.15 : 0.8),
      );
      p.poly(
        [
          [
            [X(W - 0.006), top - 0.022],
            [X(1.3), top - 0.008],
            [X(1.3), top + 0.016],
            [X(W - 0.006), top + 0.002],
          ],
        ],
        (x, y) =>
          0.36 * (1 + 0.12 * f.at(x * 1.4, y * 1.4)) * (Math.abs(((x - cx) * 7.3) % 1) < 0.02 ? 0.3 : 1),
      );
      p.line(
        [
          [X(W - 0.006), top + 0.004],
          [X(1.3), top + 0.019],
        ],
        0.0022,
        0.0022,
        0.02,
        0.8,
      );
      p.line(
        [
          [X(W - 0.002), top],
          [X(W - 0.002), yw],
        ],
        0.003,
        0.003,
        0.015,
        0.8,
      );
    }
    // chamber beyond is black; the two leaves lean together towards us
    p.poly(
      [
        [
          [lx, top - 0.01],
          [rx, top - 0.01],
          [rx, yw],
          [lx, yw],
        ],
      ],
      0.02,
    );
    const gt = top + 0.012;
    const post = limbLight(1, 0.35, 0.2);
    for (const s of [-1, 1]) {
      const X = (u) => cx + s * u,
        drop = 0.012;
      const leaf = [
        [X(W - 0.004), gt],
        [X(0.003), gt + drop],
        [X(0.003), yw + 0.01],
        [X(W - 0.004), yw + 0.01],
      ];
      p.poly([leaf], (x, y) => {
        const u = Math.abs(x - cx),
          b = u / 0.0245,
          k = Math.floor(b),
          fr = b - k,
          wet = smooth(yw - 0.17, yw - 0.04, y + 0.02 * c.at(x * 0.9, o));
        return (
          0.052 *
          (1 + 0.3 * Math.sin(k * 12.9 + s)) *
          (fr < 0.09 ? 0.25 : 1) *
          Math.exp(0.3 * f.at(x * 2.4, y * 0.3) + 0.25 * c.at(x * 1.2, y * 0.25)) *
          mix(1, 0.4, wet) *
          (s > 0 ? 1.2 : 0.85)
        );
      });
      for (const [v, th] of [
        [0.012, 0.013],
        [0.095, 0.0095],
        [0.17, 0.0095],
      ]) {
        const y0 = gt + v,
          y1 = y0 + drop;
        const rail = [
          [X(W - 0.006), y0 - th],
          [X(0.004), y1 - th],
          [X(0.004), y1 + th],
          [X(W - 0.006), y0 + th],
        ];
        p.poly([rail], (x, y) => {
          const across = (y - mix(y1, y0, Math.abs(x - cx) / W)) / th;
          const worn = Math.exp(0.34 * f.at(x * 0.5 + v, y * 3.2) + 0.3 * c.at(x * 0.9 + s, y * 1.2));
          const wet = mix(1, 0.5, smooth(yw - 0.17, yw - 0.04, y));
          return (s > 0 ? 0.085 : 0.065) * worn * wet * (1 - 0.34 * across);
        });
        p.line(
          [
            [X(W - 0.006), y0 + th * 1.05],
            [X(0.004), y1 + th * 1.05],
          ],
          0.003,
          0.003,
          0.008,
          0.9,
        );
        p.line(
          [
            [X(W - 0.006), y0 - th * 0.9],
            [X(0.004), y1 - th * 0.9],
          ],
          0.0014,
          0.0014,
          0.3,
          0.6,
        );
      }
      // heel and mitre posts, rounded and streaked
      for (const u of [W - 0.014, 0.012])
        p.limb(
          [
            [X(u), yw + 0.01, 0.0125],
            [X(u), gt - (u > 0.1 ? 0.03 : 0.012), 0.0125],
          ],
          (k, x, y) =>
            0.085 *
            (s > 0 ? 1.15 : 0.85) *
            post[((k + 1) * 16) | 0] *
            Math.exp(0.36 * f.at(x * 2.6 + u, y * 0.28) + 0.32 * c.at(x * 1.5, y * 0.35 + u)) *
            mix(1, 0.4, smooth(yw - 0.16, yw - 0.03, y)),
        );
      // balance beam, white at the end
      const by = gt - 0.042,
        ex = 0.58 + r.gauss() * 0.01,
        thick = 0.021;
      const beam = [
        [X(0.004), by + 0.014 - thick * 0.62],
        [X(ex), by - 0.016 - thick],
        [X(ex), by - 0.016 + thick],
        [X(0.004), by + 0.014 + thick * 0.62],
      ];
      p.poly(
        [beam.map(([x, y]) => [x, y + 0.05 + 0.02]).map(([x, y]) => [x, Math.max(y, top - 0.016)])],
        0.05,
        0.35,
      );
      p.poly([beam], (x, y) => {
        const u = Math.abs(x - cx),
          v = (y - (by + mix(0.014, -0.016, u / ex))) / thick;
        const white = u > ex - 0.085;
        return (
          (white ? 0.85 : 0.042) *
          (v < -0.62 ? (white ? 1.25 : 3.2) : v > 0.5 ? 0.5 : 1) *
          Math.exp(0.22 * f.at(u * 0.35 + s, y * 2.2) + 0.16 * c.at(u, y)) *
          (white ? clamp(1 - 0.35 * smooth(0.4, 1.6, c.at(x * 1.5, y * 2 + o))) : 1)
        );
      });
      // hand rail and paddle gear
      const iron = 0.0014;
      for (const [u, rise] of [
        [0.03, 0.052],
        [0.115, 0.056],
        [0.2, 0.06],
      ])
        p.stroke(X(u), by - rise, X(u), by, iron, iron, 0.03);
      const handrail = [
        [X(0.2), by - 0.06],
        [X(0.03), by - 0.052],
        [X(-0.03), by - 0.051],
      ];
      p.line(handrail, iron, iron, 0.035);
      p.stroke(X(0.2), by - 0.0612, X(0.03), by - 0.0532, 0.0004, 0.0004, 0.3, 0.3, 0.6);
      p.limb(
        [
          [X(0.15), by + 0.008, 0.0075],
          [X(0.15), by - 0.046, 0.0065],
        ],
        (k, x, y) => 0.03 * post[((k + 1) * 16) | 0] * Math.exp(0.4 * c.at(x * 2, y * 2)),
      );
      p.stroke(X(0.15), by - 0.04, X(0.15), by - 0.075, 0.0016, 0.0016, 0.03);
      p.stroke(X(0.142), by - 0.047, X(0.158), by - 0.047, 0.0022, 0.0022, 0.02);
    }
    // leaking water: a long exposure turns it to silk
    for (let i = 0; i < 420; i++) {
      const mid = r.chance(0.7);
      const x = mid
        ? cx + r.gauss() * 0.0035
        : cx + r.pick([-1, 1]) * r.pick([0.06, 0.085, 0.12, 0.16, 0.21, W - 0.03]) + r.gauss() * 0.005;
      const y0 = mid ? gt + r.range(0.03, 0.14) : gt + r.range(0.13, 0.215);
      const spill = mid ? (x - cx) * 0.9 + r.gauss() * 0.004 : r.gauss() * 0.0018;
      const fall = [
        [x, y0],
        [x + spill * 0.3, mix(y0, yw, 0.5)],
        [x + spill, yw + 0.004],
      ];
      p.line(fall, 0.0003, r.range(0.0006, 0.0026), r.range(0.5, 1.05), mid ? 0.075 : 0.055);
    }
    for (let i = 0; i < 90; i++)
      p.dab(
        cx + r.gauss() * 0.04,
        yw - 0.004 + r.gauss() * 0.003,
        r.range(0.01, 0.04),
        r.range(0.004, 0.012),
        0.95,
        0.12,
        1,
      );
    p.reflect(yw, { ripple: 0.004, spread: 0.06, dim: 0.8, deep: 0.62, body: 0.008, seed: r.int(0, 90) });
    p.wash(
      (x, y) => {
        const d = y - yw,
          q = (x - cx) / (0.05 + d * 1.2);
        return Math.exp(-q * q) * Math.exp(-d / 0.12) * (0.34 + 0.1 * c.at(x * 0.8, 0.12 / (d + 0.04)));
      },
      (a, b) => a + Math.max(0, b) * (1 - a * 0.5),
      3,
      yw,
      1,
    );
    mist(p, r, {
      tone: 0.85,
      amount: (_x, y) => 0.2 * Math.exp(-(((y - yw - 0.016) / 0.034) ** 2)),
      y0: yw - 0.07,
      y1: yw + 0.1,
      rough: 0.7,
      scale: 1.6,
    });
  },
};

export const mill = {
  look: { ev: 0.08, contrast: 1.16, vignette: 0.26, glow: 0.08 },
  paint(p, r) {
    const A = p.A,
      yw = r.range(0.57, 0.6),
      n = tile("soft"),
      c = tile("cloud"),
      f = tile("fine"),
      px = 1 / p.h,
      o = r.next(),
      flip = r.chance(0.4),
      X = (x) => (flip ? A - x : x);
    sky(p, r, {
      top: 0.42,
      low: 1.02,
      at: yw,
      gx: flip ? 0.2 : 0.8,
      gy: yw - 0.05,
      glow: 0.5,
      size: 0.45,
      cloud: 0.05,
    });
    streaks(p, r, { vx: flip ? -0.6 : 1.6, yh: yw + 0.1, strength: 0.26, freq: 0.5, along: 0.05, to: yw });
    p.hill(
      (x) => yw - 0.05 - 0.035 * n.at(x * 0.1 + o, 0.1),
      (_x, _y, d) => mix(0.7, 0.95, clamp(d / 0.06)),
    );
    treeLine(p, r, () => yw - 0.005, { size: 0.075, tone: 0.5, fill: 0.5, gap: 0.36 });
    mist(p, r, {
      tone: 1.0,
      amount: (_x, y) => 0.7 * Math.exp(-(((y - yw) / 0.05) ** 2)),
      y0: yw - 0.15,
      y1: yw,
    });
    const L = A * r.range(0.3, 0.36),
      g = yw + 0.002,
      fogTone = 0.74,
      fogAt = (y) => 0.13 + 0.4 * smooth(yw - 0.16, yw, y);
    const wall = (base, seed) => {
      const b = masonry(seed, { course: 0.0022, unit: 0.0062, vary: 0.16, mortar: 1.2 });
      return (x, y) =>
        mix(
          base * b(x, y, px) * Math.exp(0.34 * c.at(x * 1.1, y * 0.28) + 0.2 * n.at(x * 0.9, y * 0.7)),
          fogTone,
          fogAt(y),
        );
    };
    const box = (x0, y0, x1, y1, t) =>
      p.poly(
        [
          [
            [X(x0), y0],
            [X(x1), y0],
            [X(x1), y1],
            [X(x0), y1],
          ],
        ],
        t,
      );
    // chimney, a little tapered with an oversailing cap
    const chx = L + r.range(0.46, 0.49),
      cht = yw - r.range(0.43, 0.47);
    const stack = wall(0.05, 5);
    p.poly(
      [
        [
          [X(chx - 0.0155), cht],
          [X(chx + 0.0155), cht],
          [X(chx + 0.024), g],
          [X(chx - 0.024), g],
        ],
      ],
      (x, y) => {
        const u = (X(x) - chx) / 0.022;
        return mix(stack(x, y) * (1 + 0.9 * u), fogTone, fogAt(y) * 0.3);
      },
    );
    box(chx - 0.021, cht - 0.004, chx + 0.021, cht + 0.006, 0.035);
    box(chx - 0.019, cht + 0.012, chx + 0.019, cht + 0.017, 0.07);
    // the long front, seen square on: parapet, string courses, and a stair tower that stands forward
    const x0 = L - 0.06;
    const x1 = L + 0.45;
    const ev = yw - 0.235;
    const rd = 0.036;
    const face = wall(0.06, 7);
    const slates = (x, y) =>
      mix(
        0.075 * (1 + 0.2 * f.at(x * 2.2, y * 5)) * (((y - ev) * 330 + 900) % 1 < 0.25 ? 0.8 : 1),
        fogTone,
        0.13,
      );
    const roof = [
      [X(x0 - 0.003), ev],
      [X(x0 + 0.03), ev - rd],
      [X(x1 - 0.03), ev - rd],
      [X(x1 + 0.003), ev],
    ];
    p.poly([roof], slates);
    p.stroke(X(x0 + 0.03), ev - rd, X(x1 - 0.03), ev - rd, 0.0012, 0.0012, 0.05);
    for (let k = 0; k < 3; k++) {
      const vent = x0 + 0.11 + k * 0.13;
      box(vent, ev - rd - 0.009, vent + 0.014, ev - rd + 0.002, 0.06);
      box(vent - 0.001, ev - rd - 0.011, vent + 0.015, ev - rd - 0.009, 0.1);
    }
    box(x0, ev, x1, g, face);
    box(x0 - 0.003, ev - 0.003, x1 + 0.003, ev + 0.002, mix(0.12, fogTone, 0.14));
    for (let fl = 0; fl < 4; fl++) {
      const y = ev + 0.0145 + fl * 0.053;
      p.stroke(X(x0), y, X(x1), y, 0.0007, 0.0007, mix(0.1, fogTone, fogAt(y)), undefined, 0.6);
    }
    const sash = (wx, wy, w, hgt) => {
      const air = fogAt(wy) * 0.9;
      box(wx - 0.0012, wy - 0.0026, wx + w + 0.0012, wy, mix(0.1, fogTone, air));
      box(wx, wy, wx + w, wy + hgt, mix(0.011, fogTone, air));
      // panes catch a little sky, each at its own angle; some are boarded or gone
      const cols = 4;
      const rows = 6;
      const kind = r.next();
      for (let a = 0; a < cols; a++)
        for (let b = 0; b < rows; b++) {
          const t =
            kind < 0.06 ? 0.05 : r.chance(0.1) ? 0.006 : 0.012 + 0.05 * r.next() ** 3 + 0.03 * (b / rows);
          const pane = mix(t, fogTone, air);
          box(
            wx + (a + 0.12) * (w / cols),
            wy + (b + 0.1) * (hgt / rows),
            wx + (a + 0.9) * (w / cols),
            wy + (b + 0.92) * (hgt / rows),
            pane,
          );
        }
      // shadow of the lintel, pale sill, and what has run down from it
      p.stroke(
        X(wx),
        wy + 0.0012,
        X(wx + w),
        wy + 0.0012,
        0.0012,
        0.0012,
        mix(0.006, fogTone, air),
        undefined,
        0.9,
      );
      box(wx - 0.0014, wy + hgt, wx + w + 0.0014, wy + hgt + 0.0018, mix(0.17, fogTone, air));
      for (let k = 0; k < 3; k++) {
        const q = wx + w * r.next();
        const run = hgt * r.range(0.2, 0.7);
        p.stroke(
          X(q),
          wy + hgt + 0.002,
          X(q),
          wy + hgt + run,
          0.0008,
          0.0003,
          mix(0.03, fogTone, air),
          undefined,
          0.35,
        );
      }
    };
    const tower = x0 + 0.3;
    for (let fl = 0; fl < 4; fl++)
      for (let k = 0; k < 14; k++) {
        const wx = x0 + 0.016 + k * 0.0348;
        const wy = ev + 0.02 + fl * 0.053;
        if (wy > g - 0.03 || (wx + 0.015 > tower - 0.003 && wx < tower + 0.07)) continue;
        sash(wx, wy, 0.0145, 0.027);
      }
    for (const q of [x0 + 0.0125, tower - 0.006, x1 - 0.006])
      p.stroke(
        X(q),
        ev + 0.004,
        X(q),
        g,
        0.0008,
        0.0008,
        mix(0.02, fogTone, 0.2),
        mix(0.02, fogTone, 0.5),
        0.9,
      );
    // tower: a floor higher than the rest, its shadow to the left of it
    const tt = ev - 0.07;
    p.poly(
      [
        [
          [X(tower - 0.014), ev + 0.004],
          [X(tower), ev + 0.004],
          [X(tower), g],
          [X(tower - 0.014), g],
        ],
      ],
      (_x, y, old) => old * mix(0.55, 0.9, smooth(yw - 0.14, yw, y)),
    );
    box(tower, tt, tower + 0.066, g, wall(0.095, 9));
    box(tower - 0.003, tt - 0.004, tower + 0.069, tt + 0.002, mix(0.15, fogTone, 0.12));
    p.poly(
      [
        [
          [X(tower - 0.002), tt - 0.004],
          [X(tower + 0.033), tt - 0.042],
          [X(tower + 0.068), tt - 0.004],
        ],
      ],
      (x, y) => slates(x, y) * (x * (flip ? -1 : 1) > X(tower + 0.033) * (flip ? -1 : 1) ? 1.2 : 0.8),
    );
    p.stroke(X(tower + 0.033), tt - 0.041, X(tower + 0.033), tt - 0.064, 0.0007, 0.0004, 0.05);
    for (let fl = 0; fl < 5; fl++) {
      const wy = tt + 0.018 + fl * 0.057;
      if (wy > g - 0.035) continue;
      sash(tower + 0.012, wy, 0.0125, 0.026);
      sash(tower + 0.041, wy, 0.0125, 0.026);
    }
    // hoist, lean-to, sheds with north lights
    const sw = 0.052,
      sx = x0 - 0.17,
      sh = yw - 0.085;
    for (let k = 0; k < 3; k++)
      p.poly(
        [
          [
            [X(sx + k * sw), sh],
            [X(sx + k * sw + 0.008), sh - 0.036],
            [X(sx + (k + 1) * sw), sh],
            [X(sx + (k + 1) * sw + 0.015), g],
            [X(sx + k * sw), g],
          ],
        ],
        wall(0.075, 11 + k),
      );
    box(x1, yw - 0.1, x1 + 0.11, g, wall(0.07, 17));
    const lean = [
      [X(x1), yw - 0.128],
      [X(x1 + 0.115), yw - 0.098],
      [X(x1 + 0.115), yw - 0.094],
      [X(x1), yw - 0.1],
    ];
    p.poly([lean], (x, y) => mix(0.1 * (1 + 0.2 * f.at(x * 2, y * 4)), fogTone, 0.2));
    for (let k = 0; k < 3; k++) sash(x1 + 0.014 + k * 0.032, yw - 0.078, 0.014, 0.026);
    // trees at the tail of the island
    drawTree(
      p,
      growTree({
        seed: 140 + r.int(0, 1),
        crown: "broad",
        points: 1000,
        trunk: 0.2,
        kill: 0.036,
        tip: 0.001,
        twigs: 3.2,
      }),
      X(sx - 0.07),
      yw,
      r.range(0.26, 0.3),
      { tone: (h) => mix(0.3, 0.035, smooth(0, 0.4, h)) },
    );
    treeLine(p, r, () => yw, {
      from: flip ? -0.1 : x1 + 0.24,
      to: flip ? A - x1 - 0.2 : A + 0.1,
      size: 0.1,
      vary: 0.5,
      tone: 0.22,
      fill: 0.6,
      gap: 0.3,
    });
    treeLine(p, r, () => yw, {
      from: flip ? A - sx + 0.02 : -0.1,
      to: flip ? A + 0.1 : sx - 0.02,
      size: 0.05,
      vary: 0.5,
      tone: 0.16,
      fill: 0.7,
      gap: 0.3,
      full: true,
    });
    mist(p, r, {
      tone: 0.92,
      amount: (_x, y) => 0.42 * Math.exp(-(((y - yw) / 0.032) ** 2)),
      y0: yw - 0.1,
      y1: yw + 0.01,
      rough: 0.5,
      scale: 1.3,
    });
    p.stroke(0, yw - 0.001, A, yw - 0.001, 0.0022, 0.0022, 0.08, 0.08, 0.75);
    grassEdge(p, r, () => yw, { n: 1800, len: 0.009, tone: [0.05, 0.16], lean: 0 });
    p.reflect(yw, { ripple: 0.0022, spread: 0.03, dim: 0.9, deep: 0.5, seed: r.int(0, 90) });
    mist(p, r, {
      tone: 0.9,
      amount: (_x, y) => 0.3 * Math.exp(-(((y - yw - 0.006) / 0.013) ** 2)),
      y0: yw - 0.04,
      y1: yw + 0.06,
      rough: 0.6,
      scale: 2,
    });
    p.wash(
      (x, y) =>
        1 - 0.16 * smooth(0.9, 1.8, c.at(x * 0.06 + o, 0.16 / (y - yw + 0.05))) * smooth(0.02, 0.12, y - yw),
      "multiply",
      3,
      yw,
      1,
    );
    const sx0 = X(A * r.range(0.86, 0.98));
    for (let i = 0; i < 90; i++) {
      const x = sx0 + r.gauss() * 0.07,
        a = -1.57 + r.gauss() * 0.16,
        l = r.range(0.1, 0.27),
        y = 1.02;
      p.line(
        [
          [x, y],
          [x + Math.cos(a) * l * 0.6, y + Math.sin(a) * l * 0.6],
          [x + Math.cos(a) * l + r.gauss() * 0.02, y + Math.sin(a) * l * 0.95],
        ],
        0.0013,
        0.0004,
        r.pick([0.006, 0.012, 0.03]),
      );
    }
  },
};
