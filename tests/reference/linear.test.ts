/** Discretisation, LQR and Kalman figures against SciPy (scripts/fixtures/make_linear.py) and published examples. */
import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { delayedHold, processCovariance, zeroOrderHold } from "#shared/control/discretise.ts";
import { dare, dareGain, filterGain, lqr, stationaryCovariance } from "#shared/control/riccati.ts";
import { expm } from "#shared/math/expm.ts";
import { fromRows } from "#shared/math/matrix.ts";
import { createPlant } from "#shared/plants/registry.ts";
import { plantSchema } from "#shared/plants/schema.ts";

type Rows = number[][];
interface Linear {
  holds: { name: string; a: Rows; b: Rows; h: number; tau: number; phi: Rows; gamma: Rows; gamma0: Rows; gamma1: Rows }[];
  covariances: { name: string; a: Rows; w: Rows; h: number; q: Rows }[];
  gains: { name: string; a: Rows; b: Rows; q: Rows; r: Rows; x: Rows; k: Rows }[];
  filters: { name: string; phi: Rows; c: Rows; q: Rows; r: Rows; p: Rows; l: Rows }[];
}
const linear = JSON.parse(readFileSync(new URL("../fixtures/linear.json", import.meta.url), "utf8")) as Linear;

/** "1 2; 3 4" as rows. */
const rows = (text: string): Rows => text.split(";").map((row) => row.trim().split(" ").map(Number));

/** Largest difference over the largest entry of what is expected. */
function distance(found: Float64Array | null, expected: Rows): number {
  expect(found).not.toBeNull();
  const wanted = expected.flat();
  expect(found).toHaveLength(wanted.length);
  const scale = Math.max(...wanted.map(Math.abs), 1e-300);
  return Math.max(...wanted.map((value, i) => Math.abs(value - (found as Float64Array)[i]) / scale));
}

describe("discretisation", () => {
  it.each(linear.holds)("holds and delayed holds agree with SciPy's expm: $name, h = $h s, input changes at $tau s", (row) => {
    const [a, b, n, m] = [fromRows(row.a), fromRows(row.b), row.a.length, row.b[0].length];
    const whole = zeroOrderHold(a, b, n, m, row.h);
    expect(distance(whole.phi, row.phi)).toBeLessThan(1e-11);
    expect(distance(whole.gamma, row.gamma)).toBeLessThan(1e-11);
    const delayed = delayedHold(a, b, n, m, row.h, row.tau);
    const scale = Math.max(...row.gamma.flat().map(Math.abs));
    for (const [found, wanted] of [
      [delayed.gamma0, row.gamma0],
      [delayed.gamma1, row.gamma1],
    ] as const) {
      wanted.flat().forEach((value, i) => {
        expect(Math.abs(value - found[i]) / scale).toBeLessThan(1e-11);
      });
    }
  });

  // Åström and Wittenmark, Computer-Controlled Systems, 3rd ed. 1997, ch. 2: closed forms of the examples.
  it("gives the textbook's double integrator with a delayed input", () => {
    const [h, tau] = [1, 0.25];
    const found = delayedHold(fromRows(rows("0 1; 0 0")), fromRows(rows("0; 1")), 2, 1, h, tau);
    expect(
      distance(found.phi, [
        [1, h],
        [0, 1],
      ]),
    ).toBeLessThan(1e-14);
    expect(distance(found.gamma0, [[(h - tau) ** 2 / 2], [h - tau]])).toBeLessThan(1e-14);
    expect(distance(found.gamma1, [[tau * (h - tau / 2)], [tau]])).toBeLessThan(1e-14);
  });

  it("gives the textbook's DC motor, whole and with half a period of delay", () => {
    const [a, b] = [fromRows(rows("-1 0; 1 0")), fromRows(rows("1; 0"))];
    const whole = zeroOrderHold(a, b, 2, 1, 1);
    expect(
      distance(whole.phi, [
        [Math.exp(-1), 0],
        [1 - Math.exp(-1), 1],
      ]),
    ).toBeLessThan(1e-14);
    expect(distance(whole.gamma, [[1 - Math.exp(-1)], [Math.exp(-1)]])).toBeLessThan(1e-14);
    const delayed = delayedHold(a, b, 2, 1, 1, 0.5);
    expect(distance(delayed.gamma0, rows("0.393469340287; 0.106530659713"))).toBeLessThan(1e-11);
    expect(distance(delayed.gamma1, rows("0.238651218541; 0.261348781459"))).toBeLessThan(1e-11);
  });

  it("keeps the order of the two inputs: scalar plant of loop-tables.md, tau = 0.6", () => {
    const found = delayedHold(Float64Array.of(Math.log(1.2)), Float64Array.of(5 * Math.log(1.2)), 1, 1, 1, 0.6);
    expect(found.gamma1[0]).toBeCloseTo(0.6217312, 7);
    expect(found.gamma0[0]).toBeCloseTo(0.3782688, 7);
  });

  it("gathers process noise over a period as the integral does: Van Loan (1978) against quadrature", () => {
    for (const row of linear.covariances) {
      const found = processCovariance(fromRows(row.a), fromRows(row.w), row.a.length, row.h);
      expect(distance(found, row.q), `${row.name}, h = ${row.h} s`).toBeLessThan(1e-9);
    }
  });

  // Moler and Van Loan, SIAM Review 45(1) 2003, example 1: a matrix on which truncated series fail.
  it("exponentiates a matrix of large norm", () => {
    const found = expm(fromRows(rows("-49 24; -64 31")), 2);
    const [p, q] = [Math.exp(-1), Math.exp(-17)];
    expect(
      distance(found, [
        [-2 * p + 3 * q, 1.5 * p - 1.5 * q],
        [-4 * p + 4 * q, 3 * p - 2 * q],
      ]),
    ).toBeLessThan(1e-12);
  });
});

