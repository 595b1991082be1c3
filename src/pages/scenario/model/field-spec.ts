/**
 * Everything that a field, an error and a list of changes need to know of one setting: its words, symbol, unit on the
 * screen, and range. Ranges and first words come from the scenario's schema; what the schema cannot know (the unit of a
 * signal, the words of a crane) is added here, once.
 */
import type { Signal } from "#shared/plants/plant.ts";
import { schemaAt } from "#shared/scenario/parse.ts";
import { type QuantityMeta, quantityMeta } from "#shared/scenario/quantity.ts";
import { scenarioSchema } from "#shared/scenario/schema.ts";
import { FLOOR_RULES } from "./floor-rules.ts";
import { getAt, type Path, patternOf } from "./json-path.ts";
import { channelNamed, inputAt, isHanging, outputNamed, plantOf, signalNamed, stateAt } from "./machine.ts";
import { RADIO_RULES } from "./radio-rules.ts";
import { MICROSECONDS, MILLIMETRES, MILLISECONDS, numberText, PERCENT, type ScreenUnit, screenUnit, siUnit, toScreen } from "./screen-unit.ts";

export interface FieldSpec {
  /** As in the form, where the section says what it belongs to. */
  label: string;
  symbol?: string;
  unit: ScreenUnit;
  /** Range and kind of the stored number; null when the setting is no number. */
  meta: QuantityMeta | null;
}

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

/** Units as they stand behind a number: a thin space between factors. */
const product = (...factors: string[]): string => factors.filter((factor) => factor !== "").join("\u2009") || "";
const bracketed = (unit: string): string => (/[\s/]/.test(unit) ? `(${unit})` : unit);
/** N over rad/s is N s/rad. */
const quotient = (above: string, below: string): string => {
  const [top, bottom, ...more] = below.split("/");
  if (more.length > 0) return `${above || "1"}/(${below})`;
  if (bottom !== undefined) return quotient(product(above === "1" ? "" : above, bottom), top);
  return below === "" ? above : `${above || "1"}/${bracketed(below)}`;
};
const squared = (unit: string): string =>
  unit === ""
    ? ""
    : unit
        .split("/")
        .map((part) => `${bracketed(part)}²`)
        .join("/");

const smallLength = (unit: string): ScreenUnit => (unit === "m" ? MILLIMETRES : screenUnit(unit));
const ofSignal = (signal: Signal | undefined): ScreenUnit => screenUnit(signal?.unit ?? "");

export interface Rule {
  label?: (json: unknown, path: Path) => string;
  symbol?: string | ((json: unknown, path: Path) => string | undefined);
  unit?: ScreenUnit | ((json: unknown, path: Path) => ScreenUnit);
}

const sibling = (json: unknown, path: Path, key: string, up = 1): unknown => getAt(json, [...path.slice(0, -up), key]);
const indexIn = (path: Path, list: string): number => Number(path[path.indexOf(list) + 1]);
const say =
  (upright: string, hanging = upright) =>
  (json: unknown) =>
    isHanging(json) ? hanging : upright;

const sensorSignal = (json: unknown, path: Path) =>
  outputNamed(json, getAt(json, ["loops", 0, "sensor", "signals", indexIn(path, "signals"), "signal"]));
const pidSignal = (json: unknown) => outputNamed(json, getAt(json, ["loops", 0, "controller", "law", "signal"]));
const firstInput = (json: unknown) => inputAt(json, 0)?.unit ?? "";
const pidUnit = (time: "" | "s" | "1/s") => (json: unknown) => {
  const below = pidSignal(json)?.unit ?? "";
  const input = firstInput(json);
  if (time === "s") return siUnit(quotient(product(input, "s"), below));
  return siUnit(quotient(input, time === "" ? below : product(below, "s")));
};
const integralSignal = (json: unknown, path: Path) =>
  outputNamed(json, getAt(json, ["loops", 0, "controller", "law", "integral", indexIn(path, "integral"), "signal"]));
const driven = (json: unknown, path: Path) => {
  const list = path[2] as string;
  return signalNamed(json, getAt(json, ["loops", 0, list, Number(path[3]), "signal"]));
};
const pushUnit = (json: unknown, path: Path): ScreenUnit => {
  const push = path.slice(0, 2);
  const unit = channelNamed(json, getAt(json, [...push, "channel"]))?.unit ?? "";
  return siUnit(getAt(json, [...push, "type"]) === "impulse" ? product(unit, "s") : unit);
};
const parameterSpec = (json: unknown, path: Path) => fieldSpec(json, ["loops", 0, "plant", String(sibling(json, path, "parameter"))]);

