/** What a round costs a radio. */
import { describe, expect, it } from "vitest";
import { energyBound, nodeFigures, radioEnergy, utilisationHint } from "#shared/network/energy.ts";
import { drawFloods } from "#shared/network/floods.ts";
import { phyTiming } from "#shared/network/phy.ts";
import { RADIO_FIGURES } from "#shared/network/radio-figures.ts";
import { roundTiming } from "#shared/network/round.ts";
import { type Radio, radioSchema } from "#shared/scenario/round-schema.ts";
import { hall, line } from "../../helpers/floors.ts";
import { scalar } from "../../helpers/scenarios.ts";

const radio = (change: Partial<Radio> = {}): Radio => ({ ...radioSchema.parse({ phy: "ieee802154" }), ...change });

describe("the energy of one frame", () => {
  // checks.md 11, energy.frame and power.nrf52840: Nordic nRF52840 product specification, 802.15.4 at 0 dBm, DC/DC, 3 V; E = I V t.
  it("of 30 octets on an nRF52840 is 22.1 uJ sent and 22.6 uJ received", () => {
    const airtimeS = phyTiming("ieee802154").airtimeNs(28) / 1e9;
    expect(airtimeS).toBe(0.001152);
    const [nordic] = RADIO_FIGURES;
    expect(nordic).toMatchObject({ device: "nRF52840, DC/DC", txMa: 6.4, rxMa: 6.53, supplyV: 3 });
    const awake = radio({ power: { ...nordic, sleepUa: 0 } });
    expect(radioEnergy(awake, airtimeS, { sendS: airtimeS, listenS: 0 }).energyJ * 1e6).toBeCloseTo(22.1184, 9);
    expect(radioEnergy(awake, airtimeS, { sendS: 0, listenS: airtimeS }).energyJ * 1e6).toBeCloseTo(22.56768, 9);
  });

  it("has a source for every set of figures, and says what is from memory", () => {
    expect(RADIO_FIGURES.map(({ device }) => device)).toEqual(["nRF52840, DC/DC", "CC2340R5", "CC2538", "CC2652R"]);
    for (const { source } of RADIO_FIGURES) expect(source).toMatch(/Nordic|Texas Instruments/);
    expect(RADIO_FIGURES.filter(({ source }) => /from memory/.test(source)).map(({ device }) => device)).toEqual([
      "nRF52840, DC/DC",
      "CC2538",
      "CC2652R",
    ]);
    // What a scenario has unless something is typed.
    expect(radio().power).toEqual(RADIO_FIGURES[0]);
  });
});

describe("a battery", () => {
  it("lasts for its usable charge over the mean current", () => {
    const asleep = radio({ power: { ...radio().power, sleepUa: 100 }, battery: { capacityMah: 2400, usableShare: 0.5 } });
    // 1200 mAh at 0.1 mA are 12 000 hours.
    expect(radioEnergy(asleep, 0.02, { sendS: 0, listenS: 0 }).batteryDays).toBeCloseTo(500, 9);
  });
  it("lasts without end when nothing is drawn", () => {
    const off = radio({ power: { ...radio().power, sleepUa: 0 } });
    expect(radioEnergy(off, 0.02, { sendS: 0, listenS: 0 }).batteryDays).toBeNull();
  });
});

