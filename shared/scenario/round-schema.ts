/** Radio and round: what a packet costs in time and energy, and who shares the round. */
import { z } from "zod";
import { RADIO_FIGURES } from "#shared/network/radio-figures.ts";
import { nodeId } from "./floor-schema.ts";
import { count, quantity } from "./quantity.ts";

export const PHYS = ["ieee802154", "le-1m", "le-2m", "le-coded-s2", "le-coded-s8"] as const;
export type Phy = (typeof PHYS)[number];

export const radioSchema = z.strictObject({
  phy: z.enum(PHYS),
  headerBytes: count("header", "B", 0, 64).default(4),
  /** Between two steps of a flood; null: the standard's own turnaround. */
  turnaroundS: quantity("turnaround", "s", 0, 0.01).nullable().default(null),
  txPowerDbm: quantity("transmit power", "dBm", -40, 30).default(0),
  channels: z
    .strictObject({
      /** IEEE 802.15.4: 11 to 26. Bluetooth LE: RF channels 0 to 39. Empty: the PHY's last channel, 26 or 39. */
      list: z
        .array(count("channel", "", 0, 39))
        .max(40)
        .default([]),
      /** In the order of the list: none stays on its first; the others begin where the slot's name says and go on each time it comes again, per-step with every step as well. */
      hopping: z.enum(["none", "per-slot", "per-step"]).default("per-step"),
    })
    .default({ list: [], hopping: "per-step" }),
  /** From the ratio of signal to noise and interference to a packet's reception. */
  reception: z
    .discriminatedUnion("type", [
      /** The standard's formula; coded Bluetooth LE gains so many dB over LE 1M. */
      z.strictObject({
        type: z.literal("formula"),
        codingGainS2Db: quantity("coding gain, S = 2", "dB", 0, 20).default(4),
        codingGainS8Db: quantity("coding gain, S = 8", "dB", 0, 20).default(8),
      }),
      /** A measured curve: straight lines between its rows, constant outside. Rows in ascending order. */
      z.strictObject({
        type: z.literal("table"),
        name: z.string().max(120).default(""),
        rows: z
          .array(z.strictObject({ snrDb: quantity("SNR", "dB", -60, 100), prr: quantity("packet reception ratio", "", 0, 1) }))
          .min(2)
          .max(2000),
      }),
    ])
    .prefault({ type: "formula" }),
  /** Radio currents; the defaults are those of a public data sheet, named in source. */
  power: z
    .strictObject({
      device: z.string().max(80),
      txMa: quantity("current while sending", "mA", 0, 1000),
      rxMa: quantity("current while receiving", "mA", 0, 1000),
      sleepUa: quantity("current asleep", "µA", 0, 100_000),
      supplyV: quantity("supply", "V", 0.5, 60),
      source: z.string().max(300).default(""),
    })
    .default(RADIO_FIGURES[0]),
  battery: z
    .strictObject({
      capacityMah: quantity("battery capacity", "mAh", 1, 1_000_000),
      usableShare: quantity("usable share of the capacity", "", 0.01, 1),
    })
    .default({ capacityMah: 2600, usableShare: 0.8 }),
});

const everyRounds = count("runs every so many rounds", "rounds", 1, 64).default(1);
const firstRound = count("first round", "", 0, 63).default(0);
const copies = count("slots per message", "", 1, 2).default(1);
export const rhythm = { everyRounds, firstRound };
export const slotCopies = copies;

const entryId = z.string().regex(/^[a-z][a-z0-9-]{0,29}$/, "lower-case letters, digits and hyphens, at most 30");

/** A loop that shares the round but whose machine is not part of this scenario: it takes slots and has a latency. */
const otherLoopSchema = z.strictObject({
  id: entryId,
  name: z.string().trim().min(1).max(80),
  placement: z.enum(["sensor", "apart", "actuator"]).default("apart"),
  nodes: z.strictObject({ sensor: nodeId, controller: nodeId, actuator: nodeId }).nullable().default(null),
  ...rhythm,
  measurementBits: count("bits of a measurement", "bit", 1, 2000),
  measurementCopies: copies,
  commandBits: count("bits of a command", "bit", 1, 2000),
  commandCopies: copies,
  /** Commands in one message. */
  planLength: count("commands in the plan", "", 1, 12).default(1),
  computeS: quantity("compute time", "s", 0, 1).default(0.001),
  sampleAtS: quantity("sampling instant in the round", "s", 0, 10).default(0),
  commandTravels: z.enum(["same-round", "next-round"]).default("same-round"),
});

/** Any other message of the round. */
const otherMessageSchema = z.strictObject({
  id: entryId,
  name: z.string().trim().min(1).max(80),
  from: nodeId.nullable().default(null),
  /** Nodes that need it; empty: all. */
  to: z.array(nodeId).max(120).default([]),
  payloadBytes: count("payload", "B", 0, 255),
  ...rhythm,
  copies,
});

export const roundSchema = z.strictObject({
  periodS: quantity("round period", "s", 0.001, 10),
  hops: count("hop bound", "", 1, 20).default(3),
  transmissions: count("transmissions per node", "", 1, 10).default(2),
  relay: z.enum(["alternating", "back-to-back"]).default("alternating"),
  slackSteps: count("slack", "steps", 0, 20).default(0),
  wakeUpS: quantity("wake-up before a slot", "s", 0, 0.05).default(0.0002),
  gapS: quantity("gap after a slot", "s", 0, 0.05).default(0.0002),
  clockPpm: quantity("clock tolerance", "ppm", 0, 500).default(40),
  /** The beacon's slot opens the round; null: no beacon slot. */
  beacon: z
    .strictObject({
      payloadBytes: count("beacon payload", "B", 0, 255),
      /** A node that missed the round's beacon neither sends, relays nor receives in that round. */
      needed: z.boolean().default(false),
    })
    .nullable()
    .default({ payloadBytes: 4, needed: false }),
  otherLoops: z.array(otherLoopSchema).max(24).default([]),
  messages: z.array(otherMessageSchema).max(24).default([]),
});

export type Radio = z.infer<typeof radioSchema>;
export type RoundSettings = z.infer<typeof roundSchema>;
export type OtherLoop = RoundSettings["otherLoops"][number];
export type OtherMessage = RoundSettings["messages"][number];