const RULES: Record<string, Rule> = {
  ...FLOOR_RULES,
  ...RADIO_RULES,
  name: { label: say("Name") },
  description: { label: say("Description") },
  "run.durationS": { label: say("Length") },
  "run.absoluteTolerance": { label: say("Tolerance, absolute") },
  "run.relativeTolerance": { label: say("Tolerance, relative") },

  "loops[].name": { label: say("Name of the loop") },
  "loops[].plant.rest": { label: say("Rests") },
  "loops[].plant.cartMassKg": { label: say("Cart mass", "Trolley mass"), symbol: "M" },
  "loops[].plant.rodMassKg": { label: say("Rod mass", "Load mass"), symbol: "m" },
  "loops[].plant.rodLengthM": { label: say("Pivot to mass centre", "Rope, trolley to load"), symbol: "l" },
  "loops[].plant.rodInertiaKgM2": { label: say("Rod inertia", "Load inertia"), symbol: "I", unit: siUnit("kg\u2009m²") },
  "loops[].plant.cartFrictionNsPerM": { label: say("Friction at the cart", "Friction at the trolley"), symbol: "b", unit: siUnit("N\u2009s/m") },
  "loops[].plant.pivotFrictionNmsPerRad": {
    label: say("Friction at the pivot", "Friction of the swing"),
    symbol: "c",
    unit: siUnit("N\u2009m\u2009s"),
  },
  "loops[].plant.coulombFrictionN": { label: say("Coulomb friction"), symbol: "F_c" },
  "loops[].plant.coulombSpeedMps": { label: say("Smoothed below"), symbol: "v_s" },
  "loops[].plant.gravityMps2": { symbol: "g" },
  "loops[].plant.halfTrackM": { label: say("Half track", "Half runway") },

  "loops[].start.state[]": {
    label: (json, path) => stateAt(json, Number(path.at(-1)))?.label ?? "State",
    symbol: (json, path) => stateAt(json, Number(path.at(-1)))?.symbol,
    unit: (json, path) => ofSignal(stateAt(json, Number(path.at(-1)))),
  },
  "loops[].start.estimate[]": {
    label: (json, path) => stateAt(json, Number(path.at(-1)))?.label ?? "State",
    symbol: (json, path) => stateAt(json, Number(path.at(-1)))?.symbol,
    unit: (json, path) => ofSignal(stateAt(json, Number(path.at(-1)))),
  },
  "loops[].start.networkJoinsAtS": { label: say("Network joins at") },

  "loops[].timing.sampleAtS": { label: say("Samples at"), symbol: "s", unit: MILLISECONDS },
  "loops[].timing.actAfterSampleS": { label: say("Latency"), symbol: "τ", unit: MILLISECONDS },
  "loops[].timing.commandTravels": { label: say("Command travels") },

  "loops[].sensor.signals[].noiseStd": { label: say("Noise, RMS"), unit: (json, path) => smallLength(sensorSignal(json, path)?.unit ?? "") },
  "loops[].sensor.signals[].encoding": { label: say("Encoded") },
  "loops[].sensor.signals[].encoding.bits": { label: say("Encoded on"), unit: siUnit("bits") },
  "loops[].sensor.signals[].encoding.lo": { label: say("From"), unit: (json, path) => ofSignal(sensorSignal(json, path)) },
  "loops[].sensor.signals[].encoding.hi": { label: say("Up to"), unit: (json, path) => ofSignal(sensorSignal(json, path)) },
  "loops[].sensor.noise.type": { label: say("Noise values") },
  "loops[].sensor.noise.values": { label: say("Given noise") },
  "loops[].sensor.noise.then": { label: say("Run longer than that") },
  "loops[].sensor.busTransferS": { label: say("Bus to the node"), unit: MILLISECONDS },

  "loops[].controller.placement": { label: say("Controller sits") },
  "loops[].controller.computeS": { label: say("Computes for"), unit: MILLISECONDS },
  "loops[].controller.acknowledgement": { label: say("Commands are") },
  "loops[].controller.law.type": { label: say("Controller") },
  "loops[].controller.law.stateWeights[]": {
    label: (json, path) => stateAt(json, Number(path.at(-1)))?.label ?? "State",
    unit: (json, path) => siUnit(quotient("1", squared(stateAt(json, Number(path.at(-1)))?.unit ?? ""))),
  },
  "loops[].controller.law.inputWeights[]": {
    label: (json, path) => inputAt(json, Number(path.at(-1)))?.label ?? "Input",
    unit: (json, path) => siUnit(quotient("1", squared(inputAt(json, Number(path.at(-1)))?.unit ?? ""))),
  },
  "loops[].controller.law.integral[].weight": {
    label: (json, path) => `Integral of ${integralSignal(json, path)?.label.toLowerCase() ?? "signal"}`,
    unit: (json, path) => siUnit(quotient("1", squared(product(integralSignal(json, path)?.unit ?? "", "s")))),
  },
  "loops[].controller.law.gain[][]": {
    label: (json, path) => stateAt(json, Number(path.at(-1)))?.label ?? "State",
    unit: (json, path) => siUnit(quotient(inputAt(json, Number(path.at(-2)))?.unit ?? "", stateAt(json, Number(path.at(-1)))?.unit ?? "")),
  },
  "loops[].controller.law.integral[].gain[]": {
    label: (json, path) => `Integral of ${integralSignal(json, path)?.label.toLowerCase() ?? "signal"}`,
    unit: (json, path) => siUnit(quotient(inputAt(json, Number(path.at(-1)))?.unit ?? "", product(integralSignal(json, path)?.unit ?? "", "s"))),
  },
  "loops[].controller.law.signal": { label: say("Works on") },
  "loops[].controller.law.proportional": { label: say("Proportional"), symbol: "K_p", unit: pidUnit("") },
  "loops[].controller.law.integral": { label: say("Integral"), symbol: "K_i", unit: pidUnit("1/s") },
  "loops[].controller.law.derivative": { label: say("Derivative"), symbol: "K_d", unit: pidUnit("s") },
  "loops[].controller.law.filterS": { label: say("Derivative filter"), symbol: "T_f", unit: MILLISECONDS },
  "loops[].controller.estimator.type": { label: say("Estimator") },
  "loops[].controller.estimator.update": { label: say("Filter gain") },
  "loops[].controller.estimator.processNoise[]": {
    label: (json, path) => stateAt(json, Number(path.at(-1)))?.label ?? "State",
    unit: (json, path) => siUnit(quotient(stateAt(json, Number(path.at(-1)))?.unit ?? "", "√s")),
  },
  "loops[].controller.estimator.measurementNoise[]": {
    label: (json, path) => outputNamed(json, getAt(json, ["loops", 0, "sensor", "signals", Number(path.at(-1)), "signal"]))?.label ?? "Signal",
    unit: (json, path) => smallLength(outputNamed(json, getAt(json, ["loops", 0, "sensor", "signals", Number(path.at(-1)), "signal"]))?.unit ?? ""),
  },
  "loops[].controller.limits[].lo": {
    label: (json, path) => `${inputAt(json, Number(path.at(-2)))?.label ?? "Input"}, lowest`,
    unit: (json, path) => ofSignal(inputAt(json, Number(path.at(-2)))),
  },
  "loops[].controller.limits[].hi": {
    label: (json, path) => `${inputAt(json, Number(path.at(-2)))?.label ?? "Input"}, largest`,
    unit: (json, path) => ofSignal(inputAt(json, Number(path.at(-2)))),
  },
  "loops[].controller.limits[].ratePerS": {
    label: say("Rate, largest"),
    unit: (json, path) => siUnit(quotient(inputAt(json, Number(path.at(-2)))?.unit ?? "", "s")),
  },
  "loops[].controller.limits": { label: say("Own limits") },

  "loops[].actuator.inputs[].lo": {
    label: (json, path) => `${inputAt(json, Number(path.at(-2)))?.label ?? "Input"}, lowest`,
    unit: (json, path) => ofSignal(inputAt(json, Number(path.at(-2)))),
  },
  "loops[].actuator.inputs[].hi": {
    label: (json, path) => `${inputAt(json, Number(path.at(-2)))?.label ?? "Input"}, largest`,
    unit: (json, path) => ofSignal(inputAt(json, Number(path.at(-2)))),
  },
  "loops[].actuator.inputs[].ratePerS": {
    label: say("Rate, largest"),
    unit: (json, path) => siUnit(quotient(inputAt(json, Number(path.at(-2)))?.unit ?? "", "s")),
  },
  "loops[].actuator.inputs[].encoding": { label: say("Encoded") },
  "loops[].actuator.inputs[].encoding.bits": { label: say("Encoded on"), unit: siUnit("bits") },
  "loops[].actuator.inputs[].encoding.lo": { label: say("From"), unit: (json, path) => siUnit(inputAt(json, indexIn(path, "inputs"))?.unit ?? "") },
  "loops[].actuator.inputs[].encoding.hi": { label: say("Up to"), unit: (json, path) => siUnit(inputAt(json, indexIn(path, "inputs"))?.unit ?? "") },
  "loops[].actuator.lagS": { label: say("Lag"), unit: MILLISECONDS },
  "loops[].actuator.deadTimeS": { label: say("Dead time"), unit: MILLISECONDS },
  "loops[].actuator.busTransferS": { label: say("Bus to the drive"), unit: MILLISECONDS },
  "loops[].actuator.onLoss.policy": { label: say("Command lost") },
  "loops[].actuator.onLoss.length": { label: say("Plan"), unit: siUnit("steps") },
  "loops[].actuator.onLoss.end": { label: say("Plan used up") },
  "loops[].actuator.silence": { label: say("Reaction to silence") },
  "loops[].actuator.silence.afterLost": { label: say("After"), unit: siUnit("lost") },
  "loops[].actuator.silence.reaction": { label: say("Then") },
  "loops[].actuator.silence.rampS": { label: say("Ramp takes") },
  "loops[].actuator.silence.brakeN": { label: say("Brake force") },
  "loops[].actuator.silence.resumeAfter": { label: say("Resumes after"), unit: siUnit("good") },

  "loops[].references[].signal": { label: say("Signal") },
  "loops[].references[].profile.type": { label: say("Goes in") },
  "loops[].references[].profile.points[].atS": { label: say("Time") },
  "loops[].references[].profile.points[].value": { label: say("Value"), unit: (json, path) => ofSignal(driven(json, path)) },
  "loops[].references[].profile.offset": { label: say("Offset"), unit: (json, path) => ofSignal(driven(json, path)) },
  "loops[].references[].profile.amplitude": { label: say("Amplitude"), unit: (json, path) => ofSignal(driven(json, path)) },
  "loops[].references[].profile.phaseRad": { label: say("Phase"), unit: screenUnit("rad") },

  "round.periodS": { label: say("Period"), symbol: "T", unit: MILLISECONDS },
  "round.hops": { label: say("Hops, at most"), symbol: "H" },
  "round.transmissions": { label: say("Transmissions"), symbol: "N" },
  "round.relay": { label: say("Relay") },
  "round.wakeUpS": { label: say("Wake-up"), unit: MICROSECONDS },
  "round.gapS": { label: say("Gap"), unit: MICROSECONDS },
  "round.beacon": { label: say("Beacon") },
  "round.slackSteps": { label: say("Slack") },

  "losses.process.type": { label: say("Process") },
  "losses.process.measurement": { label: say("Measurement lost"), unit: PERCENT },
  "losses.process.command": { label: say("Command lost"), unit: PERCENT },
  "losses.process.then": { label: say("Run longer than that") },
  "losses.streams": { label: say("Random streams") },
  "losses.outages[].fromS": { label: say("From") },
  "losses.outages[].untilS": { label: say("Until") },
  "losses.outages[].messages": { label: say("Messages") },
  "losses.outages[].lossProbability": { label: say("Lost"), unit: PERCENT },

  "pushes[].type": { label: say("Kind") },
  "pushes[].channel": { label: say("Acts") },
  "pushes[].atS": { label: say("At") },
  "pushes[].fromS": { label: say("From") },
  "pushes[].untilS": { label: (json, path) => (sibling(json, path, "type") === "ramp" ? "Full size at" : "Until") },
  "pushes[].size": { label: say("Size"), unit: pushUnit },
  "pushes[].amplitude": { label: say("Amplitude"), unit: pushUnit },
  "pushes[].std": { label: say("RMS"), unit: pushUnit },
  "pushes[].phaseRad": { label: say("Phase"), unit: screenUnit("rad") },
  "pushes[].intervalS": { label: say("Each held for"), unit: MILLISECONDS },
  "pushes[].values": { label: say("Values"), unit: pushUnit },
  "changes[].atS": { label: say("At") },
  "changes[].parameter": { label: say("Parameter") },
  "changes[].value": { label: say("New value"), unit: (json, path) => parameterSpec(json, path).unit },

  "limits[].type": { label: say("Kind") },
  "limits[].signal": { label: say("Signal") },
  "limits[].of": { label: say("Counts") },
  "limits[].lo": { label: say("Lowest"), unit: (json, path) => ofSignal(signalNamed(json, sibling(json, path, "signal"))) },
  "limits[].hi": { label: say("Highest"), unit: (json, path) => ofSignal(signalNamed(json, sibling(json, path, "signal"))) },
  "limits[].band": { label: say("Band, ±"), unit: (json, path) => smallLength(signalNamed(json, sibling(json, path, "signal"))?.unit ?? "") },
  "limits[].withinS": { label: say("Settles within") },
  "limits[].afterS": { label: say("Counted from") },
  "limits[].below": {
    label: (json, path) => (sibling(json, path, "type") === "saturation" ? "Share of time" : "RMS below"),
    unit: (json, path) =>
      sibling(json, path, "type") === "saturation" ? PERCENT : smallLength(signalNamed(json, sibling(json, path, "signal"))?.unit ?? ""),
  },
  "limits[].fromS": { label: say("From") },
  "limits[].untilS": { label: say("Until") },
};