describe("the bound of a round", () => {
  // Jacob et al., DATE 2018: a flood is over after (H + 2N - 1) T_hop, and so is every radio's work for it (checks.md 11).
  it("is (H + 2N - 1) steps per slot, with wake-up and slack", () => {
    const scenario = scalar((input) => {
      input.radio = { phy: "ieee802154" };
      input.round = { periodS: 0.1, hops: 3, transmissions: 2, slackSteps: 1, wakeUpS: 0.0003, beacon: null };
    });
    const timing = roundTiming(scenario);
    const bound = energyBound(scenario, timing);
    expect(bound.slots).toHaveLength(2);
    const stepS = timing.slots[0].airtimeS + 0.000192;
    expect(bound.slots[0].floodS).toBeCloseTo((3 + 2 * 2 - 1 + 1) * stepS, 12);
    expect(bound.slots[0].sendS).toBeCloseTo(2 * timing.slots[0].airtimeS, 12);
    expect(bound.radioOnS).toBeCloseTo(2 * (7 * stepS + 0.0003), 12);
  });

  it("counts a slot of every fourth round as a quarter", () => {
    const of = (everyRounds: number) => {
      const scenario = scalar((input) => {
        input.round = { periodS: 0.1, messages: [{ id: "beat", name: "Heartbeat", payloadBytes: 10, everyRounds }] };
      });
      return energyBound(scenario, roundTiming(scenario)).radioOnS;
    };
    const without = scalar((input) => {
      input.round = { periodS: 0.1 };
    });
    const base = energyBound(without, roundTiming(without)).radioOnS;
    expect(of(4) - base).toBeCloseTo((of(1) - base) / 4, 12);
  });

  it("holds for the dearer of sending and listening", () => {
    const charge = (txMa: number, rxMa: number) => {
      const scenario = scalar((input) => {
        input.radio = { phy: "ieee802154", power: { device: "any", txMa, rxMa, sleepUa: 0, supplyV: 3 } };
        input.round = { periodS: 0.1 };
      });
      return { ...energyBound(scenario, roundTiming(scenario)), scenario };
    };
    const listening = charge(5, 20);
    expect(listening.chargeC).toBeCloseTo(0.02 * listening.radioOnS, 12);
    const sending = charge(20, 5);
    expect(sending.chargeC).toBeCloseTo(0.02 * sending.sendS + 0.005 * sending.listenS, 12);
  });

  it.each([
    ["a hall", hall()],
    ["a line with losses", line(6, 0.7)],
    ["a line deeper than the hop bound", line(9, 1, (input) => void Object.assign(input.round, { hops: 2 }))],
  ])("is kept by every node on %s", (_what, scenario) => {
    const timing = roundTiming(scenario);
    const bound = energyBound(scenario, timing);
    const rounds = 50;
    for (const { radioOnS, chargeC } of nodeFigures(scenario, timing, drawFloods(scenario, timing, rounds, 1))) {
      expect(radioOnS).toBeLessThanOrEqual(rounds * bound.radioOnS + 1e-9);
      expect(chargeC).toBeLessThanOrEqual(rounds * bound.chargeC + 1e-9);
    }
  });
});

describe("what a node spent over a run", () => {
  it("follows from its times by hand", () => {
    const scenario = line(3, 1);
    const timing = roundTiming(scenario);
    const { power } = scenario.radio;
    const [first] = nodeFigures(scenario, timing, { nodes: [1], rounds: 10, txNs: [2e6], rxNs: [7e6] });
    const span = 10 * scenario.round.periodS;
    const charge = (power.txMa * 0.002 + power.rxMa * 0.007) / 1e3 + (power.sleepUa * (span - 0.009)) / 1e6;
    expect(first.node).toBe(1);
    expect(first.radioOnS).toBeCloseTo(0.009, 12);
    expect(first.chargeC).toBeCloseTo(charge, 12);
    expect(first.batteryDays).toBeCloseTo((2600 * 0.8 * 3.6 * span) / charge / 86400, 6);
  });
});

describe("the hint about sharing the band", () => {
  // checks.md 10, reg.mu_example: MU = P / 100 mW x duty cycle (formula from memory); ETSI EN 300 328 V2.2.2: at most 10 %.
  it("is given above 10 % medium utilisation only", () => {
    expect(utilisationHint(0.05, 20)).toBeNull();
    expect(utilisationHint(0.5, 10)).toBeNull();
    expect(utilisationHint(0.2, 20)?.utilisation).toBeCloseTo(0.2, 12);
    expect(utilisationHint(0.2, 20)?.text).toMatch(/20\.0 % at 20 dBm; ETSI EN 300 328 .* 10\.0 %\. Local spectrum rules decide\./);
  });
});
