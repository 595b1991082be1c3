/**
 * The floor: the plan on which nodes stand and move, what weakens and disturbs their links, and how links are computed.
 * x runs across, y down the plan, from its upper left corner, in metres.
 */
import { z } from "zod";
import { count, quantity } from "./quantity.ts";

export const MAX_NODES = 120;
const HALL_M = 2000;

const instant = (label: string) => quantity(label, "s", 0, 3600);
/** Id of something that the team keeps: a picture, a reception log. */
export const storedId = z.string().regex(/^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/, "an id such as 0f8fad5b-d9cb-469f-a165-70867728950e");
export const nodeId = count("node number", "", 1, 999);
const xM = quantity("across", "m", 0, HALL_M);
const yM = quantity("down", "m", 0, HALL_M);
const name = z.string().trim().max(60).default("");

export const floorNodeSchema = z.strictObject({
  id: nodeId,
  name,
  xM,
  yM,
  heightM: quantity("height above the floor", "m", 0, 100).default(1),
  /** null: the radio's transmit power. */
  txPowerDbm: quantity("transmit power", "dBm", -40, 30).nullable().default(null),
  /** Where it is at later times: straight and at constant speed from its place at t = 0 to the first point, then from point to point; stays at the last. */
  wayPoints: z
    .array(z.strictObject({ atS: instant("time"), xM, yM }))
    .max(200)
    .default([]),
  /** Its radio neither sends, relays nor hears in [fromS, untilS); null: until the end of the run. */
  outages: z
    .array(z.strictObject({ fromS: instant("out of service from"), untilS: instant("out of service until").nullable().default(null) }))
    .max(50)
    .default([]),
});

/** Weakens every link whose straight line crosses it, on the plan, by lossDb once. */
export const obstacleSchema = z.discriminatedUnion("type", [
  z.strictObject({ type: z.literal("wall"), name, fromXM: xM, fromYM: yM, toXM: xM, toYM: yM, lossDb: quantity("loss", "dB", 0, 100) }),
  /** A block such as a rack or a machine: a rectangle from its upper left corner. Links that end inside count as crossing it. */
  z.strictObject({
    type: z.literal("block"),
    name,
    xM,
    yM,
    widthM: quantity("width", "m", 0.01, HALL_M),
    depthM: quantity("depth", "m", 0.01, HALL_M),
    lossDb: quantity("loss", "dB", 0, 100),
  }),
]);

export const interfererSchema = z.strictObject({
  name,
  xM,
  yM,
  heightM: quantity("height above the floor", "m", 0, 100).default(1),
  powerDbm: quantity("power (e.i.r.p.)", "dBm", -60, 60),
  centreMHz: quantity("centre frequency", "MHz", 2300, 2600),
  bandwidthMHz: quantity("bandwidth", "MHz", 0.01, 200),
  /** When it sends, between fromS and untilS. */
  activity: z
    .discriminatedUnion("type", [
      z.strictObject({ type: z.literal("always") }),
      z.strictObject({
        type: z.literal("periodic"),
        onS: quantity("on for", "s", 1e-6, 3600),
        offS: quantity("off for", "s", 0, 3600),
        /** Part of its period that has passed at t = 0. */
        phaseS: quantity("phase", "s", 0, 7200).default(0),
      }),
      /** On and off for exponentially distributed times; starts stationary. */
      z.strictObject({
        type: z.literal("random"),
        onShare: quantity("share of the time on", "", 0, 1),
        meanOnS: quantity("mean time on", "s", 1e-6, 3600),
      }),
    ])
    .default({ type: "always" }),
  fromS: instant("from").default(0),
  untilS: instant("until").nullable().default(null),
});

export const pathLossSchema = z.discriminatedUnion("type", [
  /** ITU-R P.525, Friis. */
  z.strictObject({ type: z.literal("free-space") }),
  z.strictObject({
    type: z.literal("log-distance"),
    exponent: quantity("path-loss exponent", "", 1, 8),
    /** null: free space at 1 m. */
    lossAt1mDb: quantity("path loss at 1 m", "dB", 0, 120).nullable().default(null),
  }),
  /** ITU-R P.1238-8 (2015) and older: L = 20 log10 f + N log10 d - 28 with N at 2.4 GHz. */
  z.strictObject({ type: z.literal("p1238-8"), environment: z.enum(["residential", "office", "commercial"]) }),
  /** ITU-R P.1238-10 (2019) and newer: L = 10 alpha log10 d + beta + 10 gamma log10 f. */
  z.strictObject({ type: z.literal("p1238-10"), environment: z.enum(["industrial-los", "industrial-nlos"]) }),
  /** 3GPP TR 38.901 Table 7.4.1-1, indoor factory. */
  z.strictObject({ type: z.literal("indoor-factory"), clutter: z.enum(["LOS", "SL", "DL", "SH", "DH"]) }),
]);

