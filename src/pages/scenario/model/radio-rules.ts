/** Words, symbols and units of the radio's, the round's and the replay's settings. */
import type { Rule } from "./field-spec.ts";
import { MICROSECONDS, MILLISECONDS, PERCENT, siUnit } from "./screen-unit.ts";

const say = (label: string, more: Omit<Rule, "label"> = {}): Rule => ({ label: () => label, ...more });

const rhythm = (owner: string): Record<string, Rule> => ({
  [`${owner}.everyRounds`]: say("Every so many rounds", { unit: siUnit("rounds") }),
  [`${owner}.firstRound`]: say("First in round"),
});

export const RADIO_RULES: Record<string, Rule> = {
  "radio.phy": say("PHY"),
  "radio.headerBytes": say("Header"),
  "radio.turnaroundS": say("Turnaround", { unit: MICROSECONDS }),
  "radio.txPowerDbm": say("Transmit power"),
  "radio.channels.list": say("Channels"),
  "radio.channels.hopping": say("Next channel"),
  "radio.reception.type": say("Reception from SNR"),
  "radio.reception.name": say("Name of the table"),
  "radio.reception.rows": say("SNR and reception ratio"),
  "radio.reception.rows[].snrDb": say("SNR"),
  "radio.reception.rows[].prr": say("Reception ratio"),
  "radio.reception.codingGainS2Db": say("Coding gain, S = 2"),
  "radio.reception.codingGainS8Db": say("Coding gain, S = 8"),
  "radio.power.device": say("Radio"),
  "radio.power.txMa": say("Sending"),
  "radio.power.rxMa": say("Receiving"),
  "radio.power.sleepUa": say("Asleep"),
  "radio.power.supplyV": say("Supply"),
  "radio.power.source": say("Source"),
  "radio.battery.capacityMah": say("Battery"),
  "radio.battery.usableShare": say("Usable", { unit: PERCENT }),

  "round.beacon.payloadBytes": say("Beacon payload"),
  "round.beacon.needed": say("Beacon missed"),

  ...rhythm("loops[].timing"),
  "loops[].sensor.copies": say("Measurement sent in"),
  "loops[].actuator.copies": say("Command sent in"),
  "loops[].nodes": say("Nodes"),
  "loops[].nodes.sensor": say("Sensor at node"),
  "loops[].nodes.controller": say("Controller at node"),
  "loops[].nodes.actuator": say("Actuator at node"),

  ...rhythm("round.otherLoops[]"),
  "round.otherLoops[].id": say("Short name"),
  "round.otherLoops[].name": say("Name"),
  "round.otherLoops[].placement": say("Controller sits"),
  "round.otherLoops[].nodes": say("Nodes"),
  "round.otherLoops[].nodes.sensor": say("Sensor at node"),
  "round.otherLoops[].nodes.controller": say("Controller at node"),
  "round.otherLoops[].nodes.actuator": say("Actuator at node"),
  "round.otherLoops[].measurementBits": say("Measurement", { unit: siUnit("bits") }),
  "round.otherLoops[].measurementCopies": say("Measurement sent in"),
  "round.otherLoops[].commandBits": say("Command", { unit: siUnit("bits") }),
  "round.otherLoops[].commandCopies": say("Command sent in"),
  "round.otherLoops[].planLength": say("Plan", { unit: siUnit("steps") }),
  "round.otherLoops[].computeS": say("Computes for", { unit: MILLISECONDS }),
  "round.otherLoops[].sampleAtS": say("Samples at", { unit: MILLISECONDS }),
  "round.otherLoops[].commandTravels": say("Command travels"),

  ...rhythm("round.messages[]"),
  "round.messages[].id": say("Short name"),
  "round.messages[].name": say("Name"),
  "round.messages[].from": say("From node"),
  "round.messages[].to": say("Needed by"),
  "round.messages[].payloadBytes": say("Payload"),
  "round.messages[].copies": say("Sent in"),

  "losses.process.measurement.link": say("Measurement, link"),
  "losses.process.command.link": say("Command, link"),
};
