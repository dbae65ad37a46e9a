// Roads, lamps, stones.
import { clamp, mix, smooth, tile } from "../noise.mjs";
import { drawTree, grassEdge, growTree, treeLine } from "../trees.mjs";
import { groundNoise, mist, sky } from "./common.mjs";

export const drove = {
  look: { ev: 0.1, vignette: 0.26, glow: 0.12 },
  paint(p, r) {
    const A = p.A,
      yh = r.range(0.56, 0.6),
      vx = A * r.range(0.44, 0.58),
      c = tile("cloud"),
      f = tile("fine"),
      o = r.next(),
      fog = 0.86,
      k = r.range(0.2, 0.28);
    sky(p, r, { top: 0.5, low: 1.0, at: yh, gx: vx / A, gy: yh - 0.05, glow: 0.3, size: 0.3, cloud: 0.05 });
    const air = (z) => Math.min(1, Math.exp(-(z - 1) * k)),
      bend = (z) => 0.05 * Math.sin(z * 0.3 + o * 6) * smooth(1, 6, z);
    const at = (X, z) => [vx + (X * 0.36 + bend(z)) / z ** 1 + bend(z) * 0.35, yh + 0.4 / z];
    const g = groundNoise(r, { yh, freq: 3.2, A });
    p.hill(
      () => yh + 0.002,
      (x, y) => {
        const z = 0.4 / (y - yh),
          X = ((x - vx - bend(z) * 0.35) * z - bend(z)) / 0.36,
          w = 0.04 * c.at(z * 0.4, o),
          e = clamp(air(z));
        const rut = Math.exp(-(((Math.abs(X + w) - 0.42) / 0.15) ** 2)),
          verge = smooth(0.72, 0.95, Math.abs(X) + w * 2),
          gn = g(x, y);
        const pud = smooth(0.4, 0.9, rut) * smooth(0.5, 1.1, c.at(X * 0.06 + o, z * 0.28 + o));
        const grit = clamp(6 / z) * f.at(X * 0.85, z * 0.9 + o);
        let t = mix(0.07, 0.24, rut) * Math.exp(0.22 * gn + 0.3 * grit);
        t = mix(t, 0.075 * Math.exp(0.4 * gn), verge);
        t = mix(t, 0.72, pud);
        return mix(fog, t, e);
      },
    );
    // from far to near: verge, hedge, and the trees that stand in it
    const layers = [];
    for (let z = 9; z > 0.62; z *= 0.975) layers.push(z);
    const trees = [7.5, 6.2, 5, 4.1, 3.3, 2.6, 2.05, 1.55].map((z) => ({
      z: z * r.range(0.95, 1.05),
      s: r.pick([-1, 1]),
      m: r.int(0, 3),
    }));
    trees.forEach((t, i) => {
      t.s = i % 2 ? 1 : -1;
    });
    for (const z of layers) {
      const e = air(z),
        s = 1 / z;
      while (trees.length && trees[0].z >= z) {
        const t = trees.shift(),
          [x, y] = at(t.s * r.range(1.35, 1.6), t.z),
          near = t.z < 2.3;
        const m = growTree({
          seed: 150 + t.m,
          crown: ["broad", "round", "tall", "broad"][t.m],
          points: 1100,
          trunk: 0.24,
          lean: 0.06,
          kill: 0.036,
          tip: near ? 0.0009 : 0.0011,
          pipe: 2.15,
          twigs: 3.2,
        });
        drawTree(p, m, x, y, r.range(0.95, 1.25) / t.z ** 0.9, {
          tone: mix(fog, 0.012, e ** 0.6),
          flip: t.s > 0,
          thick: 1.1,
          min: near ? 0 : 0.00008,
        });
      }
      for (const side of [-1, 1]) {
        const N = z < 1.6 ? 64 : 44;
        for (let i = 0; i < N; i++) {
          const X = side * (1.3 + Math.abs(r.gauss()) * 0.2);
          const [x, y] = at(X, z);
          const h = 0.2 * s * r.range(0.3, 1.05) * (1 + 0.25 * c.at(z * 0.5, side + o));
          const a = -1.57 + r.gauss() * 0.4;
          const t = mix(fog, r.pick([0.006, 0.012, 0.03, 0.06]), e ** 0.65);
          const mx = x + Math.cos(a) * h * 0.5;
          const my = y + Math.sin(a) * h * 0.5;
          p.stroke(x, y, mx, my, 0.0014 * s, 0.0009 * s, t, t, 0.85);
          for (let k = 0; k < 3; k++) {
            const b = a + r.gauss() * 0.65;
            const L = h * r.range(0.2, 0.5);
            p.stroke(mx, my, mx + Math.cos(b) * L, my + Math.sin(b) * L, 0.0007 * s, 0.0002 * s, t, t, 0.85);
          }
        }
        for (let i = 0; i < 5; i++) {
          const [x, y] = at(side * (1.42 + Math.abs(r.gauss()) * 0.25), z),
            v = r.range(0.03, 0.15);
          p.dab(x, y - v * s, 0.05 * s, 0.04 * s, mix(fog, 0.025, e ** 0.8), 0.4, 0.9);
        }
        for (let i = 0; i < 60; i++) {
          const [x, y] = at(side * (0.78 + Math.abs(r.gauss()) * 0.2), z),
            a = -1.57 + r.gauss() * 0.45 - side * 0.25,
            L = 0.05 * s * r.range(0.3, 1.2),
            t = mix(fog, r.pick([0.02, 0.05, 0.12, 0.24]), e);
          p.stroke(x, y, x + Math.cos(a) * L, y + Math.sin(a) * L, 0.0009 * s, 0.0003 * s, t, t, 0.85);
        }
      }
      for (let i = 0; i < 24; i++) {
        const [x, y] = at(r.gauss() * 0.13, z),
          L = 0.024 * s * r.range(0.3, 1.1),
          t = mix(fog, r.pick([0.03, 0.08, 0.2]), e);
        p.stroke(x, y, x + r.gauss() * L * 0.5, y - L, 0.0008 * s, 0.0003 * s, t, t, 0.8);
      }
    }
  },
};

