/** A run made by hand, for tests of the pictures: damped oscillations and a chosen loss pattern. It obeys no physics. */
import type { RoundTiming } from "#shared/network/round.ts";
import { roundTiming } from "#shared/network/round.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import type { RunEvent, RunResult } from "#shared/simulation/result.ts";

export interface MadeRun {
  scenario: Scenario;
  timing: RoundTiming;
  result: RunResult;
}

export interface Making {
  template?: "pendulum-on-cart" | "overhead-crane";
  durationS?: number;
  periodS?: number;
  endedAtS?: number;
  ended?: RunResult["ended"];
  /** Is message `command` of round k delivered? */
  delivered?: (round: number, message: "measurement" | "command") => boolean;
  events?: RunEvent[];
  /** Largest angle, rad. */
  angle?: number;
}

/** Every tenth measurement and every ninth command, and an outage from 4.1 to 4.25 s. */
const someLost = (round: number, message: "measurement" | "command"): boolean =>
  !(round >= 164 && round < 170) && (message === "measurement" ? round % 10 !== 3 : round % 9 !== 5 && round % 9 !== 6);

const EVENTS: RunEvent[] = [
  { atS: 1, kind: "reference", text: "reference of the position to 0.15 m" },
  { atS: 4, kind: "push", text: "push of 0.5 N s on the cart" },
  { atS: 4.1, kind: "outage", text: "outage begins" },
  { atS: 4.25, kind: "outage-ends", text: "outage ends" },
];

export function madeRun(making: Making = {}): MadeRun {
  const { template = "pendulum-on-cart", durationS = 10, ended = "complete", delivered = someLost, angle = 0.15 } = making;
  const base = TEMPLATES.find(({ key }) => key === template)?.scenario as Scenario;
  const scenario: Scenario = {
    ...base,
    run: { ...base.run, durationS },
    round: { ...base.round, periodS: making.periodS ?? base.round.periodS },
  };
  const timing = roundTiming(scenario);
  const { periodS } = scenario.round;
  const endedAtS = making.endedAtS ?? durationS;
  const count = Math.max(1, Math.floor(endedAtS / periodS + 1e-9));
  const points = Math.floor((endedAtS / periodS) * 10 + 1e-9) + 1;
  const t = Float64Array.from({ length: points }, (_, i) => (i * periodS) / 10);
  const swing = (at: number, size: number, rate: number) => (at < 0 ? 0 : size * Math.exp(-at * rate) * Math.sin(at * 5));
  const jump = (at: number) => (at < 1 ? -0.15 : 0.15 - 0.3 * Math.exp(-(at - 1) * 2.4) * (1 + (at - 1) * 1.4));
  const values = [
    t.map((at) => jump(at) + swing(at - 4, 0.09, 1.4)),
    t.map((at) => swing(at - 1, angle / 2, 1.5) - swing(at - 4, angle, 1.7)),
    t.map((at) => swing(at - 1, 0.3, 2)),
    t.map((at) => swing(at - 1, 1, 2)),
    t.map((at) => Math.round(swing(Math.floor(at / periodS) * periodS - 4, -22, 3) * 16) / 16),
    t.map((at) => (at < 1 ? -0.15 : 0.15)),
  ];
  const flags = (message: "measurement" | "command") => Uint8Array.from({ length: count }, (_, k) => Number(delivered(k, message)));
  const measurementDelivered = flags("measurement");
  const commandDelivered = flags("command");
  const lost = (all: Uint8Array) => all.reduce((sum, one) => sum + (one === 0 ? 1 : 0), 0);
  return {
    scenario,
    timing,
    result: {
      engine: "made by hand",
      seed: 10,
      durationS,
      endedAtS,
      ended,
      series: {
        t,
        columns: [
          { name: "position", label: "Position", symbol: "x", unit: "m", kind: "state" },
          { name: "angle", label: "Angle", symbol: "θ", unit: "rad", kind: "state" },
          { name: "velocity", label: "Velocity", symbol: "v", unit: "m/s", kind: "state" },
          { name: "angularVelocity", label: "Angular velocity", symbol: "ω", unit: "rad/s", kind: "state" },
          { name: "force", label: "Force", symbol: "F", unit: "N", kind: "input" },
          { name: "reference:position", label: "Reference of the position", symbol: "r", unit: "m", kind: "reference" },
        ],
        values,
      },
      rounds: {
        count,
        periodS,
        sampleAtS: timing.loops[0].sampleAtS,
        latencyS: timing.loops[0].latencyS,
        commandDelay: timing.loops[0].commandDelay,
        measured: [
          { name: "position", unit: "m", symbol: "x", label: "Position" },
          { name: "angle", unit: "rad", symbol: "θ", label: "Angle" },
        ],
        measurementDelivered,
        commandDelivered,
        hasMeasurementSlot: true,
        hasCommandSlot: true,
        measurement: new Float64Array(count * 2).fill(0.125),
        noise: new Float64Array(count * 2),
        estimate: new Float64Array(count * 4).fill(0.25),
        command: new Float64Array(count).fill(1.5),
      },
      events: making.events ?? EVENTS,
      figures: {
        signals: [],
        messages: [
          { message: "measurement", sent: count, lost: lost(measurementDelivered), longestLoss: 6 },
          { message: "command", sent: count, lost: lost(commandDelivered), longestLoss: 6 },
        ],
        saturatedShare: 0,
        silentReactions: 0,
        nodes: [],
        cost: null,
      },
      limits: scenario.limits.map((_, index) => ({
        index,
        state: "holds" as const,
        value: [0.154, 0.21, 1.38, 0.031, 0][index] ?? 0,
        unit: ["rad", "m", "s", "rad", ""][index] ?? "",
        used: [0.74, 0.7, 0.92, 0.6, 0][index] ?? 0,
        atS: index < 2 ? 4.12 : null,
        crossedAtS: null,
        crossedBound: null,
        settlingS: null,
      })),
      verdict: "holds",
    },
  };
}
