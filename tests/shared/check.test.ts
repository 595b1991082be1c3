import { describe, expect, it } from "vitest";
import { checkScenario } from "#shared/scenario/check.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { simulate } from "#shared/simulation/simulate.ts";
import { scalar, template } from "../helpers/scenarios.ts";

const issuesOf = (scenario: unknown) => {
  const outcome = simulate(scenario);
  return outcome.ok ? [] : outcome.issues;
};
/** The pendulum template as plain JSON with one field set, or left out when the value is undefined. */
function withField(path: string, value: unknown): unknown {
  const json: unknown = JSON.parse(JSON.stringify(template(0)));
  const keys = path.replaceAll(/\[(\d+)\]/g, ".$1").split(".");
  const last = keys.pop() ?? "";
  const parent = keys.reduce<unknown>((at, key) => (at as Record<string, unknown>)[key], json) as Record<string, unknown>;
  if (value === undefined) delete parent[last];
  else parent[last] = value;
  return json;
}

describe("a template", () => {
  it.each(TEMPLATES.map(({ title, scenario }) => [title, scenario] as const))(
    "%s runs at once, its round fits and its limits hold",
    (_title, scenario) => {
      const { issues, timing } = checkScenario(scenario);
      expect(issues).toEqual([]);
      expect(timing.fits).toBe(true);
      const outcome = simulate(scenario);
      expect(outcome.ok && outcome.result.verdict).toBe("holds");
    },
  );
});

describe("a bad value is named with field, value and permitted range", () => {
  it.each<[string, string, unknown, RegExp]>([
    ["a negative mass", "loops[0].plant.cartMassKg", -1, /Cart mass is -1 kg; permitted 0.01 to 1.+ kg/],
    ["a number as text", "round.periodS", "20", /found "20"; permitted 0.001 to 10 s/],
    ["half a hop", "round.hops", 2.5, /whole number, found 2.5; permitted 1 to 20/],
    ["a probability above 1", "losses.process.command", 1.5, /1.5; permitted 0 to 1/],
    ["an infinite number", "run.durationS", Number.POSITIVE_INFINITY, /permitted 0.01 to 3600 s/],
    ["an unknown field", "loops[0].plant.colour", "red", /not a field/],
    ["an unknown plant", "loops[0].plant.type", "boat", /"boat"; permitted: "pendulum-on-cart", "state-space"/],
    ["a missing section", "radio", undefined, /missing/],
    ["a wrong choice", "loops[0].controller.placement", "moon", /permitted: "sensor", "apart", "actuator"/],
    ["a list for an object", "round", [], /has to be an object/],
  ])("%s", (_what, path, value, message) => {
    const issue = issuesOf(withField(path, value)).find((candidate) => candidate.path === path);
    expect(issue?.message).toMatch(message);
  });

  it("is refused when it is not even an object", () => {
    for (const input of [null, 3, "text", [], undefined]) expect(parseScenario(input).ok).toBe(false);
  });
});

describe("rules across fields", () => {
  it.each<[string, (scenario: Scenario) => void, string, string]>([
    ["a round that does not fit", (s) => (s.round.periodS = 0.01), "round.periodS", "round-does-not-fit"],
    ["a payload that the packet cannot carry", (s) => (s.round.beacon = { payloadBytes: 200, needed: false }), "radio.phy", "payload-too-long"],
    ["a state that nobody measures, without a filter", (s) => s.loops[0].sensor.signals.pop(), "loops[0].controller.estimator.type", "not-possible"],
    [
      "an encoding without zero",
      (s) => (s.loops[0].sensor.signals[0].encoding = { bits: 8, lo: -1, hi: 1.01 }),
      "loops[0].sensor.signals[0].encoding.lo",
      "zero-not-on-grid",
    ],
    [
      "too few weights",
      (s) => (s.loops[0].controller.law = { type: "lqr", stateWeights: [1], inputWeights: [1], integral: [] }),
      "loops[0].controller.law.stateWeights",
      "wrong-length",
    ],
    [
      "weights that stabilise nothing",
      (s) => (s.loops[0].controller.law = { type: "lqr", stateWeights: [0, 0, 0, 0], inputWeights: [1], integral: [] }),
      "loops[0].controller.law.stateWeights",
      "no-gain",
    ],
    [
      "a PID on a signal that is not measured",
      (s) => (s.loops[0].controller.law = { type: "pid", signal: "height", proportional: 1, integral: 0, derivative: 0, filterS: 0 }),
      "loops[0].controller.law.signal",
      "unknown-name",
    ],
    [
      "a report without a message to carry it",
      (s) => Object.assign(s.loops[0].controller, { placement: "sensor", acknowledgement: "reported" }),
      "loops[0].controller.acknowledgement",
      "not-possible",
    ],
    ["a latency that the slots do not allow", (s) => (s.loops[0].timing.actAfterSampleS = 0.001), "loops[0].timing.actAfterSampleS", "out-of-range"],
    ["a push at a place that does not exist", (s) => (s.pushes[0].channel = "roof"), "pushes[0].channel", "unknown-name"],
    [
      "a change beyond the parameter's range",
      (s) => s.changes.push({ atS: 1, parameter: "rodMassKg", value: -2 }),
      "changes[0].value",
      "out-of-range",
    ],
    [
      "a limit upside down",
      (s) => (s.limits[0] = { type: "within", signal: "angle", of: "signal", lo: 1, hi: -1, fromS: 0, untilS: null }),
      "limits[0].hi",
      "out-of-order",
    ],
    [
      "too few given deliveries",
      (s) => (s.losses.process = { type: "given", measurement: [1], command: [1], then: "error" }),
      "losses.process.measurement",
      "sequence-too-short",
    ],
    [
      "more rounds than memory holds",
      (s) => void Object.assign(s, { run: { ...s.run, durationS: 3600 }, round: { ...s.round, periodS: 0.001 } }),
      "run.durationS",
      "out-of-range",
    ],
    ["an outage that ends before it begins", (s) => (s.losses.outages[0].untilS = 1), "losses.outages[0].untilS", "out-of-order"],
  ])("%s", (_what, change, path, code) => {
    const scenario = template(0);
    change(scenario);
    expect(checkScenario(scenario).issues).toContainEqual(expect.objectContaining({ path, code }));
    expect(simulate(scenario).ok).toBe(false);
  });

  it("matrices that do not match are told row by row", () => {
    const scenario = scalar((s) => {
      s.loops[0].plant = { type: "state-space", a: [[0, 1], [0]], b: [[1]] };
    });
    expect(checkScenario(scenario).issues.map(({ path }) => path)).toEqual(["loops[0].plant.a[1]", "loops[0].plant.b"]);
  });
});