export const linksSchema = z.discriminatedUnion("type", [
  z.strictObject({
    /** Transmit power - path loss - obstacles - shadowing + fading, against noise and interference. */
    type: z.literal("budget"),
    pathLoss: pathLossSchema.default({ type: "log-distance", exponent: 3, lossAt1mDb: null }),
    /** Normal in dB, one value for every pair of nodes; for a moving node it changes along its way. */
    shadowing: z
      .strictObject({
        sigmaDb: quantity("shadowing, standard deviation", "dB", 0, 20).default(0),
        correlationM: quantity("correlation distance", "m", 0.1, 1000).default(10),
        /** The hall's own seed: the same hall in every run. */
        seed: count("seed of the hall", "", 0, 4_294_967_295).default(1),
      })
      .default({ sigmaDb: 0, correlationM: 10, seed: 1 }),
    /** Rician with unit mean power for every pair of nodes and channel, constant over a slot, going on from round to round; null: none. */
    fading: z
      .strictObject({
        kDb: quantity("Rice factor K", "dB", -40, 40),
        /** How fast it changes: by the faster node's speed (Clarke), or by a coherence time. */
        coherence: z.discriminatedUnion("type", [
          z.strictObject({ type: z.literal("speed"), leastMPerS: quantity("speed of the surroundings", "m/s", 0, 50).default(0.5) }),
          z.strictObject({ type: z.literal("time"), coherenceS: quantity("coherence time", "s", 1e-4, 3600) }),
        ]),
      })
      .nullable()
      .default(null),
    noiseFigureDb: quantity("noise figure", "dB", 0, 40).default(6),
    /** Of nodes that send at once, the strongest is received without loss when it is this much above the sum of the others ... */
    captureDb: quantity("capture threshold", "dB", 0, 30).default(3),
    /** ... and otherwise the sum of all counts, less this. */
    concurrencyPenaltyDb: quantity("penalty of concurrent senders", "dB", 0, 30).default(3),
  }),
  z.strictObject({
    /** Measured packet reception ratios: row = sender, column = receiver, in the order of the nodes. Several senders count as independent tries. */
    type: z.literal("matrix"),
    prr: z.array(z.array(quantity("packet reception ratio", "", 0, 1)).max(MAX_NODES)).max(MAX_NODES),
  }),
]);

export const floorSchema = z.strictObject({
  name: z.string().trim().max(80).default(""),
  widthM: quantity("width of the plan", "m", 1, HALL_M),
  depthM: quantity("depth of the plan", "m", 1, HALL_M),
  nodes: z.array(floorNodeSchema).max(MAX_NODES).default([]),
  obstacles: z.array(obstacleSchema).max(500).default([]),
  interferers: z.array(interfererSchema).max(50).default([]),
  links: linksSchema.prefault({ type: "budget" }),
  /** The node that sends the beacon; null: the node of the controller. */
  beaconNode: nodeId.nullable().default(null),
  /** An uploaded picture under the plan: where its upper left corner lies and how large one pixel is. */
  picture: z
    .strictObject({
      id: storedId,
      xM: quantity("picture, across", "m", -HALL_M, HALL_M).default(0),
      yM: quantity("picture, down", "m", -HALL_M, HALL_M).default(0),
      metresPerPixel: quantity("size of a pixel", "m", 1e-5, 100),
      opacity: quantity("strength of the picture", "", 0.05, 1).default(0.5),
    })
    .nullable()
    .default(null),
});

export type Floor = z.infer<typeof floorSchema>;
export type FloorNode = Floor["nodes"][number];
export type Obstacle = Floor["obstacles"][number];
export type Interferer = Floor["interferers"][number];
export type Links = Floor["links"];
export type LinkBudgetSettings = Extract<Links, { type: "budget" }>;
export type PathLossModel = LinkBudgetSettings["pathLoss"];
