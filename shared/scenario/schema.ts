/**
 * The scenario: everything that is under test. One schema serves form, file, API, database, seed and command line.
 * Values are in SI units, the unit is part of the field's name. States, inputs and outputs are deviations from the
 * operating point. Fields that may be left out have a default; unknown fields are refused.
 */
import { z } from "zod";
import { plantSchema } from "#shared/plants/schema.ts";
import { floorSchema, nodeId, storedId } from "./floor-schema.ts";
import { count, quantity } from "./quantity.ts";
import { radioSchema, rhythm, roundSchema, slotCopies } from "./round-schema.ts";

const MAX_SEQUENCE = 200_000;

const instant = (label: string) => quantity(label, "s", 0, 3600);
const probability = (label: string) => quantity(label, "", 0, 1);
const signalName = z.string().min(1).max(60);
const value = quantity("value", "", -1e9, 1e9);
const bit = z.union([z.literal(0), z.literal(1)]);

// ---------------------------------------------------------------- loop

/** A value on `bits` over [lo, hi): q = (hi - lo)/2^bits. Zero has to lie on the grid. */
export const encodingSchema = z.strictObject({
  bits: count("bits", "", 1, 32),
  lo: quantity("lowest value", "", -1e9, 1e9),
  hi: quantity("upper end", "", -1e9, 1e9),
});

export const sensorSchema = z.strictObject({
  /** What the measurement message carries, in this order: names of states or outputs of the plant. */
  signals: z
    .array(
      z.strictObject({
        signal: signalName,
        noiseStd: quantity("sensor noise, standard deviation", "", 0, 1e6).default(0),
        encoding: encodingSchema.nullable().default(null),
      }),
    )
    .min(1)
    .max(24),
  /** Values of the sensor noise: drawn, or given row by row (one row a round, one number a signal). */
  noise: z
    .discriminatedUnion("type", [
      z.strictObject({ type: z.literal("gaussian") }),
      z.strictObject({
        type: z.literal("given"),
        values: z.array(z.array(value).min(1).max(24)).min(1).max(MAX_SEQUENCE),
        then: z.enum(["error", "zero", "repeat"]).default("error"),
      }),
    ])
    .default({ type: "gaussian" }),
  busTransferS: quantity("bus transfer, sensor to node", "s", 0, 1).default(0),
  /** Slots of a round in which the measurement is sent; one that arrives suffices. */
  copies: slotCopies,
});

export const lawSchema = z.discriminatedUnion("type", [
  z.strictObject({
    /** Discrete LQR at the round's period: sum of x'Qx + u'Ru at samples, Q and R diagonal. */
    type: z.literal("lqr"),
    stateWeights: z
      .array(quantity("state weight", "", 0, 1e9))
      .min(1)
      .max(12),
    inputWeights: z
      .array(quantity("input weight", "", 1e-9, 1e9))
      .min(1)
      .max(6),
    integral: z
      .array(z.strictObject({ signal: signalName, weight: quantity("integral weight", "", 1e-9, 1e9) }))
      .max(6)
      .default([]),
  }),
  z.strictObject({
    /** u = u_ff - K (x - x_ref) - K_I q; K is inputs x states, row by row. */
    type: z.literal("gain"),
    gain: z.array(z.array(value).min(1).max(12)).min(1).max(6),
    integral: z
      .array(z.strictObject({ signal: signalName, gain: z.array(value).min(1).max(6) }))
      .max(6)
      .default([]),
  }),
  z.strictObject({
    /** On one measured signal, e = r - y: u = K_p e + I + D. */
    type: z.literal("pid"),
    signal: signalName,
    proportional: quantity("proportional gain", "", -1e6, 1e6),
    integral: quantity("integral gain", "1/s", -1e6, 1e6).default(0),
    derivative: quantity("derivative gain", "s", -1e6, 1e6).default(0),
    filterS: quantity("derivative filter", "s", 0, 10).default(0),
  }),
]);

export const estimatorSchema = z.discriminatedUnion("type", [
  /** All states are measured: the estimate is the measurement when it arrives, the model's prediction when not. */
  z.strictObject({ type: z.literal("direct") }),
  z.strictObject({
    type: z.literal("kalman"),
    update: z.enum(["stationary", "time-varying"]).default("stationary"),
    /** Square root of the intensity of white noise on each state's derivative, unit of the state per sqrt(s). */
    processNoise: z
      .array(quantity("process noise", "per √s", 0, 1e6))
      .min(1)
      .max(12),
    /** Standard deviation that the filter assumes for each measured signal. */
    measurementNoise: z
      .array(quantity("assumed sensor noise", "", 1e-12, 1e6))
      .min(1)
      .max(24),
  }),
]);

