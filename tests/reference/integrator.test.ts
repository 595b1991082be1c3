/** The integrator against the published pair, published test problems and its order. */
import { describe, expect, it } from "vitest";
import { Integrator } from "#shared/simulation/integrator.ts";
import type { Derivative } from "#shared/simulation/stages.ts";

const always = () => true;

/** Cash and Karp, ACM TOMS 16(3) 1990, 201-222: nodes, stage weights, weights of order 5 and 4. */
const C = [0, 1 / 5, 3 / 10, 3 / 5, 1, 7 / 8];
const A = [
  [],
  [1 / 5],
  [3 / 40, 9 / 40],
  [3 / 10, -9 / 10, 6 / 5],
  [-11 / 54, 5 / 2, -70 / 27, 35 / 27],
  [1631 / 55296, 175 / 512, 575 / 13824, 44275 / 110592, 253 / 4096],
];
const B5 = [37 / 378, 0, 250 / 621, 125 / 594, 0, 512 / 1771];
const B4 = [2825 / 27648, 0, 18575 / 48384, 13525 / 55296, 277 / 14336, 1 / 4];

function byHand(f: Derivative, y0: number[], t: number, h: number) {
  const k: Float64Array[] = [];
  for (let i = 0; i < 6; i++) {
    const y = Float64Array.from(y0, (v, j) => v + h * A[i].reduce((sum, a, s) => sum + a * k[s][j], 0));
    k[i] = new Float64Array(y0.length);
    f(k[i], y, t + C[i] * h);
  }
  const sum = (b: number[]) => y0.map((v, j) => v + h * b.reduce((total, w, s) => total + w * k[s][j], 0));
  return { y5: sum(B5), y4: sum(B4) };
}

/** One step of length h whatever its error. */
function oneStep(f: Derivative, y0: number[], t: number, h: number): Float64Array {
  const integrator = new Integrator(y0.length, f, h, 1e9, 0);
  integrator.y.set(y0);
  expect(integrator.advance(t, t + h, always)).toBe("done");
  return integrator.y;
}

function integrate(f: Derivative, y0: number[], until: number, tolerance: number, segment = 0.1): Float64Array {
  const integrator = new Integrator(y0.length, f, segment, tolerance, tolerance);
  integrator.y.set(y0);
  const count = Math.ceil(until / segment);
  for (let i = 0; i < count; i++) expect(integrator.advance((until * i) / count, (until * (i + 1)) / count, always)).toBe("done");
  return integrator.y;
}

const growth: Derivative = (dy, y) => {
  dy[0] = y[0];
};
const bell: Derivative = (dy, y, t) => {
  dy[0] = -2 * t * y[0];
};
/** DETEST B1 (Hull, Enright, Fellen and Sedgwick 1972): Lotka and Volterra. */
const prey: Derivative = (dy, y) => {
  dy[0] = 2 * (y[0] - y[0] * y[1]);
  dy[1] = -(y[1] - y[0] * y[1]);
};
const pendulum: Derivative = (dy, y) => {
  dy[0] = y[1];
  dy[1] = -Math.sin(y[0]) + 0.1 * Math.cos(y[0] * y[1]);
};

