/** Rules that span several fields of a scenario. The shape and the single ranges are in schema.ts. */
import { designLoop, type LoopDesign } from "#shared/control/design.ts";
import { quantumOf } from "#shared/control/encoding.ts";
import { type RoundTiming, roundTiming } from "#shared/network/round.ts";
import { toNs } from "#shared/network/schedule.ts";
import type { Plant } from "#shared/plants/plant.ts";
import { createPlant } from "#shared/plants/registry.ts";
import { plantSchema } from "#shared/plants/schema.ts";
import { POINTS_PER_ROUND } from "#shared/simulation/recorder.ts";
import { checkFloor } from "./check-floor.ts";
import { checkSequences } from "./check-losses.ts";
import type { Issue } from "./issues.ts";
import { schemaAt } from "./parse.ts";
import { permittedRange, quantityMeta } from "./quantity.ts";
import { Report } from "./report.ts";
import { roundsOf } from "./rounds.ts";
import type { Encoding, Loop, Scenario } from "./schema.ts";

/** Most rounds of one run; keeps a run within the memory of a browser tab. */
export const MAX_ROUNDS = 200_000;

/** Most numbers in the recorded series of one run: 160 MB. */
const MAX_VALUES = 20_000_000;

export interface Checked {
  issues: Issue[];
  timing: RoundTiming;
  /** The loop's design; null when there are issues. */
  design: LoopDesign | null;
}

/** Every rule across fields; an empty list means that the scenario runs. */
export function checkScenario(scenario: Scenario): Checked {
  const report = new Report();
  const loop = scenario.loops[0];
  const timing = roundTiming(scenario);
  if (!checkStateSpace(report, loop)) return { issues: [...report.issues, ...timing.issues], timing, design: null };

  const plant = createPlant(loop.plant);
  checkLoop(report, scenario, loop, plant);
  checkFloor(report, scenario, timing);
  checkSequences(report, scenario, timing);
  checkEvents(report, scenario, plant);
  checkLimits(report, scenario, plant);
  const issues = [...report.issues, ...timing.issues];
  // A design needs consistent sizes and instants; without them its complaints would only repeat what was said.
  if (issues.length > 0) return { issues, timing, design: null };
  return { timing, ...designLoop(scenario, timing.ns.loops[0]) };
}

function checkStateSpace(report: Report, loop: Loop): boolean {
  const { plant } = loop;
  if (plant.type !== "state-space") return true;
  const path = "loops[0].plant";
  const before = report.issues.length;
  const n = plant.a.length;
  const m = plant.b[0].length;
  plant.a.forEach((row, i) => {
    report.length(`${path}.a[${i}]`, `Row ${i + 1} of A`, row.length, n, `because A has ${n} rows`);
  });
  report.length(`${path}.b`, "Rows of B", plant.b.length, n, `because A has ${n} rows`);
  plant.b.forEach((row, i) => {
    report.length(`${path}.b[${i}]`, `Row ${i + 1} of B`, row.length, m, `because the first row of B has ${m} entries`);
  });
  plant.c?.forEach((row, i) => {
    report.length(`${path}.c[${i}]`, `Row ${i + 1} of C`, row.length, n, `because A has ${n} rows`);
  });
  if (plant.d) {
    report.length(`${path}.d`, "Rows of D", plant.d.length, plant.c?.length ?? 0, "because C has as many rows");
    plant.d.forEach((row, i) => {
      report.length(`${path}.d[${i}]`, `Row ${i + 1} of D`, row.length, m, `because B has ${m} columns`);
    });
  }
  if (plant.states) report.length(`${path}.states`, "Names of states", plant.states.length, n, `because A has ${n} rows`);
  if (plant.inputs) report.length(`${path}.inputs`, "Names of inputs", plant.inputs.length, m, `because B has ${m} columns`);
  if (plant.outputs) report.length(`${path}.outputs`, "Names of outputs", plant.outputs.length, plant.c?.length ?? 0, "because C has as many rows");
  if (report.issues.length > before) return false;
  const built = createPlant(plant);
  const names = [...built.outputs, ...built.inputs].map(({ name }) => name);
  names.forEach((name, i) => {
    if (names.indexOf(name) !== i)
      report.add("duplicate-name", path, `The name "${name}" is used twice; states, outputs and inputs need different names.`);
  });
  return report.issues.length === before;
}