export const inputLimitsSchema = z.strictObject({
  lo: quantity("lowest input", "", -1e9, 0),
  hi: quantity("largest input", "", 0, 1e9),
  ratePerS: quantity("largest rate of the input", "1/s", 1e-9, 1e12).nullable().default(null),
});

export const controllerSchema = z.strictObject({
  /** Where it runs: in the sensor's node (no measurement slot), apart, or in the actuator's node (no command slot). */
  placement: z.enum(["sensor", "apart", "actuator"]).default("apart"),
  computeS: quantity("compute time", "s", 0, 1).default(0.001),
  law: lawSchema,
  estimator: estimatorSchema.default({ type: "direct" }),
  /** How the controller learns what the actuator did. */
  acknowledgement: z.enum(["none", "reported", "at-once"]).default("none"),
  /** Limits that the controller itself keeps, one per input; null: those of the actuator. */
  limits: z.array(inputLimitsSchema).min(1).max(6).nullable().default(null),
});

export const onLossSchema = z.discriminatedUnion("policy", [
  z.strictObject({ policy: z.literal("hold") }),
  z.strictObject({ policy: z.literal("zero") }),
  z.strictObject({ policy: z.literal("plan"), length: count("commands in the plan", "", 1, 12), end: z.enum(["zero", "hold"]).default("zero") }),
]);

export const silenceSchema = z.strictObject({
  afterLost: count("lost commands in a row", "", 1, 10_000),
  reaction: z.enum(["ramp", "brake", "power-off"]).default("ramp"),
  /** Ramp only: time from the input in force to the operating point's input. */
  rampS: quantity("ramp", "s", 1e-3, 60).default(0.2),
  /** Brake only: friction force of the brake while power is off. */
  brakeN: quantity("brake force", "N", 0, 1e6).default(0),
  /** Delivered commands in a row after which commands act again; null: never. */
  resumeAfter: count("delivered commands in a row", "", 1, 10_000).nullable().default(null),
});

export const actuatorSchema = z.strictObject({
  /** One per input of the plant, with the encoding of its command. */
  inputs: z
    .array(z.strictObject({ ...inputLimitsSchema.shape, encoding: encodingSchema.nullable().default(null) }))
    .min(1)
    .max(6),
  lagS: quantity("first-order lag", "s", 0, 10).default(0),
  deadTimeS: quantity("dead time", "s", 0, 10).default(0),
  busTransferS: quantity("bus transfer, node to drive", "s", 0, 1).default(0),
  /** Slots of a round in which the command is sent; one that arrives suffices. */
  copies: slotCopies,
  onLoss: onLossSchema.default({ policy: "hold" }),
  silence: silenceSchema.nullable().default(null),
});

/** A signal known ahead. steps: the value from each point on; ramps: straight lines between points, constant outside. */
export const profileSchema = z.discriminatedUnion("type", [
  z.strictObject({
    type: z.literal("steps"),
    points: z
      .array(z.strictObject({ atS: instant("time"), value }))
      .min(1)
      .max(1000),
  }),
  z.strictObject({
    type: z.literal("ramps"),
    points: z
      .array(z.strictObject({ atS: instant("time"), value }))
      .min(1)
      .max(1000),
  }),
  z.strictObject({
    type: z.literal("sine"),
    offset: value.default(0),
    amplitude: value,
    frequencyHz: quantity("frequency", "Hz", 0, 1000),
    phaseRad: quantity("phase", "rad", -100, 100).default(0),
  }),
]);
const driven = z
  .array(z.strictObject({ signal: signalName, profile: profileSchema }))
  .max(24)
  .default([]);

