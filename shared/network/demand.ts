/** What each loop and message of a scenario asks of the round: bytes, slots, rhythm, nodes. */
import type { Encoding, Loop, Scenario } from "#shared/scenario/schema.ts";

export type Placement = Loop["controller"]["placement"];

export interface LoopDemand {
  id: string;
  name: string;
  /** Where its settings lie in the scenario, for messages about them. */
  at: { timing: string; compute: string; bus: string; actAfter: string };
  placement: Placement;
  nodes: { sensor: number; controller: number; actuator: number } | null;
  everyRounds: number;
  firstRound: number;
  /** Payload without the header, bytes; null where the placement needs no such message. */
  measurementBytes: number | null;
  measurementCopies: number;
  commandBytes: number | null;
  commandCopies: number;
  planLength: number;
  computeS: number;
  sampleAtS: number;
  sensorBusS: number;
  actuatorBusS: number;
  commandTravels: "same-round" | "next-round";
  actAfterSampleS: number | null;
}

/** A value that is not encoded travels as a 32-bit number. */
const bitsOf = (encoding: Encoding | null): number => encoding?.bits ?? 32;

/** Payload of each message of the loop, bytes, without the header; null where the placement needs no such message. */
export function payloadBytes(loop: Loop): { measurement: number | null; command: number | null } {
  const { placement, acknowledgement } = loop.controller;
  const commandBits = loop.actuator.inputs.reduce((sum, input) => sum + bitsOf(input.encoding), 0);
  const reportBits = acknowledgement === "reported" ? commandBits : 0;
  const measurementBits = loop.sensor.signals.reduce((sum, signal) => sum + bitsOf(signal.encoding), reportBits);
  return bytesOf(placement, measurementBits, commandBits, planLengthOf(loop));
}

const planLengthOf = (loop: Loop): number => (loop.actuator.onLoss.policy === "plan" ? loop.actuator.onLoss.length : 1);

const bytesOf = (placement: Placement, measurementBits: number, commandBits: number, planLength: number) => ({
  measurement: placement === "sensor" ? null : Math.ceil(measurementBits / 8),
  command: placement === "actuator" ? null : Math.ceil((commandBits * planLength) / 8),
});

type Nodes = NonNullable<LoopDemand["nodes"]>;
/** A controller that is placed with the sensor or the actuator runs on that node, whatever is typed for it. */
export function nodesOf(nodes: Nodes | null, placement: Placement): Nodes | null {
  if (!nodes) return null;
  const controller = placement === "sensor" ? nodes.sensor : placement === "actuator" ? nodes.actuator : nodes.controller;
  return { ...nodes, controller };
}

/** The scenario's own loop first, then those that share its round. */
export function loopDemands(scenario: Scenario): LoopDemand[] {
  const own = scenario.loops.map((loop, i): LoopDemand => {
    const { measurement, command } = payloadBytes(loop);
    const at = `loops[${i}]`;
    return {
      id: loop.id,
      name: loop.name,
      at: {
        timing: `${at}.timing`,
        compute: `${at}.controller.computeS`,
        bus: command === null ? `${at}.controller.computeS` : `${at}.actuator.busTransferS`,
        actAfter: `${at}.timing.actAfterSampleS`,
      },
      placement: loop.controller.placement,
      nodes: nodesOf(loop.nodes, loop.controller.placement),
      ...loop.timing,
      measurementBytes: measurement,
      measurementCopies: loop.sensor.copies,
      commandBytes: command,
      commandCopies: loop.actuator.copies,
      planLength: planLengthOf(loop),
      computeS: loop.controller.computeS,
      sensorBusS: loop.sensor.busTransferS,
      actuatorBusS: loop.actuator.busTransferS,
    };
  });
  const others = scenario.round.otherLoops.map((loop, i): LoopDemand => {
    const { measurement, command } = bytesOf(loop.placement, loop.measurementBits, loop.commandBits, loop.planLength);
    const at = `round.otherLoops[${i}]`;
    return {
      ...loop,
      at: { timing: at, compute: `${at}.computeS`, bus: `${at}.computeS`, actAfter: `${at}.computeS` },
      nodes: nodesOf(loop.nodes, loop.placement),
      measurementBytes: measurement,
      commandBytes: command,
      sensorBusS: 0,
      actuatorBusS: 0,
      actAfterSampleS: null,
    };
  });
  return [...own, ...others];
}