describe("one step", () => {
  // checks.md 8, ode.cash_karp_step: the fifth-order value.
  it.each([
    ["y' = y, h = 0.1", growth, 0, 0.1, 1.10517091792],
    ["y' = y, h = 0.5", growth, 0, 0.5, 1.64871744792],
    ["y' = -2 t y, h = 0.5", bell, 0, 0.5, 0.778790722656],
  ] as const)("is that of the published pair: %s", (_, f, t, h, value) => {
    expect(oneStep(f, [1], t, h)[0]).toBeCloseTo(value, 11);
  });

  it("is the published tableau, worked out by hand, to the last digits", () => {
    for (const [f, y0] of [
      [growth, [1]],
      [bell, [1]],
      [prey, [1, 3]],
      [pendulum, [1.2, -0.7]],
    ] as const) {
      const hand = byHand(f, [...y0], 0.3, 0.2).y5;
      oneStep(f, [...y0], 0.3, 0.2).forEach((value, i) => {
        expect(Math.abs(value - hand[i])).toBeLessThan(4e-16 * Math.max(1, Math.abs(value)));
      });
    }
  });

  // checks.md 8: y5 - y4 of y' = y at h = 0.5 is 1.64871744792 - 1.64872185071.
  it("judges its error by the difference to the embedded fourth-order value", () => {
    const { y5, y4 } = byHand(growth, [1], 0, 0.5);
    expect(y4[0]).toBeCloseTo(1.64872185071, 11);
    const error = Math.abs(y5[0] - y4[0]);
    const firstStep = (absolute: number) => {
      const integrator = new Integrator(1, growth, 0.5, absolute, 0);
      integrator.y[0] = 1;
      let first = 0;
      integrator.advance(0, 0.5, () => {
        if (first === 0) first = integrator.stepLength;
        return true;
      });
      return first;
    };
    expect(firstStep(error * 1.001)).toBe(0.5);
    expect(firstStep(error * 0.999)).toBeLessThan(0.5);
  });

  it("has an error that falls with the sixth power of its length", () => {
    for (const [f, y0] of [
      [prey, [1, 3]],
      [pendulum, [1.2, -0.7]],
    ] as const) {
      const error = (h: number) => {
        const exact = integrate(f, [...y0], h, 1e-15, h / 32);
        return Math.hypot(...oneStep(f, [...y0], 0, h).map((value, i) => value - exact[i]));
      };
      const order = Math.log2(error(0.1) / error(0.05));
      expect(order).toBeGreaterThan(5.7);
      expect(order).toBeLessThan(6.3);
    }
  });

  it("gives values between its ends whose error falls with the fifth power of its length", () => {
    const error = (h: number, theta: number) => {
      const integrator = new Integrator(2, pendulum, h, 1e9, 0);
      integrator.y.set([1.2, -0.7]);
      const between = new Float64Array(2);
      integrator.advance(0, h, () => {
        integrator.interpolate(theta, between);
        return true;
      });
      const exact = integrate(pendulum, [1.2, -0.7], theta * h, 1e-15, (theta * h) / 32);
      return Math.hypot(...between.map((value, i) => value - exact[i]));
    };
    for (const theta of [0.1, 0.37, 0.5, 0.8]) {
      const order = Math.log2(error(0.2, theta) / error(0.1, theta));
      expect(order, `theta = ${theta}`).toBeGreaterThan(4.7);
      expect(order, `theta = ${theta}`).toBeLessThan(6.3);
    }
  });
});