export const milestone = {
  look: { ev: 0.1, contrast: 1.05, vignette: 0.3, glow: 0.08, lens: "simple" },
  paint(p, r) {
    const A = p.A,
      c = tile("cloud"),
      f = tile("fine"),
      o = r.next(),
      q2 = r.next(),
      yh = 0.5;
    sky(p, r, {
      top: 0.5,
      low: 0.95,
      at: 0.55,
      gx: r.range(0.2, 0.8),
      gy: 0.4,
      glow: 0.25,
      size: 0.4,
      cloud: 0.05,
    });
    const vx = A * r.range(0.2, 0.32);
    // lane and verge, soon to be out of focus
    p.wash(
      (x, y) => {
        const d = Math.max(0.002, y - yh - 0.015),
          e = clamp(d * 2.2),
          z = 0.3 / d,
          X = (x - vx) * z,
          lane = Math.exp(-((X / 0.55) ** 4));
        return mix(0.8, mix(0.085, 0.3, lane) * Math.exp(0.25 * c.at(X * 0.2, z * 0.1 + o)), e ** 0.6);
      },
      "set",
      3,
      yh + 0.015,
    );
    for (const [x, s, t] of [
      [0.62, 0.36, 0.42],
      [0.08, 0.3, 0.5],
      [0.9, 0.5, 0.3],
      [0.38, 0.2, 0.6],
    ])
      drawTree(
        p,
        growTree({ seed: 170, crown: "broad", points: 700, trunk: 0.2, kill: 0.045, tip: 0.0013 }),
        A * x + r.gauss() * 0.04,
        0.53 + 0.06 * s,
        s,
        { tone: t, flip: r.chance(0.5), thick: 1.3 },
      );
    treeLine(p, r, (x) => yh + 0.02 + 0.04 * smooth(0.3, 1, x), {
      from: A * 0.36,
      size: 0.08,
      tone: 0.4,
      fill: 0.7,
      gap: 0.25,
    });
    mist(p, r, {
      tone: 0.92,
      amount: (_x, y) => 0.55 * Math.exp(-(((y - yh - 0.02) / 0.06) ** 2)),
      y0: 0.3,
      y1: 0.7,
    });
    grassEdge(p, r, () => 0.62, { n: 7000, len: 0.05, tone: [0.03, 0.35], drop: 0.2, width: 0.0012 });
    p.defocus(0.0085);
    // the stone
    const cx = A * r.range(0.57, 0.65),
      w = 0.185,
      top = r.range(0.36, 0.4),
      base = 0.9,
      lean = 0.02 + r.gauss() * 0.015;
    for (let i = 0; i < 900; i++) {
      const x = cx + r.gauss() * 0.3,
        y = base - 0.05 + r.next() * 0.05,
        L = r.range(0.04, 0.13),
        a = -1.57 + r.gauss() * 0.35;
      const v = r.pick([0.03, 0.07, 0.18, 0.34]);
      p.stroke(x, y, x + Math.cos(a) * L, y + Math.sin(a) * L, 0.0011, 0.0004, v);
    }
    const outline = [],
      ends = [
        [-w - 0.012, base],
        [-w, top + 0.115],
        [-w + 0.055, top + 0.028],
        [-w + 0.1, top + 0.004],
        [w - 0.12, top],
        [w - 0.03, top + 0.032],
        [w, top + 0.1],
        [w + 0.014, base],
      ];
    for (let pass = 0; pass < 2; pass++) {
      // weather the corners off
      const cut = [ends[0]];
      for (let k = 0; k + 1 < ends.length; k++)
        for (const t of [0.25, 0.75])
          cut.push([mix(ends[k][0], ends[k + 1][0], t), mix(ends[k][1], ends[k + 1][1], t)]);
      ends.splice(0, ends.length, ...cut, ends.at(-1));
    }
    for (let k = 0; k + 1 < ends.length; k++)
      for (let i = 0; i < 8; i++) {
        const t = i / 8,
          x = mix(ends[k][0], ends[k + 1][0], t),
          y = mix(ends[k][1], ends[k + 1][1], t),
          d = (base - y) / (base - top);
        outline.push([
          cx + x + lean * d + 0.0045 * c.at(y * 0.8 + x * 0.3, q2),
          y + 0.004 * c.at(x * 0.9 + y * 0.4, q2 + 0.5),
        ]);
      }
    outline.push([cx + w + 0.014, base]);
    const hgt = (x, y) =>
      0.0052 * c.at(x * 0.7 + o, y * 0.7) +
      0.0016 * f.at(x * 0.9, y * 0.9 + o) +
      0.0007 * f.at(x * 3.1, y * 3.1);
    // incised figures, cut as grooves
    const cuts = [],
      cut = (a, b) => cuts.push([...a, ...b]),
      gy = top + 0.13,
      gh = 0.1;
    const roman = r.pick(["IV", "VII", "IX", "XI", "VI"]);
    let gx = cx - (roman.length - 1) * 0.036;
    for (const ch of roman) {
      if (ch === "I") {
        cut([gx, gy], [gx, gy + gh]);
        cut([gx - 0.012, gy], [gx + 0.012, gy]);
        cut([gx - 0.012, gy + gh], [gx + 0.012, gy + gh]);
        gx += 0.056;
      } else if (ch === "V") {
        cut([gx - 0.026, gy], [gx, gy + gh]);
        cut([gx, gy + gh], [gx + 0.026, gy]);
        gx += 0.074;
      } else {
        cut([gx - 0.026, gy], [gx + 0.026, gy + gh]);
        cut([gx + 0.026, gy], [gx - 0.026, gy + gh]);
        gx += 0.074;
      }
    }
    cut([cx - 0.09, gy + gh + 0.03], [cx + 0.09, gy + gh + 0.03]);
    const groove = (x, y) => {
      let m = 9;
      for (let i = 0; i < cuts.length; i++) {
        const k = cuts[i],
          dx = k[2] - k[0],
          dy = k[3] - k[1],
          ax = x - k[0],
          ay = y - k[1];
        const t = clamp((ax * dx + ay * dy) / (dx * dx + dy * dy)),
          ex = ax - dx * t,
          ey = ay - dy * t,
          d = ex * ex + ey * ey;
        if (d < m) m = d;
      }
      return Math.sqrt(m);
    };
    const inCuts = (x, y) => y > gy - 0.02 && y < gy + gh + 0.05 && Math.abs(x - cx) < 0.14;
    const H = (x, y) =>
      hgt(x, y) -
      (inCuts(x, y) ? 0.0095 * smooth(0.0105, 0.003, groove(x, y) + 0.0007 * f.at(x * 2, y * 2)) : 0);
    p.poly([outline], (x, y) => {
      const e = 0.0011,
        h0 = H(x, y),
        sx = (H(x + e, y) - h0) / e,
        sy = (H(x, y + e) - h0) / e,
        u = (x - cx - lean) / w,
        v = clamp((y - top) / 0.1);
      // round the shoulders so that light turns round the stone
      const nx = -sx * 0.5 + 0.75 * Math.sign(u) * smooth(0.86, 1, Math.abs(u)),
        ny = -sy * 0.5 - 0.8 * smooth(0.35, 0, v),
        l = 1 / Math.sqrt(nx * nx + ny * ny + 1);
      const lit = Math.max(0, (-nx * 0.62 - ny * 0.5 + 0.6) * l);
      const lich =
          (inCuts(x, y) ? smooth(0.03, 0.06, groove(x, y)) : 1) *
          smooth(0.85, 1.25, c.at(x * 1.15 + q2, y * 1.15 + o) + 0.35 * f.at(x * 1.4, y * 1.4)),
        dark = smooth(0.7, 1.6, c.at(x * 0.5 + o, y * 0.28 + q2));
      const alb = mix(mix(0.24, 0.1, dark), 0.58, lich * 0.8) * (1 + 0.1 * f.at(x * 4.3, y * 4.3));
      return alb * (0.24 + 1.15 * lit) * mix(1, 0.35, smooth(0.72, 0.88, y));
    });
    for (let i = 0; i < 2600; i++) {
      const t = r.next(),
        x = r.range(-0.02, A + 0.02),
        y = mix(0.86, 1.04, t),
        L = r.range(0.05, 0.16) * (0.7 + 0.6 * t) * (Math.abs(x - cx) < w ? 0.7 : 1),
        a = -1.57 + r.gauss() * 0.34 + 0.1,
        b = a + r.gauss() * 0.5 + 0.3,
        v = r.pick([0.012, 0.03, 0.06, 0.13, 0.3]) * (1 - 0.4 * t),
        mx = x + Math.cos(a) * L * 0.6,
        my = y + Math.sin(a) * L * 0.6;
      p.stroke(x, y, mx, my, 0.0016, 0.0012, v * 0.6, v);
      p.stroke(mx, my, mx + Math.cos(b) * L * 0.4, my + Math.sin(b) * L * 0.4, 0.0012, 0.0003, v, v * 1.2);
    }
    for (let i = 0; i < 26; i++) {
      const x = r.range(0, A),
        y = 1.02,
        L = r.range(0.16, 0.36),
        a = -1.57 + r.gauss() * 0.2;
      const ex = x + Math.cos(a) * L,
        ey = y + Math.sin(a) * L;
      p.line(
        [
          [x, y],
          [mix(x, ex, 0.6) + 0.006, mix(y, ey, 0.6)],
          [ex, ey],
        ],
        0.0014,
        0.0006,
        0.03,
      );
      for (let k = 0; k < 16; k++) {
        const t = 0.72 + (0.28 * k) / 16,
          s = r.pick([-1, 1]);
        p.stroke(
          mix(x, ex, t),
          mix(y, ey, t),
          mix(x, ex, t) + s * 0.012 * (1.15 - t),
          mix(y, ey, t) - 0.012,
          0.0012,
          0.0004,
          r.pick([0.05, 0.2, 0.4]),
        );
      }
    }
  },
};