export const loopSchema = z.strictObject({
  id: z
    .string()
    .regex(/^[a-z][a-z0-9-]{0,29}$/, "lower-case letters, digits and hyphens, at most 30")
    .default("main"),
  name: z.string().trim().min(1).max(80),
  plant: plantSchema,
  start: z
    .strictObject({
      /** Deviation from the operating point at t = 0; null: at the operating point. */
      state: z.array(value).max(12).nullable().default(null),
      /** What the controller believes at t = 0; null: the true state. */
      estimate: z.array(value).max(12).nullable().default(null),
      /** Every message before this time is lost, and does not count for the reaction to silence. */
      networkJoinsAtS: instant("network joins at").default(0),
    })
    .default({ state: null, estimate: null, networkJoinsAtS: 0 }),
  /** On which nodes of the floor it runs; null: no floor is needed. */
  nodes: z.strictObject({ sensor: nodeId, controller: nodeId, actuator: nodeId }).nullable().default(null),
  timing: z
    .strictObject({
      /** In which rounds the loop samples: firstRound, then every everyRounds-th. */
      ...rhythm,
      sampleAtS: quantity("sampling instant in the round", "s", 0, 10).default(0),
      /** Does the command travel in the round of its computing (d = 0) or in the next (d = 1)? */
      commandTravels: z.enum(["same-round", "next-round"]).default("same-round"),
      /** Latency tau from sampling to acting; null: the command acts at the next round boundary after its slot. */
      actAfterSampleS: quantity("latency from sampling to acting", "s", 0, 20).nullable().default(null),
    })
    .default({ everyRounds: 1, firstRound: 0, sampleAtS: 0, commandTravels: "same-round", actAfterSampleS: null }),
  sensor: sensorSchema,
  controller: controllerSchema,
  actuator: actuatorSchema,
  references: driven,
  feedforward: driven,
});

// ---------------------------------------------------------------- losses

export const MESSAGES = ["measurement", "command"] as const;
const gilbertElliott = z.strictObject({
  goodToBad: probability("good to bad, per round"),
  badToGood: probability("bad to good, per round"),
  lossInGood: probability("loss while good").default(0),
  lossInBad: probability("loss while bad").default(1),
});

/** A recorded link as run lengths: packets delivered, then lost, then delivered, and so on. */
const replayedLink = z.strictObject({
  link: z.string().max(120).default(""),
  runs: z.array(count("packets", "", 0, 10_000_000)).max(MAX_SEQUENCE),
});

export const lossProcessSchema = z.discriminatedUnion("type", [
  z.strictObject({ type: z.literal("none") }),
  z.strictObject({ type: z.literal("bernoulli"), measurement: probability("measurement lost"), command: probability("command lost") }),
  z.strictObject({ type: z.literal("gilbert-elliott"), measurement: gilbertElliott, command: gilbertElliott }),
  z.strictObject({ type: z.literal("gilbert-elliott-shared"), channel: gilbertElliott }),
  z.strictObject({
    /** 1 = delivered, 0 = lost; entry k belongs to the message that travels in round k. */
    type: z.literal("given"),
    measurement: z.array(bit).max(MAX_SEQUENCE),
    command: z.array(bit).max(MAX_SEQUENCE),
    then: z.enum(["error", "delivered", "repeat"]).default("error"),
  }),
  /** Floods over the floor decide, drawn step by step. */
  z.strictObject({ type: z.literal("flood") }),
  z.strictObject({
    /** What was received on a floor, packet after packet, one packet a round. */
    type: z.literal("replay"),
    /** The reception log it was taken from. */
    log: z
      .strictObject({ id: storedId, name: z.string().max(120) })
      .nullable()
      .default(null),
    measurement: replayedLink,
    command: replayedLink,
    then: z.enum(["error", "delivered", "repeat"]).default("error"),
  }),
]);

export const lossesSchema = z.strictObject({
  process: lossProcessSchema,
  /** One stream of random numbers per message, or one shared by all messages. */
  streams: z.enum(["own", "shared"]).default("own"),
  /** Outages and jamming on top of the process: a message whose slot touches [fromS, untilS) is lost with this probability. */
  outages: z
    .array(
      z.strictObject({
        fromS: instant("outage from"),
        untilS: instant("outage until"),
        messages: z.array(z.enum(MESSAGES)).min(1).max(2).default(["measurement", "command"]),
        lossProbability: probability("lost during the outage").default(1),
      }),
    )
    .max(200)
    .default([]),
});

// ---------------------------------------------------------------- pushes, changes, limits