describe("discrete LQR", () => {
  it.each(linear.gains)("agrees with SciPy: $name", (row) => {
    const [n, m] = [row.a.length, row.b[0].length];
    const args = [fromRows(row.a), fromRows(row.b), fromRows(row.q), fromRows(row.r), n, m] as const;
    expect(distance(dare(...args), row.x)).toBeLessThan(1e-8);
    expect(distance(lqr(...args), row.k)).toBeLessThan(1e-8);
  });

  // University of Michigan, Control Tutorials, "Inverted Pendulum": M 0.5, m 0.2, b 0.1, I 0.006, l 0.3, g 9.8, Ts 0.01 s.
  // Published in the order (x, x', phi, phi') with phi = -theta: K = [-61.9933 -33.5040 95.0597 18.8300].
  const tutorial = createPlant(
    plantSchema.parse({
      type: "pendulum-on-cart",
      cartMassKg: 0.5,
      rodMassKg: 0.2,
      rodLengthM: 0.3,
      rodInertiaKgM2: 0.006,
      cartFrictionNsPerM: 0.1,
      gravityMps2: 9.8,
    }),
  ).linear();

  it("linearises the published pendulum as published, in our order and sign", () => {
    const a = [
      [0, 0, 1, 0],
      [0, 0, 0, 1],
      [0, -2.67272727273, -0.181818181818, 0],
      [0, 31.1818181818, 0.454545454545, 0],
    ];
    expect(distance(tutorial.a, a)).toBeLessThan(1e-11);
    expect(distance(tutorial.b, rows("0; 0; 1.81818181818; -4.54545454545"))).toBeLessThan(1e-11);
  });

  it("finds the published digital gain of the pendulum", () => {
    const { phi, gamma } = zeroOrderHold(tutorial.a, tutorial.b, 4, 1, 0.01);
    const q = fromRows(rows("5000 0 0 0; 0 100 0 0; 0 0 0 0; 0 0 0 0"));
    const k = lqr(phi, gamma, q, Float64Array.of(1), 4, 1);
    expect(distance(k, [[-61.9933443314, -95.0597319918, -33.5039675679, -18.8300230829]])).toBeLessThan(1e-8);
  });

  // Closed forms and recomputed gains of the double integrator (checks.md 7.2).
  it("finds the gains of the double integrator", () => {
    const di = (h: number) => zeroOrderHold(fromRows(rows("0 1; 0 0")), fromRows(rows("0; 1")), 2, 1, h);
    const short = di(0.1);
    const k = lqr(short.phi, short.gamma, fromRows(rows("1 0; 0 1")), Float64Array.of(1), 2, 1);
    expect(distance(k, [[0.917074563114, 1.63559618505]])).toBeLessThan(1e-10);
    const long = di(1);
    const bare = lqr(long.phi, long.gamma, fromRows(rows("1 0; 0 0")), Float64Array.of(1), 2, 1);
    expect(distance(bare, [[0.5, 1]])).toBeLessThan(1e-9);
  });

  it("leaves Coulomb friction out of the design: plant F with F_c = 0.5 (loop-tables.md, row 11)", () => {
    const plant = createPlant(
      plantSchema.parse({
        type: "pendulum-on-cart",
        cartMassKg: 1.2,
        rodMassKg: 0.15,
        rodLengthM: 0.35,
        rodInertiaKgM2: 0.006,
        cartFrictionNsPerM: 0.4,
        pivotFrictionNmsPerRad: 0.002,
        coulombFrictionN: 0.5,
      }),
    );
    const { a, b } = plant.linear();
    const { phi, gamma } = zeroOrderHold(a, b, 4, 1, 0.02);
    const q = fromRows(rows("5 0 0 0; 0 20 0 0; 0 0 0.5 0; 0 0 0 0.5"));
    const k = lqr(phi, gamma, q, Float64Array.of(0.1), 4, 1);
    expect(k?.[1]).toBeCloseTo(-53.11, 2);
  });
});

