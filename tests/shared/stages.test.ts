import { expect, it } from "vitest";
import { type Derivative, fromLibrary, stagesOf } from "#shared/simulation/stages.ts";

/** A nonlinear system of four states that depends on time, so that every stage and its time count. */
const derivative: Derivative = (dy, y, t) => {
  dy[0] = y[2] + 0.3 * t;
  dy[1] = y[3] * y[0] - y[1];
  dy[2] = -9.7 * y[0] - 0.4 * y[2] * y[2] * y[2];
  dy[3] = -3.1 * y[3] + y[1] / (1 + y[2] * y[2]);
};

it("the written-out stages for four states give the library's bits, over many steps of many lengths", () => {
  const library = fromLibrary(4, derivative);
  const written = stagesOf(4, derivative);
  const start = [0.13, -0.21, 0.37, 0.051];
  library.y.set(start);
  written.y.set(start);
  let t = 0;
  for (let step = 0; step < 400; step++) {
    const dt = 0.001 * (1 + (step % 17));
    for (const stages of [library, written]) {
      stages.first(t);
      stages.rest(t, dt);
    }
    expect(written.error(dt, 1e-10, 1e-8)).toBe(library.error(dt, 1e-10, 1e-8));
    for (const stages of [library, written]) stages.update(dt);
    expect(Array.from(written.y)).toEqual(Array.from(library.y));
    t += dt;
  }
  expect(Math.abs(written.y[0])).toBeGreaterThan(1e-3);
});
