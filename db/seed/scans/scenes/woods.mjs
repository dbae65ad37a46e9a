// Woods and orchards.
import { clamp, mix, smooth, tile } from "../noise.mjs";
import { blur } from "../plate.mjs";
import { drawTree, growTree, limbLight, treeLine } from "../trees.mjs";
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

export const beech = {
  title: "Beeches, Pell Wood",
  aspect: 0.8,
  look: { format: "6x7", film: "iso125", ev: 0.05, vignette: 0.24, glow: 0.1 },
  paint(p, r) {
    const A = p.A,
      yh = r.range(0.66, 0.71),
      gx = A * r.range(0.38, 0.66),
      gy = r.range(0.34, 0.48),
      dens = r.range(0.3, 0.4);
    const n = tile("soft"),
      c = tile("cloud"),
      f = tile("fine"),
      o = r.next();
    const fog = (x, y) => 0.42 + 0.72 * Math.exp(-(((x - gx) / 0.36) ** 2) - ((y - gy) / 0.4) ** 2);
    p.wash(
      (x, y) => fog(x, y) * (1 + 0.06 * n.at(x * 0.3 + o, y * 0.3)),
      (_a, b) => b,
      8,
    );
    const ground = groundNoise(r, { yh, freq: 1.6, A });
    const edge = (x) => yh + 0.012 * n.at(x * 0.25 + o, 0.4) + 0.004 * c.at(x * 0.5, o);
    p.hill(edge, (x, y) => {
      const z = 0.3 / (y - yh + 0.03),
        e = Math.exp(-(z - 1) * dens * 0.9),
        g = ground(x, y);
      return mix(fog(x, Math.min(y, yh)), 0.085 * Math.exp(0.42 * g) * (0.7 + 0.9 * fog(x, gy)), clamp(e));
    });
    // leaf litter
    const leafTone = (x, _y, e) =>
      mix(fog(x, yh), r.pick([0.012, 0.03, 0.06, 0.11, 0.2]) * (0.5 + fog(x, gy)), clamp(e));
    for (let i = 0; i < 26000; i++) {
      const u = r.next() ** 0.8,
        y = yh + 0.015 + (1.02 - yh) * u,
        z = 0.3 / (y - yh + 0.03),
        s = (0.0042 / z) * r.range(0.5, 1.25),
        x = r.range(0, A),
        e = Math.exp(-(z - 1) * dens * 0.9);
      p.dab(x, y, s * r.range(0.5, 1), s * r.range(0.16, 0.5), leafTone(x, y, e), 0.8, 0.15);
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
      const skin = clamp(w * 60, 0, 1);
      p.limb(pts, (u, X, y) => {
        const air = fog(X, y) * 0.86,
          uw = Math.asin(u) * w * 9,
          lt = mix(1, 0.22 + 0.95 * Math.max(0, u * side * 0.75 + Math.sqrt(1 - u * u) * 0.4), e);
        // smooth bark: slow blotches of lichen, damp runs down it, fine rings across it
        const tex =
          skin > 0.3
            ? 0.5 * c.at(uw * 0.4 + k, y * 0.7 + k) +
              0.32 * c.at(uw * 1.5 + k, y * 0.16) +
              0.26 * f.at(uw * 0.35 + k, y * 2.6) +
              0.2 * f.at(uw * 2.2, y * 2.2 + k)
            : 0.3 * c.at(uw + k, y * 0.4);
        const foot = 1 - 0.45 * Math.exp(-(base - y) / (w * 2.2));
        return mix(air, 0.03 * lt * foot * Math.exp(tex * 0.8), e) * (1 - 0.1 * (1 - e) * u * side * -1);
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
    // light falling through the rank of trunks
    p.wash(
      (x, y) => {
        const a = Math.atan2(x - gx, y + 0.25);
        return Math.max(0, 0.06 * n.at(a * 0.9 + o, 0.1) + 0.03 * n.at(a * 2.7, o)) * smooth(1.0, 0.3, y);
      },
      (v, a) => v + a,
      6,
    );
  },
};

export const orchard = {
  title: "Old Orchard, Hoar Frost",
  aspect: 1.25,
  look: { format: "6x7", film: "iso125", ev: 0.3, contrast: 1.08, vignette: 0.24, glow: 0.06 },
  paint(p, r) {
    const A = p.A,
      yh = r.range(0.5, 0.54),
      vx = A * r.range(0.42, 0.58),
      n = tile("soft"),
      o = r.next(),
      fogTone = 0.36;
    sky(p, r, { top: 0.13, low: 0.4, at: yh, gx: 0.6, gy: yh, glow: 0.12, cloud: 0.06 });
    treeLine(p, r, () => yh + 0.003, { size: 0.05, tone: 0.22, fill: 0.5, gap: 0.32 });
    mist(p, r, {
      tone: fogTone,
      amount: (_x, y) => 0.7 * Math.exp(-(((y - yh) / 0.045) ** 2)),
      y0: yh - 0.15,
      y1: yh + 0.1,
    });
    const g = groundNoise(r, { yh, freq: 2.2, A });
    p.hill(
      (x) => yh + 0.003 * n.at(x * 0.3, o),
      (x, y) => {
        const z = 0.28 / (y - yh + 0.012),
          e = clamp(Math.exp(-(z - 1) * 0.16)),
          X = (x - vx) * z;
        return mix(fogTone, 0.26 * Math.exp(0.3 * g(x, y)) * (1 - 0.3 * Math.cos(X * 6.9) * clamp(4 / z)), e);
      },
    );
    for (let i = 0; i < 20000; i++) {
      // frosted grass
      const u = r.next(),
        y = yh + 0.012 + (1.03 - yh) * u ** 1.25,
        z = 0.28 / (y - yh + 0.012),
        x = r.range(0, A),
        L = (0.015 / z) * r.range(0.4, 1.3),
        a = -1.57 + r.gauss() * 0.8,
        e = clamp(Math.exp(-(z - 1) * 0.16));
      const t = mix(fogTone, r.pick([0.07, 0.14, 0.3, 0.5, 0.72]), e);
      p.stroke(x, y, x + Math.cos(a) * L, y + Math.sin(a) * L, 0.0006 / z + 0.0001, 0.0002 / z, t, t, 0.7);
    }
    const trees = [];
    for (let row = -4; row <= 4; row++)
      for (let k = 0; k < 7; k++)
        trees.push({
          X: (row + 0.5 + r.gauss() * 0.05) * 0.92,
          z: 1.02 + k * 0.78 + r.gauss() * 0.06,
          m: r.int(0, 3),
          f: r.chance(0.5),
          s: r.range(0.85, 1.12),
          l: r.gauss() * 0.07,
        });
    trees.sort((a, b) => b.z - a.z);
    const lit = limbLight(1, 0.35, 0.5);
    for (const t of trees) {
      const x = vx + (t.X * 0.62) / t.z,
        y = yh + 0.28 / t.z - 0.012,
        size = (0.6 / t.z) * t.s;
      if (x < -size * 0.6 || x > A + size * 0.6) continue;
      const e = Math.exp(-(t.z - 1) * 0.42),
        model = growTree({
          seed: 60 + t.m,
          crown: "cup",
          points: 480,
          trunk: 0.25,
          lean: 0.06,
          step: 0.022,
          kill: 0.05,
          pull: [0, 0.25, 0],
          tip: 0.0016,
          pipe: 2.1,
          twigs: 3.4,
          twigLen: 0.055,
          wobble: 0.26,
        });
      p.dab(x, y + 0.004 / t.z, size * 0.2, size * 0.025, mix(fogTone, 0.1, e), 0.5, 1);
      drawTree(p, model, x, y, size, {
        tone: mix(fogTone * 0.95, 0.035, e),
        flip: t.f,
        rot: t.l,
        frost: 0.5 + 0.25 * e,
        frostTone: mix(fogTone * 1.15, 1.15, 0.04 + 0.96 * e),
        lut: lit,
        min: t.z > 2.4 ? 0.000125 : 0,
      });
      for (let i = 0; i < 60; i++) {
        const a = r.gauss() * 0.9 - 1.57,
          L = size * 0.06 * r.range(0.5, 1.2),
          q = x + r.gauss() * size * 0.04;
        p.stroke(
          q,
          y + 0.006 / t.z,
          q + Math.cos(a) * L,
          y + Math.sin(a) * L,
          0.0008 / t.z,
          0.0003 / t.z,
          mix(fogTone, r.pick([0.1, 0.9]), e),
        );
      }
    }
  },
};

export const fern = {
  title: "Ferns, Pell Wood",
  aspect: 0.8,
  look: { format: "6x7", film: "iso125", ev: 0.2, contrast: 1.06, vignette: 0.34, glow: 0.07 },
  paint(p, r) {
    const A = p.A,
      n = tile("soft"),
      c = tile("cloud"),
      o = r.next();
    p.wash(
      (x, y) =>
        0.035 *
        Math.exp(0.7 * n.at(x * 0.4 + o, y * 0.4) + 0.35 * c.at(x * 0.3, y * 0.3 + o)) *
        mix(1.9, 0.5, y),
      (_a, b) => b,
      4,
    );
    for (let i = 0; i < 46; i++)
      p.dab(
        r.range(0, A),
        r.range(0, 0.6),
        r.range(0.01, 0.035),
        r.range(0.01, 0.035),
        r.range(0.08, 0.3),
        0.35,
        0.3,
      );
    blur(p.px, p.w, p.h, p.h * 0.014);
    const frond = (x, y, a, len, curl, tone, detail, wide) => {
      const N = Math.round(26 * detail),
        pts = [];
      for (let i = 0; i <= N; i++) {
        pts.push([x, y, a]);
        const t = i / N;
        x += (Math.cos(a) * len) / N;
        y += (Math.sin(a) * len) / N;
        a += (curl / N) * (0.4 + 1.6 * t * t);
      }
      for (let i = 1; i < N; i++) {
        // pinnae in pairs, shrinking towards the tip
        const t = i / N,
          [px, py, pa] = pts[i],
          L = len * wide * Math.sin(Math.min(1, t * 5 + 0.25) * 1.57) * (1 - t) ** 0.85 + len * 0.006;
        for (const s of [-1, 1]) {
          const b0 = pa + s * (1.28 - 0.35 * t) + r.gauss() * 0.05,
            M = Math.max(4, Math.round(13 * detail * (1 - t * 0.6)));
          const shade = tone * (s * Math.cos(pa) > 0 ? 0.72 : 1.1) * r.range(0.85, 1.15);
          let X = px,
            Y = py,
            b = b0;
          const step = L / M;
          for (let k = 0; k < M; k++) {
            const u = k / M,
              nx = X + Math.cos(b) * step,
              ny = Y + Math.sin(b) * step,
              w = step * 0.32,
              l = L * 0.19 * (1 - u) ** 0.7 + step * 0.3;
            for (const q of [-1, 1]) {
              // leaflets, bright along the upper edge
              const d = b + q * 1.05,
                ex = X + Math.cos(d) * l,
                ey = Y + Math.sin(d) * l,
                v = shade * (q * s < 0 ? 1.12 : 0.82);
              p.stroke(X, Y, mix(X, ex, 0.55), mix(Y, ey, 0.55), w * 0.75, w * 1.05, v * 0.75, v);
              p.stroke(mix(X, ex, 0.55), mix(Y, ey, 0.55), ex, ey, w * 1.05, w * 0.15, v, v * 1.1);
            }
            p.stroke(X, Y, nx, ny, w * 0.34, w * 0.3, shade * 0.45);
            X = nx;
            Y = ny;
            b += -s * 0.03 + Math.sin(pa) * 0 + 0.022;
          }
        }
      }
      for (let i = 0; i < N; i++)
        p.stroke(
          pts[i][0],
          pts[i][1],
          pts[i + 1][0],
          pts[i + 1][1],
          len * 0.005 * (1 - i / N) + 0.0004,
          len * 0.005 * (1 - (i + 1) / N) + 0.0004,
          tone * 0.5,
        );
    };
    const rosette = (x, y, size, tone, count, detail, up) => {
      for (let i = 0; i < count; i++) {
        const t = (i + 0.5 + r.gauss() * 0.12) / count,
          a = -Math.PI * mix(0.94, 0.06, t),
          s = t < 0.5 ? -1 : 1;
        frond(
          x + r.gauss() * 0.01,
          y,
          mix(-1.57, a, up),
          size * r.range(0.8, 1.1),
          s * r.range(0.6, 1.25),
          tone * r.range(0.75, 1.2),
          detail,
          0.2,
        );
      }
    };
    // three depths, each laid down and then thrown out of focus
    for (let i = 0; i < 5; i++)
      rosette(r.range(-0.05, 1.05) * A, r.range(0.42, 0.72), r.range(0.3, 0.45), 0.11, 7, 0.8, 0.9);
    blur(p.px, p.w, p.h, p.h * 0.0095);
    for (let i = 0; i < 3; i++)
      rosette(
        A * [0.1, 0.9, 0.5][i] + r.gauss() * 0.05,
        0.86 + r.gauss() * 0.05,
        r.range(0.45, 0.6),
        0.2,
        7,
        0.9,
        0.85,
      );
    blur(p.px, p.w, p.h, p.h * 0.0042);
    p.map((_x, y, v) => v * mix(1, 0.5, smooth(0.6, 1.05, y)), 0.55, 1);
    const hx = A * r.range(0.36, 0.6);
    frond(hx - 0.03, 1.0, -1.95, 0.85, -0.8, 0.34, 1, 0.2);
    frond(hx + 0.03, 1.02, -1.2, 0.86, 0.95, 0.4, 1, 0.2);
    frond(hx, 1.05, -1.6, 1.0, r.pick([-1, 1]) * r.range(0.3, 0.75), 0.62, 1.12, 0.185);
    for (let i = 0; i < 3; i++) {
      // a crosier still curled
      let x = hx + r.range(-0.2, 0.2),
        y = 1.02,
        a = -1.5 + r.gauss() * 0.12;
      const l = r.range(0.3, 0.55);
      let w = 0.0042;
      const s = r.pick([-1, 1]),
        N = 110;
      for (let k = 0; k < N; k++) {
        const t = k / N,
          st = (l / N) * (t > 0.72 ? mix(1, 0.16, (t - 0.72) / 0.28) : 1),
          nx = x + Math.cos(a) * st,
          ny = y + Math.sin(a) * st;
        p.stroke(x, y, nx, ny, w, w, mix(0.12, 0.5, t));
        if (k % 3 === 0) p.stroke(x, y, x + r.gauss() * 0.006, y + r.gauss() * 0.006, 0.0005, 0.0003, 0.4);
        x = nx;
        y = ny;
        w *= 0.993;
        a += t > 0.7 ? s * 0.27 : s * 0.002;
      }
    }
  },
};