describe("many steps", () => {
  it("converge with the fifth power of their length", () => {
    const exact = integrate(prey, [1, 3], 2, 1e-14, 0.01);
    const error = (steps: number) => {
      const integrator = new Integrator(2, prey, 2 / steps, 1e9, 0);
      integrator.y.set([1, 3]);
      integrator.advance(0, 2, always);
      return Math.hypot(...integrator.y.map((value, i) => value - exact[i]));
    };
    const order = Math.log2(error(64) / error(128));
    expect(order).toBeGreaterThan(4.7);
    expect(order).toBeLessThan(5.5);
  });

  // DETEST (Hull, Enright, Fellen and Sedgwick, SIAM J. Numer. Anal. 9(4) 1972), values of checks.md 8 at t = 20.
  const scalar =
    (f: (y: number, t: number) => number): Derivative =>
    (dy, y, t) => {
      dy[0] = f(y[0], t);
    };
  it.each([
    ["A1", scalar((y) => -y), [1], [2.06115362244e-9], 1e-12],
    ["A2", scalar((y) => -(y ** 3) / 2), [1], [0.218217890236], 1e-10],
    ["A3", scalar((y, t) => y * Math.cos(t)), [1], [2.49165027185], 1e-10],
    ["A4", scalar((y) => (y / 4) * (1 - y / 20)), [1], [17.7301664813], 1e-9],
    ["B1", prey, [1, 3], [0.676187600858, 0.186081609964], 1e-9],
    [
      "B5",
      ((dy, y) => {
        dy[0] = y[1] * y[2];
        dy[1] = -y[0] * y[2];
        dy[2] = -0.51 * y[0] * y[1];
      }) as Derivative,
      [0, 1, 1],
      [-0.939657079873, -0.3421177754, 0.74141265962],
      1e-10,
    ],
    [
      "E2",
      ((dy, y) => {
        dy[0] = y[1];
        dy[1] = (1 - y[0] * y[0]) * y[1] - y[0];
      }) as Derivative,
      [2, 0],
      [2.00814976217, -0.0425088752732],
      1e-9,
    ],
  ] as const)("solve DETEST %s", (_, f, y0, wanted, tolerance) => {
    const y = integrate(f, [...y0], 20, 1e-13);
    wanted.forEach((value, i) => {
      expect(Math.abs(y[i] - value)).toBeLessThan(tolerance);
    });
  });

  // Hairer, Norsett and Wanner, Solving Ordinary Differential Equations I, p. 129: after one period the orbit closes.
  it("close the Arenstorf orbit", () => {
    const mu = 0.012277471;
    const arenstorf: Derivative = (dy, y) => {
      const d1 = ((y[0] + mu) ** 2 + y[1] ** 2) ** 1.5;
      const d2 = ((y[0] - (1 - mu)) ** 2 + y[1] ** 2) ** 1.5;
      dy[0] = y[2];
      dy[1] = y[3];
      dy[2] = y[0] + 2 * y[3] - ((1 - mu) * (y[0] + mu)) / d1 - (mu * (y[0] - (1 - mu))) / d2;
      dy[3] = y[1] - 2 * y[2] - ((1 - mu) * y[1]) / d1 - (mu * y[1]) / d2;
    };
    const start = [0.994, 0, 0, -2.0015851063790824];
    const y = integrate(arenstorf, start, 17.065216560157964, 1e-13);
    // the orbit multiplies an error by some millions; position is the more forgiving half
    expect(Math.hypot(y[0] - start[0], y[1] - start[1])).toBeLessThan(1e-6);
  });

  it.each([
    [0.1, [0.219883535201, 0.942707684634, -0.978765984106, 0.328797799096]],
    [0.5, [-0.578043295304, 0.863384000919, -0.959508373038, -0.0650491512671]],
  ] as const)("follow Kepler's ellipse of eccentricity %d for 20 s", (e, wanted) => {
    const kepler: Derivative = (dy, y) => {
      const r3 = (y[0] ** 2 + y[1] ** 2) ** 1.5;
      dy[0] = y[2];
      dy[1] = y[3];
      dy[2] = -y[0] / r3;
      dy[3] = -y[1] / r3;
    };
    const y = integrate(kepler, [1 - e, 0, 0, Math.sqrt((1 + e) / (1 - e))], 20, 1e-13);
    wanted.forEach((value, i) => {
      expect(Math.abs(y[i] - value)).toBeLessThan(1e-9);
    });
  });

  // loop-tables.md, likely mistake 1: at rest the library's own step grows without bound, and time stands still.
  it("go on after a long rest", () => {
    let u = 0;
    const integrator = new Integrator(
      2,
      (dy, y) => {
        dy[0] = y[1];
        dy[1] = u;
      },
      0.01,
      1e-8,
      1e-8,
    );
    let k = 0;
    for (; k < 50; k++) integrator.advance(k * 0.02, (k + 1) * 0.02, always);
    u = 1;
    for (; k < 60; k++) integrator.advance(k * 0.02, (k + 1) * 0.02, always);
    expect(integrator.y[0]).toBeCloseTo(0.02, 14);
    expect(integrator.y[1]).toBeCloseTo(0.2, 14);
  });

  it("give up on a value that runs off to infinity, and keep the last finite state", () => {
    const integrator = new Integrator(
      1,
      (dy, y) => {
        dy[0] = y[0] * y[0];
      },
      0.01,
      1e-8,
      1e-8,
    );
    integrator.y[0] = 1;
    let outcome = "done";
    for (let k = 0; k < 200 && outcome === "done"; k++) outcome = integrator.advance(k * 0.01, (k + 1) * 0.01, always);
    expect(outcome).toBe("stiff");
    expect(Number.isFinite(integrator.y[0])).toBe(true);
  });
});