function checkEncoding(report: Report, path: string, encoding: Encoding | null): void {
  if (!encoding) return;
  if (encoding.hi <= encoding.lo) {
    report.add(
      "out-of-order",
      `${path}.hi`,
      `The range of the encoding ends at ${encoding.hi} but begins at ${encoding.lo}; the end has to be larger.`,
    );
    return;
  }
  const quantum = quantumOf(encoding);
  const steps = -encoding.lo / quantum;
  const lastCode = (encoding.hi - encoding.lo) / quantum - 1;
  if (Math.abs(steps - Math.round(steps)) > 1e-9 || steps < -1e-9 || steps > lastCode + 1e-9) {
    report.add(
      "zero-not-on-grid",
      `${path}.lo`,
      `Zero (the operating point) is not a value of this encoding: its steps are ${quantum} wide and start at ${encoding.lo}. Choose a range of which 0 is a whole number of steps from the lower end, such as ${-encoding.hi} to ${encoding.hi}.`,
    );
  }
}

function checkLoop(report: Report, scenario: Scenario, loop: Loop, plant: Plant): void {
  const { n, m } = plant;
  const states = plant.states.map(({ name }) => name);
  const inputs = plant.inputs.map(({ name }) => name);
  const outputs = plant.outputs.map(({ name }) => name);
  const { sensor, controller, actuator, start } = loop;
  const at = "loops[0]";
  const nStates = `because the plant has ${n} states (${states.join(", ")})`;
  const nInputs = `because the plant has ${m} ${m === 1 ? "input" : "inputs"} (${inputs.join(", ")})`;

  if (start.state && report.length(`${at}.start.state`, "Start values", start.state.length, n, nStates) && plant.end) {
    const value = start.state[plant.end.state];
    if (Math.abs(value) >= plant.end.at) {
      report.add(
        "out-of-range",
        `${at}.start.state[${plant.end.state}]`,
        `The run starts at ${value} m, at or beyond the ${plant.end.label}; permitted within ±${plant.end.at} m.`,
      );
    }
  }
  if (start.estimate) report.length(`${at}.start.estimate`, "Start values of the estimate", start.estimate.length, n, nStates);

  sensor.signals.forEach(({ signal, encoding }, i) => {
    report.known(`${at}.sensor.signals[${i}].signal`, signal, outputs, "a state or output of this plant");
    if (sensor.signals.findIndex((other) => other.signal === signal) !== i)
      report.add("duplicate-name", `${at}.sensor.signals[${i}].signal`, `"${signal}" is measured twice.`);
    checkEncoding(report, `${at}.sensor.signals[${i}].encoding`, encoding);
  });
  const p = sensor.signals.length;

  report.length(`${at}.actuator.inputs`, "Inputs of the actuator", actuator.inputs.length, m, nInputs);
  actuator.inputs.forEach((input, i) => {
    if (input.hi <= input.lo)
      report.add(
        "out-of-order",
        `${at}.actuator.inputs[${i}].hi`,
        `Lowest and largest input are both ${input.hi}; the largest has to be above the lowest.`,
      );
    checkEncoding(report, `${at}.actuator.inputs[${i}].encoding`, input.encoding);
  });
  if (controller.limits) report.length(`${at}.controller.limits`, "Limits of the controller", controller.limits.length, m, nInputs);

  const { law, estimator } = controller;
  const integrable = plant.outputs.filter(({ d }) => d.every((value) => value === 0)).map(({ name }) => name);
  if (law.type === "pid") {
    const measured = sensor.signals.map(({ signal }) => signal);
    report.known(`${at}.controller.law.signal`, law.signal, measured, "a measured signal");
    if (m !== 1) report.add("not-possible", `${at}.controller.law.type`, `A PID drives one input; this plant has ${m}.`);
    if (actuator.onLoss.policy === "plan")
      report.add("not-possible", `${at}.actuator.onLoss.policy`, "A PID has no model and cannot plan commands ahead; choose hold or zero.");
  } else {
    if (law.type === "lqr") {
      report.length(`${at}.controller.law.stateWeights`, "State weights", law.stateWeights.length, n, nStates);
      report.length(`${at}.controller.law.inputWeights`, "Input weights", law.inputWeights.length, m, nInputs);
    } else {
      report.length(`${at}.controller.law.gain`, "Rows of the gain", law.gain.length, m, nInputs);
      law.gain.forEach((row, i) => {
        report.length(`${at}.controller.law.gain[${i}]`, `Row ${i + 1} of the gain`, row.length, n, nStates);
      });
      law.integral.forEach(({ gain }, i) => {
        report.length(`${at}.controller.law.integral[${i}].gain`, "Integral gains", gain.length, m, nInputs);
      });
    }
    law.integral.forEach(({ signal }, i) => {
      report.known(`${at}.controller.law.integral[${i}].signal`, signal, integrable, "a state, or an output that the input does not reach directly");
    });
    if (estimator.type === "direct") {
      const missing = states.filter((name) => !sensor.signals.some(({ signal }) => signal === name));
      if (missing.length || p !== n) {
        report.add(
          "not-possible",
          `${at}.controller.estimator.type`,
          missing.length
            ? `Without a Kalman filter every state has to be measured; ${missing.join(", ")} ${missing.length === 1 ? "is" : "are"} not.`
            : "Without a Kalman filter only the states may be measured, each once.",
        );
      }
    } else {
      report.length(`${at}.controller.estimator.processNoise`, "Process noise figures", estimator.processNoise.length, n, nStates);
      report.length(
        `${at}.controller.estimator.measurementNoise`,
        "Assumed sensor noise figures",
        estimator.measurementNoise.length,
        p,
        `because ${p} signals are measured`,
      );
    }
  }
  if (controller.acknowledgement === "reported" && controller.placement !== "apart") {
    report.add(
      "not-possible",
      `${at}.controller.acknowledgement`,
      controller.placement === "sensor"
        ? "The input in force is reported with the measurement message; a controller with the sensor needs no such message. Choose none or at once."
        : "A controller with the actuator always knows the input in force. Choose none.",
    );
  }
  if (actuator.silence?.reaction === "brake" && !plant.brake)
    report.add("not-possible", `${at}.actuator.silence.reaction`, "This plant has no brake; choose ramp or power off.");

  const referable = [...states, ...(law.type === "pid" ? [law.signal] : law.integral.map(({ signal }) => signal))];
  loop.references.forEach(({ signal, profile }, i) => {
    report.known(`${at}.references[${i}].signal`, signal, referable, "a state of this plant or a signal that the law controls");
    if (loop.references.findIndex((other) => other.signal === signal) !== i)
      report.add("duplicate-name", `${at}.references[${i}].signal`, `"${signal}" has two references.`);
    checkProfile(report, `${at}.references[${i}].profile`, profile);
  });
  loop.feedforward.forEach(({ signal, profile }, i) => {
    report.known(`${at}.feedforward[${i}].signal`, signal, inputs, "an input of this plant");
    checkProfile(report, `${at}.feedforward[${i}].profile`, profile);
  });
  const rounds = roundsOf(scenario);
  const columns = plant.outputs.length + m + loop.references.length;
  if (rounds <= MAX_ROUNDS && rounds * POINTS_PER_ROUND * columns > MAX_VALUES) {
    const most = Math.floor(MAX_VALUES / (POINTS_PER_ROUND * columns));
    report.add(
      "out-of-range",
      "run.durationS",
      `${rounds} rounds of ${columns} signals are more than a run can record; at most ${most} rounds, ${(most * scenario.round.periodS).toFixed(1)} s.`,
    );
  }
  if (rounds > MAX_ROUNDS) {
    report.add(
      "out-of-range",
      "run.durationS",
      `${scenario.run.durationS} s are ${rounds} rounds of ${scenario.round.periodS * 1000} ms; at most ${MAX_ROUNDS} rounds, ${(MAX_ROUNDS * scenario.round.periodS).toFixed(1)} s.`,
    );
  }
}