// Benner, Laub and Mehrmann 1995 (DAREX, SPC 95_23); Abels and Benner 1999; exact X as in SLICOT BB02AD.
describe("Riccati benchmarks with exact solutions", () => {
  const solved = (a: Rows, b: Rows, q: Rows, r: Rows) => dare(fromRows(a), fromRows(b), fromRows(q), fromRows(r), a.length, b[0].length);

  it("1.3: a singular A", () => {
    const x = solved(rows("0 1; 0 0"), rows("0; 1"), rows("1 2; 2 4"), [[1]]);
    expect(
      distance(x, [
        [1, 2],
        [2, 2 + Math.sqrt(5)],
      ]),
    ).toBeLessThan(1e-12);
  });

  it.each([1, 100, 1e6])("2.1: R = %d", (r) => {
    const q = rows("9 6; 6 4");
    const x = solved(rows("4 3; -4.5 -3.5"), rows("1; -1"), q, [[r]]);
    const factor = (1 + Math.sqrt(1 + 4 * r)) / 2;
    expect(
      distance(
        x,
        q.map((row) => row.map((value) => factor * value)),
      ),
    ).toBeLessThan(1e-9);
  });

  it.each([1, 10, 1000])("2.3: a nilpotent A of size %d", (e) => {
    const x = solved(rows(`0 ${e}; 0 0`), rows("0; 1"), rows("1 0; 0 1"), [[1]]);
    expect(
      distance(x, [
        [1, 0],
        [0, 1 + e * e],
      ]),
    ).toBeLessThan(1e-12);
  });

  it("2.4: three inputs, an eigenvalue at 0 and one at 3", () => {
    const v = [0, 1, 2].map((i) => [0, 1, 2].map((j) => (i === j ? 1 : 0) - 2 / 3));
    const conjugated = (d: number[]) => v.map((row) => v.map((other) => d.reduce((sum, value, s) => sum + row[s] * value * other[s], 0)));
    const eye = rows("1 0 0; 0 1 0; 0 0 1");
    const x = solved(conjugated([0, 1, 3]), eye, eye, eye);
    expect(distance(x, conjugated([1, (1 + Math.sqrt(5)) / 2, (9 + Math.sqrt(85)) / 2]))).toBeLessThan(1e-12);
  });

  it("2.5: a delay chain", () => {
    const [delta, tau, gain, r] = [1, 1e4, 1, 0.25];
    const [a, b] = [1 - delta / tau, (gain * delta) / tau];
    const x = solved(
      [
        [a, 0, 0, 0],
        [1, 0, 0, 0],
        [0, 1, 0, 0],
        [0, 0, 1, 0],
      ],
      [[b], [0], [0], [0]],
      rows("0 0 0 0; 0 0 0 0; 0 0 0 0; 0 0 0 1"),
      [[r]],
    );
    const t = r * (a * a - 1) + b * b;
    const corner = (t + Math.sqrt(t * t + 4 * b * b * r)) / (2 * b * b);
    expect(
      distance(x, [
        [corner, 0, 0, 0],
        [0, 1, 0, 0],
        [0, 0, 1, 0],
        [0, 0, 0, 1],
      ]),
    ).toBeLessThan(1e-9);
  });

  it("4.1: a shift register of length 5", () => {
    const shift = [0, 1, 2, 3, 4].map((i) => [0, 1, 2, 3, 4].map((j) => (j === i + 1 ? 1 : 0)));
    const eye = [0, 1, 2, 3, 4].map((i) => [0, 1, 2, 3, 4].map((j) => (i === j ? 1 : 0)));
    const x = solved(shift, rows("0; 0; 0; 0; 1"), eye, [[1]]);
    expect(
      distance(
        x,
        eye.map((row, i) => row.map((value) => value * (i + 1))),
      ),
    ).toBeLessThan(1e-12);
  });

  it("the example of Octave's control package for dare, with its gain", () => {
    const [a, b] = [fromRows(rows("0.4 1.7; 0.9 3.8")), fromRows(rows("0.8; 2.1"))];
    const r = Float64Array.of(3);
    const x = dare(a, b, fromRows(rows("1 -1; -1 1")), r, 2, 1);
    expect(distance(x, rows("1.53536988886 1.26226249344; 1.26226249344 10.5595806602"))).toBeLessThan(1e-10);
    expect(distance(dareGain(x as Float64Array, a, b, r, 2, 1), [[0.4092, 1.7283]])).toBeLessThan(5e-5);
  });

  it("says that there is no solution when an unstable mode is out of reach", () => {
    expect(solved(rows("2 0; 0 0.5"), rows("0; 1"), rows("1 0; 0 1"), [[1]])).toBeNull();
  });
});

