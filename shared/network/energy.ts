/**
 * What a round costs a node (model 6): radio-on time, charge, battery life, share of the time on the air. Charge is
 * I_send t_send + I_receive t_listen + I_sleep t_rest; energy is charge times supply. Waking up is counted at
 * the current of receiving: the oscillator starts and the synthesiser settles, and no data sheet gives one figure for it.
 */
import { fromDb } from "#shared/math/decibel.ts";
import type { Radio } from "#shared/scenario/round-schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { NodeFigures } from "#shared/simulation/result.ts";
import type { RoundTiming } from "./round.ts";

/** Time of a radio in each state, s. Waking up counts as listening. */
export interface RadioTime {
  sendS: number;
  listenS: number;
}

/** Of one round, or of any other span. */
export interface RadioEnergy extends RadioTime {
  radioOnS: number;
  chargeC: number;
  energyJ: number;
  /** Share of the time on, and sending. */
  dutyCycle: number;
  sendDutyCycle: number;
  /** Until the usable part of the battery is empty, from the radio alone; null: nothing is drawn. */
  batteryDays: number | null;
}

const DAY_S = 86_400;
/** 1 mAh in C. */
const MAH_C = 3.6;

/** Over a span, from the radio's times in it; it sleeps for the rest. */
export function radioEnergy({ power, battery }: Radio, spanS: number, { sendS, listenS }: RadioTime): RadioEnergy {
  const radioOnS = sendS + listenS;
  const chargeC = (power.txMa * sendS + power.rxMa * listenS) / 1e3 + (power.sleepUa * Math.max(0, spanS - radioOnS)) / 1e6;
  const usable = battery.capacityMah * MAH_C * battery.usableShare;
  return {
    sendS,
    listenS,
    radioOnS,
    chargeC,
    energyJ: chargeC * power.supplyV,
    dutyCycle: spanS > 0 ? radioOnS / spanS : 0,
    sendDutyCycle: spanS > 0 ? sendS / spanS : 0,
    batteryDays: chargeC > 0 ? ((usable / chargeC) * spanS) / DAY_S : null,
  };
}

/** The most that one slot can cost any node: its whole flood, of which it sends for `sendS`. */
export interface SlotBound extends RadioTime {
  slot: string;
  /** (H + 2N - 1) steps and slack with alternating relay, H + N with back-to-back; without the wake-up. */
  floodS: number;
  wakeUpS: number;
  /** Slots of this kind per round: 1 / everyRounds. */
  perRound: number;
}

export interface EnergyBound extends RadioEnergy {
  slots: SlotBound[];
}

/**
 * Per round, without a floor: no node's radio is on for longer than every slot's wake-up and whole flood, whatever the topology
 * (relation of Jacob et al., DATE 2018). Charge: of the dearer of two nodes, one that sends all its transmissions and listens for
 * the rest, and one that hears nothing and listens throughout.
 */
export function energyBound({ round, radio }: Scenario, { slots, periodS }: RoundTiming): EnergyBound {
  const bounds = slots.map(({ id, steps, stepS, airtimeS, startS, floodStartS, everyRounds }): SlotBound => {
    const floodS = steps * stepS;
    const wakeUpS = floodStartS - startS;
    const sendS = Math.min(round.transmissions, steps) * airtimeS;
    return { slot: id, floodS, wakeUpS, sendS, listenS: wakeUpS + floodS - sendS, perRound: 1 / everyRounds };
  });
  const sum = (of: (slot: SlotBound) => number) => bounds.reduce((total, slot) => total + of(slot) * slot.perRound, 0);
  const sendS = sum((slot) => slot.sendS);
  const listenS = sum((slot) => slot.listenS);
  const sends = radioEnergy(radio, periodS, { sendS, listenS });
  const { chargeC, energyJ, batteryDays } = radioEnergy(radio, periodS, { sendS: 0, listenS: sendS + listenS });
  return { ...sends, ...(chargeC > sends.chargeC ? { chargeC, energyJ, batteryDays } : {}), slots: bounds };
}

/** ETSI EN 300 328 V2.2.2, 4.3.2.6 (clause from memory): non-adaptive equipment at most 10 %. */
const MEDIUM_UTILISATION = 0.1;

/**
 * A hint about sharing the band, or null where there is none to give. Medium utilisation is P / 100 mW times the share of
 * the time on the air (ETSI EN 300 328 V2.2.2, formula from memory), for equipment that does not listen before it sends.
 */
export function utilisationHint(sendDutyCycle: number, txPowerDbm: number): { utilisation: number; text: string } | null {
  const utilisation = (fromDb(txPowerDbm) / 100) * sendDutyCycle;
  if (utilisation <= MEDIUM_UTILISATION) return null;
  const percent = (share: number) => `${(share * 100).toFixed(1)} %`;
  return {
    utilisation,
    text: `Medium utilisation would be ${percent(utilisation)} at ${txPowerDbm} dBm; ETSI EN 300 328 limits equipment that does not listen before sending to ${percent(MEDIUM_UTILISATION)}. Local spectrum rules decide.`,
  };
}

/** Radio times of every node over so many rounds, ns; wake-ups count as listening. */
interface RadioRecord {
  nodes: ArrayLike<number>;
  rounds: number;
  txNs: ArrayLike<number>;
  rxNs: ArrayLike<number>;
}

/** What each node spent over a run. */
export function nodeFigures(scenario: Scenario, timing: RoundTiming, { nodes, rounds, txNs, rxNs }: RadioRecord): NodeFigures[] {
  const span = (rounds * timing.ns.period) / 1e9;
  return Array.from(nodes, (node, i) => {
    const { radioOnS, chargeC, batteryDays } = radioEnergy(scenario.radio, span, { sendS: txNs[i] / 1e9, listenS: rxNs[i] / 1e9 });
    const name = scenario.floor?.nodes.find(({ id }) => id === node)?.name ?? "";
    return { node, name, radioOnS, chargeC, batteryDays };
  });
}
