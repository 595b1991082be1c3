/** What a run gives back. Plain data: typed arrays, numbers, strings; crosses a worker boundary as it is. */
import type { Issue } from "#shared/scenario/issues.ts";

export interface Column {
  /** Signal name of the plant ("angle"), "reference:angle", or an input name. */
  name: string;
  label: string;
  symbol: string;
  unit: string;
  kind: "state" | "output" | "input" | "reference";
}

export interface Series {
  /** Seconds; 10 points a round from 0, up to the end of the run. At an event the value just after it is kept. */
  t: Float64Array;
  columns: Column[];
  /** One array per column, each as long as t. Inputs: what the plant feels. */
  values: Float64Array[];
}

/** One entry per round. Row-major where there are several components. */
export interface Rounds {
  count: number;
  periodS: number;
  sampleAtS: number;
  /** Latency tau from sampling to acting, s: command k acts at k T + sampleAtS + tau. */
  latencyS: number;
  /** Rounds between computing and travelling of a command: 0 or 1. */
  commandDelay: 0 | 1;
  measured: { name: string; unit: string; symbol: string; label: string }[];
  /** 1 = delivered. Of the message that travels in round k; all 1 where the placement needs no such message. */
  measurementDelivered: Uint8Array;
  commandDelivered: Uint8Array;
  hasMeasurementSlot: boolean;
  hasCommandSlot: boolean;
  /** count x p: what was sampled, noise and encoding included. */
  measurement: Float64Array;
  /** count x p: the sensor noise that was drawn. */
  noise: Float64Array;
  /** count x n: the estimate after the update; empty for a PID. */
  estimate: Float64Array;
  /** count x m: command u_k computed in round k. */
  command: Float64Array;
}

export type EventKind =
  | "push"
  | "push-ends"
  | "change"
  | "reference"
  | "outage"
  | "outage-ends"
  | "silence"
  | "resumed"
  | "limit-crossed"
  | "track-end"
  | "diverged";
export interface RunEvent {
  atS: number;
  kind: EventKind;
  /** Short text for the plot's top edge and the event list: "push 4 N s on the cart". */
  text: string;
}

export type LimitState = "holds" | "near" | "crosses";
export interface LimitVerdict {
  /** Index into scenario.limits. */
  index: number;
  state: LimitState;
  /** Decisive figure in the limit's unit: excursion, settling time, RMS or share. Largest finite number when diverged. */
  value: number;
  unit: string;
  /** Value over permitted value; above 1 is crossed, above 0.9 is near. */
  used: number;
  /** When the decisive figure was reached, s; null where that has no meaning. */
  atS: number | null;
  /** First crossing, s, and the bound that was crossed then. */
  crossedAtS: number | null;
  crossedBound: "lo" | "hi" | null;
  /** Last time outside ± 5 % of the bounds' width (within), or outside the band (settle), from the disturbance before it on, s; null: not settled, or no such figure. */
  settlingS: number | null;
}

export type Verdict = "holds" | "near" | "crosses" | "not-decided";

export interface SignalFigures {
  name: string;
  unit: string;
  max: number;
  min: number;
  rms: number;
  /** Integral of the squared deviation from the reference, unit² s. */
  ise: number;
}
export interface MessageFigures {
  message: "measurement" | "command";
  sent: number;
  lost: number;
  longestLoss: number;
}
/** What a node of the floor spent over all rounds of the planned run: radios go on when a rod has fallen. */
export interface NodeFigures {
  node: number;
  name: string;
  radioOnS: number;
  /** Coulomb. */
  chargeC: number;
  /** From a full battery at this rate; null: it draws nothing. */
  batteryDays: number | null;
}
export interface Figures {
  signals: SignalFigures[];
  messages: MessageFigures[];
  /** Share of the time in which an input of the plant is at its lowest or largest value. */
  saturatedShare: number;
  silentReactions: number;
  /** Empty unless floods were simulated. */
  nodes: NodeFigures[];
  /** Mean over rounds of x'Qx + u'Ru at sampling instants; null unless the law has weights. */
  cost: number | null;
}

export interface RunResult {
  engine: string;
  seed: number;
  durationS: number;
  /** When the run ended: durationS, or earlier when it diverged or reached the track's end. */
  endedAtS: number;
  ended: "complete" | "track-end" | "diverged";
  series: Series;
  rounds: Rounds;
  events: RunEvent[];
  figures: Figures;
  limits: LimitVerdict[];
  verdict: Verdict;
}

/** A run, or why there is none. Errors are data, so that they cross workers and HTTP unharmed. */
export type RunOutcome = { ok: true; result: RunResult } | { ok: false; issues: Issue[] };