describe("Kalman filter", () => {
  it.each(linear.filters)("agrees with SciPy: $name", (row) => {
    const [n, p] = [row.phi.length, row.c.length];
    const prior = stationaryCovariance(fromRows(row.phi), fromRows(row.c), fromRows(row.q), fromRows(row.r), n, p);
    expect(distance(prior, row.p)).toBeLessThan(1e-8);
    expect(distance(filterGain(prior as Float64Array, fromRows(row.c), fromRows(row.r), n, p), row.l)).toBeLessThan(1e-8);
  });

  // Sinopoli et al., IEEE TAC 49(9) 2004, scalar example A = -1.25, C = 1, Q = 1, R = 2.5, every measurement arriving
  // (checks.md 6.1); filter gain and error pole as in loop-tables.md, row 10.
  it("uses the filter gain, not the predictor gain", () => {
    const one = Float64Array.of(1);
    const prior = stationaryCovariance(Float64Array.of(-1.25), one, one, Float64Array.of(2.5), 1, 1) as Float64Array;
    expect(prior[0] / 3.18995910622).toBeCloseTo(1, 10);
    const gain = (filterGain(prior, one, Float64Array.of(2.5), 1, 1) as Float64Array)[0];
    expect(gain).toBeCloseTo(0.5606295, 7);
    expect(-1.25 * (1 - gain)).toBeCloseTo(-0.549213, 6);
  });
});