function checkProfile(report: Report, path: string, profile: Loop["references"][number]["profile"]): void {
  if (profile.type === "sine") return;
  profile.points.forEach((point, i) => {
    const before = profile.points[i - 1];
    if (before && point.atS <= before.atS)
      report.add(
        "out-of-order",
        `${path}.points[${i}].atS`,
        `Point ${i + 1} is at ${point.atS} s, not later than the point before it (${before.atS} s).`,
      );
  });
}

function checkEvents(report: Report, scenario: Scenario, plant: Plant): void {
  const channels = plant.channels.map(({ name }) => name);
  scenario.pushes.forEach((push, i) => {
    report.known(`pushes[${i}].channel`, push.channel, channels, "a place where this plant can be pushed");
    if ("untilS" in push) report.ordered(`pushes[${i}].untilS`, push.fromS, push.untilS);
    if (push.type === "noise") {
      const values = Math.ceil((Math.min(push.untilS ?? scenario.run.durationS, scenario.run.durationS) - push.fromS) / push.intervalS);
      if (values > MAX_ROUNDS)
        report.add(
          "out-of-range",
          `pushes[${i}].intervalS`,
          `The noise needs ${values} values; at most ${MAX_ROUNDS}. Hold each value longer, or let the push end earlier.`,
        );
    }
  });
  const spec = scenario.loops[0].plant;
  scenario.changes.forEach((change, i) => {
    report.known(`changes[${i}].parameter`, change.parameter, plant.changeable, "a parameter of this plant that can change in mid-run");
    if (!plant.changeable.includes(change.parameter)) return;
    const schema = schemaAt(plantSchema, [change.parameter], spec);
    const meta = schema && quantityMeta(schema);
    if (meta && (change.value < meta.min || change.value > meta.max)) {
      report.add(
        "out-of-range",
        `changes[${i}].value`,
        `${meta.label} would become ${change.value} ${meta.unit}; permitted ${permittedRange(meta)}.`,
      );
    }
  });
}