for (const key of ["points[].atS", "points[].value", "offset", "amplitude", "phaseRad", "type"])
  RULES[`loops[].feedforward[].profile.${key}`] = RULES[`loops[].references[].profile.${key}`];
RULES["loops[].feedforward[].signal"] = RULES["loops[].references[].signal"];

const CHANNEL: Record<string, Rule> = {
  goodToBad: { label: say("Good to bad"), unit: PERCENT },
  badToGood: { label: say("Bad to good"), unit: PERCENT },
  lossInGood: { label: say("Lost while good"), unit: PERCENT },
  lossInBad: { label: say("Lost while bad"), unit: PERCENT },
};
for (const [key, rule] of Object.entries(CHANNEL))
  for (const owner of ["measurement", "command", "channel"]) RULES[`losses.process.${owner}.${key}`] = rule;

export function fieldSpec(json: unknown, path: Path): FieldSpec {
  const pattern = patternOf(path);
  const rule = RULES[pattern];
  const schema = schemaAt(scenarioSchema, path, json);
  const stored = schema ? (quantityMeta(schema) ?? null) : null;
  // A changed parameter keeps to the range that the machine itself has for it.
  const meta = pattern === "changes[].value" ? parameterSpec(json, path).meta : stored;
  const symbol = typeof rule?.symbol === "function" ? rule.symbol(json, path) : rule?.symbol;
  const unit = typeof rule?.unit === "function" ? rule.unit(json, path) : rule?.unit;
  return {
    label: rule?.label?.(json, path) ?? capital(meta?.label ?? String(path.at(-1) ?? "")),
    symbol,
    unit: unit ?? screenUnit(meta?.unit ?? ""),
    meta,
  };
}

const compact = (value: number, unit: ScreenUnit): string => {
  const screen = Number(toScreen(value, unit).toPrecision(3));
  return Math.abs(screen) >= 1e5 ? screen.toExponential().replace("e+", "e").replaceAll("-", "\u2212") : numberText(screen);
};

const ANY = 1e9;

/** Behind the field: a range that only keeps out nonsense is not spelt out. */
export const fieldRangeText = (spec: FieldSpec): string =>
  spec.meta && spec.meta.min === -spec.meta.max && spec.meta.max >= ANY ? "any number" : rangeText(spec);

/** "0.01 to 1e5", in the unit of the screen. */
export function rangeText({ meta, unit }: FieldSpec): string {
  if (!meta) return "";
  if (meta.min === -meta.max) return `±${compact(meta.max, unit)}`;
  return `${compact(meta.min, unit)} to ${compact(meta.max, unit)}`;
}

/** The machine's parameters that a change in mid-run may set, as choices. */
export const changeable = (json: unknown): { value: string; word: string }[] =>
  (plantOf(json)?.changeable ?? []).map((name) => ({ value: name, word: fieldSpec(json, ["loops", 0, "plant", name]).label }));