const channel = z.string().min(1).max(60);
const size = quantity("size", "", -1e9, 1e9);
export const pushSchema = z.discriminatedUnion("type", [
  z.strictObject({ type: z.literal("impulse"), channel, atS: instant("push at"), size }),
  z.strictObject({ type: z.literal("step"), channel, fromS: instant("push from"), untilS: instant("push until").nullable().default(null), size }),
  /** From 0 at fromS to size at untilS, then it stays at size. */
  z.strictObject({ type: z.literal("ramp"), channel, fromS: instant("push from"), untilS: instant("full size at"), size }),
  z.strictObject({
    type: z.literal("sine"),
    channel,
    fromS: instant("push from"),
    untilS: instant("push until").nullable().default(null),
    amplitude: size,
    frequencyHz: quantity("frequency", "Hz", 0, 1000),
    phaseRad: quantity("phase", "rad", -100, 100).default(0),
  }),
  /** Normal values, each held for intervalS. */
  z.strictObject({
    type: z.literal("noise"),
    channel,
    fromS: instant("push from"),
    untilS: instant("push until").nullable().default(null),
    std: quantity("standard deviation", "", 0, 1e9),
    intervalS: quantity("each value held for", "s", 0.0001, 60),
  }),
  /** Given values, each held for intervalS, zero afterwards. */
  z.strictObject({
    type: z.literal("given"),
    channel,
    fromS: instant("push from"),
    intervalS: quantity("each value held for", "s", 0.0001, 60),
    values: z.array(value).min(1).max(MAX_SEQUENCE),
  }),
]);

/** A parameter of the true machine changes; the controller's model stays as it was. Positions and speeds are kept. */
export const changeSchema = z.strictObject({
  atS: instant("change at"),
  parameter: z.string().min(1).max(60),
  value,
});

const window = { fromS: instant("from").default(0), untilS: instant("until").nullable().default(null) };
const of = z.enum(["signal", "error"]).default("signal");
export const limitSchema = z.discriminatedUnion("type", [
  z.strictObject({ type: z.literal("within"), signal: signalName, of, lo: value.nullable(), hi: value.nullable(), ...window }),
  /** From afterS + withinS until the next push or reference step, the signal stays within ± band of its reference. */
  z.strictObject({
    type: z.literal("settle"),
    signal: signalName,
    band: quantity("band", "", 1e-12, 1e9),
    withinS: quantity("settles within", "s", 0, 3600),
    afterS: instant("after"),
  }),
  z.strictObject({ type: z.literal("rms"), signal: signalName, of, below: quantity("RMS below", "", 1e-12, 1e9), ...window }),
  z.strictObject({ type: z.literal("saturation"), below: quantity("share of time saturated", "", 1e-6, 1) }),
]);

// ---------------------------------------------------------------- scenario

export const scenarioSchema = z.strictObject({
  format: z.literal("holdfast-scenario"),
  version: z.literal(1),
  name: z.string().trim().min(1).max(120),
  description: z.string().max(4000).default(""),
  run: z.strictObject({
    durationS: quantity("length of the run", "s", 0.01, 3600),
    seed: count("seed", "", 0, 4_294_967_295).default(1),
    absoluteTolerance: quantity("absolute tolerance", "", 1e-14, 1e-3).default(1e-10),
    relativeTolerance: quantity("relative tolerance", "", 1e-13, 1e-3).default(1e-8),
  }),
  loops: z.array(loopSchema).length(1),
  /** The plan with its nodes; null: none is needed, unless floods decide what is delivered. */
  floor: floorSchema.nullable().default(null),
  radio: radioSchema,
  round: roundSchema,
  losses: lossesSchema,
  pushes: z.array(pushSchema).max(200).default([]),
  changes: z.array(changeSchema).max(200).default([]),
  limits: z.array(limitSchema).max(40).default([]),
});

export type Scenario = z.infer<typeof scenarioSchema>;
/** A scenario as written in a file, where defaults may be left out. */
export type ScenarioInput = z.input<typeof scenarioSchema>;
export type Loop = Scenario["loops"][number];
export type Encoding = z.infer<typeof encodingSchema>;
export type Law = z.infer<typeof lawSchema>;
export type Profile = z.infer<typeof profileSchema>;
export type Push = z.infer<typeof pushSchema>;
export type Limit = z.infer<typeof limitSchema>;
export type LossProcess = z.infer<typeof lossProcessSchema>;
export type Message = (typeof MESSAGES)[number];
export type { Phy } from "./round-schema.ts";
