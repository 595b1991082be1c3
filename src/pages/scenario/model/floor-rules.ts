/** Words, symbols and units of the floor's settings. */
import type { Rule } from "./field-spec.ts";
import { MILLISECONDS, PERCENT } from "./screen-unit.ts";

const say = (label: string, more: Omit<Rule, "label"> = {}): Rule => ({ label: () => label, ...more });
const across = say("Across", { symbol: "x" });
const down = say("Down", { symbol: "y" });

export const FLOOR_RULES: Record<string, Rule> = {
  "floor.name": say("Name"),
  "floor.widthM": say("Width"),
  "floor.depthM": say("Depth"),
  "floor.beaconNode": say("Beacon sent by node"),

  "floor.nodes[].id": say("Number"),
  "floor.nodes[].name": say("Name"),
  "floor.nodes[].xM": across,
  "floor.nodes[].yM": down,
  "floor.nodes[].heightM": say("Height"),
  "floor.nodes[].txPowerDbm": say("Transmit power"),
  "floor.nodes[].wayPoints[].atS": say("At"),
  "floor.nodes[].wayPoints[].xM": across,
  "floor.nodes[].wayPoints[].yM": down,
  "floor.nodes[].outages[].fromS": say("Out of service from"),
  "floor.nodes[].outages[].untilS": say("Until"),

  "floor.obstacles[].name": say("Name"),
  "floor.obstacles[].fromXM": say("From, across", { symbol: "x" }),
  "floor.obstacles[].fromYM": say("From, down", { symbol: "y" }),
  "floor.obstacles[].toXM": say("To, across", { symbol: "x" }),
  "floor.obstacles[].toYM": say("To, down", { symbol: "y" }),
  "floor.obstacles[].xM": across,
  "floor.obstacles[].yM": down,
  "floor.obstacles[].widthM": say("Width"),
  "floor.obstacles[].depthM": say("Depth"),
  "floor.obstacles[].lossDb": say("Weakens by"),

  "floor.interferers[].name": say("Name"),
  "floor.interferers[].xM": across,
  "floor.interferers[].yM": down,
  "floor.interferers[].heightM": say("Height"),
  "floor.interferers[].powerDbm": say("Power, e.i.r.p."),
  "floor.interferers[].centreMHz": say("Centre"),
  "floor.interferers[].bandwidthMHz": say("Bandwidth"),
  "floor.interferers[].activity.type": say("Sends"),
  "floor.interferers[].activity.onS": say("On for", { unit: MILLISECONDS }),
  "floor.interferers[].activity.offS": say("Off for", { unit: MILLISECONDS }),
  "floor.interferers[].activity.phaseS": say("Passed at t = 0", { unit: MILLISECONDS }),
  "floor.interferers[].activity.onShare": say("On", { unit: PERCENT }),
  "floor.interferers[].activity.meanOnS": say("On for, mean", { unit: MILLISECONDS }),
  "floor.interferers[].fromS": say("From"),
  "floor.interferers[].untilS": say("Until"),

  "floor.links.type": say("Links"),
  "floor.links.pathLoss.type": say("Path loss"),
  "floor.links.pathLoss.exponent": say("Exponent", { symbol: "n" }),
  "floor.links.pathLoss.lossAt1mDb": say("Loss at 1\u2009m"),
  "floor.links.shadowing.sigmaDb": say("Shadowing", { symbol: "σ" }),
  "floor.links.shadowing.correlationM": say("Correlated over"),
  "floor.links.shadowing.seed": say("Seed of the hall"),
  "floor.links.fading": say("Fading"),
  "floor.links.fading.kDb": say("Rice factor", { symbol: "K" }),
  "floor.links.fading.coherence.type": say("Changes with"),
  "floor.links.fading.coherence.leastMPerS": say("Surroundings move at"),
  "floor.links.fading.coherence.coherenceS": say("Coherence time", { unit: MILLISECONDS }),
  "floor.links.noiseFigureDb": say("Noise figure"),
  "floor.links.captureDb": say("Capture"),
  "floor.links.concurrencyPenaltyDb": say("Concurrent senders"),
  "floor.links.prr": say("Reception ratios"),

  "floor.picture": say("Picture"),
  "floor.picture.xM": say("Corner, across", { symbol: "x" }),
  "floor.picture.yM": say("Corner, down", { symbol: "y" }),
  "floor.picture.metresPerPixel": say("One pixel"),
  "floor.picture.opacity": say("Strength", { unit: PERCENT }),
};