function checkLimits(report: Report, scenario: Scenario, plant: Plant): void {
  const signals = [...plant.outputs, ...plant.inputs].map(({ name }) => name);
  scenario.limits.forEach((limit, i) => {
    const path = `limits[${i}]`;
    if (limit.type === "saturation") return;
    report.known(`${path}.signal`, limit.signal, signals, "a state, output or input of this plant");
    if (limit.type === "within") {
      if (limit.lo === null && limit.hi === null) report.add("missing-field", `${path}.hi`, "Give a lower bound, an upper bound, or both.");
      if (limit.lo !== null && limit.hi !== null && limit.hi <= limit.lo)
        report.add("out-of-order", `${path}.hi`, `The upper bound ${limit.hi} is not above the lower bound ${limit.lo}.`);
    }
    const end = scenario.run.durationS;
    if (limit.type === "settle") {
      if (toNs(limit.afterS) + toNs(limit.withinS) > toNs(end)) {
        report.add(
          "out-of-range",
          `${path}.withinS`,
          `It may settle until ${(limit.afterS + limit.withinS).toFixed(3)} s, but the run ends at ${end} s. Lengthen the run, or shorten the time.`,
        );
      }
      return;
    }
    report.ordered(`${path}.untilS`, limit.fromS, limit.untilS);
    if (limit.fromS >= end) report.add("out-of-range", `${path}.fromS`, `The limit begins at ${limit.fromS} s, but the run ends at ${end} s.`);
  });
}
