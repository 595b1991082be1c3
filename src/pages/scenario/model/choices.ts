/** Words for every setting that is chosen, once for form, summaries and lists of changes. */
import { PHY_TIMINGS } from "#shared/network/phy.ts";

export interface Choice {
  value: string;
  /** In a list, or joined with others. */
  word: string;
  /** What it means, for the list; left out where the word says it. */
  hint?: string;
}

const choice = (value: string, word: string, hint?: string): Choice => ({ value, word, hint });

export const REST = [choice("upright", "upright"), choice("hanging", "hanging")];

export const LAW = [
  choice("lqr", "State feedback, weighted", "Gains from weights (discrete LQR)"),
  choice("gain", "State feedback, typed gains", "u = u_ff − K (x − x_ref) − K_I q"),
  choice("pid", "PID on one signal", "Needs no model of the machine"),
];
export const ESTIMATOR = [
  choice("direct", "all states measured", "Received: the measurement. Lost: the model's prediction"),
  choice("kalman", "Kalman filter", "Estimates what is not measured, and smooths noise"),
];
export const KALMAN_UPDATE = [choice("stationary", "stationary"), choice("time-varying", "time-varying")];
export const PLACEMENT = [
  choice("sensor", "with the sensor", "No measurement slot; every measurement arrives"),
  choice("apart", "apart", "Measurement and command each have a slot"),
  choice("actuator", "with the actuator", "No command slot; every command arrives"),
];
export const ACKNOWLEDGEMENT = [
  choice("none", "not acknowledged", "The controller believes that every command arrived"),
  choice("reported", "reported", "The measurement message carries the input in force"),
  choice("at-once", "known at once", "For study: the controller knows every loss"),
];
export const ON_LOSS = [choice("hold", "hold"), choice("zero", "zero"), choice("plan", "plan")];
export const PLAN_END = [choice("zero", "zero"), choice("hold", "hold")];
export const SILENCE = [choice("ramp", "ramp"), choice("brake", "brake"), choice("power-off", "power off")];
export const TRAVELS = [choice("same-round", "this round"), choice("next-round", "next round")];
export const NOISE = [choice("gaussian", "drawn, normal"), choice("given", "given, row by row")];
export const NOISE_THEN = [choice("error", "an error"), choice("zero", "no noise"), choice("repeat", "repeat")];

export const PROCESS = [
  choice("none", "No losses"),
  choice("bernoulli", "Each message by itself", "Independent losses (Bernoulli)"),
  choice("gilbert-elliott", "In bursts, each message", "Gilbert-Elliott, one channel per message"),
  choice("gilbert-elliott-shared", "In bursts, both messages", "Gilbert-Elliott, one channel for all"),
  choice("given", "Given sequences", "Round by round, 1 delivered, 0 lost"),
  choice("flood", "Floods over the floor", "Every flood is drawn step by step over the links of the floor"),
  choice("replay", "Reception log, replayed", "Packet after packet as it was received, one a round"),
];
export const STREAMS = [choice("own", "own"), choice("shared", "shared")];
export const THEN = [choice("error", "an error"), choice("delivered", "delivered"), choice("repeat", "repeat")];
export const OUTAGE_MESSAGES = [choice("both", "both"), choice("measurement", "meas."), choice("command", "command")];

export const PHY = [...PHY_TIMINGS].reverse().map(({ phy, label }) => choice(phy, label));
export const RELAY = [
  choice("alternating", "alternating", "Send, listen, send, ..."),
  choice("back-to-back", "back-to-back", "All sends in a row after the first reception"),
];

export const HOPPING = [
  choice("none", "stays on the first", "Of the list, only the first is used"),
  choice("per-slot", "with every slot", "A flood stays on its channel"),
  choice("per-step", "with every step", "One flood meets several channels"),
];
export const RECEPTION = [choice("formula", "formula"), choice("table", "table")];
export const COPIES = [choice("1", "one slot"), choice("2", "two slots")];
export const BEACON_MISSED = [
  choice("no", "node takes part", "The round is known without it"),
  choice("yes", "node sits out", "It neither sends, relays nor receives in that round"),
];

export const PROFILE = [choice("steps", "steps"), choice("ramps", "ramps"), choice("sine", "sine")];
export const PUSH = [
  choice("impulse", "impulse"),
  choice("step", "step"),
  choice("ramp", "ramp"),
  choice("sine", "sine"),
  choice("noise", "noise"),
  choice("given", "given values"),
];
export const LIMIT = [
  choice("within", "stays within"),
  choice("settle", "settles within"),
  choice("rms", "RMS below"),
  choice("saturation", "saturated less than"),
];
export const LIMIT_OF = [choice("signal", "signal"), choice("error", "error")];

/** By the field's pattern; what is not listed shows its value. */
const BY_PATTERN: Record<string, readonly Choice[]> = {
  "loops[].plant.rest": REST,
  "loops[].controller.law.type": LAW,
  "loops[].controller.estimator.type": ESTIMATOR,
  "loops[].controller.estimator.update": KALMAN_UPDATE,
  "loops[].controller.placement": PLACEMENT,
  "loops[].controller.acknowledgement": ACKNOWLEDGEMENT,
  "loops[].actuator.onLoss.policy": ON_LOSS,
  "loops[].actuator.onLoss.end": PLAN_END,
  "loops[].actuator.silence.reaction": SILENCE,
  "loops[].timing.commandTravels": TRAVELS,
  "loops[].sensor.noise.type": NOISE,
  "loops[].sensor.noise.then": NOISE_THEN,
  "losses.process.type": PROCESS,
  "losses.process.then": THEN,
  "losses.streams": STREAMS,
  "radio.phy": PHY,
  "radio.channels.hopping": HOPPING,
  "radio.reception.type": RECEPTION,
  "round.otherLoops[].placement": PLACEMENT,
  "round.otherLoops[].commandTravels": TRAVELS,
  "round.relay": RELAY,
  "pushes[].type": PUSH,
  "limits[].type": LIMIT,
  "limits[].of": LIMIT_OF,
  "loops[].references[].profile.type": PROFILE,
  "loops[].feedforward[].profile.type": PROFILE,
};

export const choicesAt = (pattern: string): readonly Choice[] | undefined => BY_PATTERN[pattern];
export const wordOf = (choices: readonly Choice[], value: unknown): string => choices.find((one) => one.value === value)?.word ?? String(value);
