/** Channels, links and reception against the standards and published formulas (checks.md 1, 2 and 4, recomputed there with SciPy). */
import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { normalOfWord, threefry } from "#shared/math/keyed-random.ts";
import { channelBand } from "#shared/network/channels.ts";
import { dopplerHz } from "#shared/network/fading.ts";
import { FloodWave, NOT_RECEIVED, type Relay, transmissionsOf } from "#shared/network/flood.ts";
import { LinkBudget, noiseDbm } from "#shared/network/link-budget.ts";
import { pathLoss } from "#shared/network/path-loss.ts";
import { phyTiming } from "#shared/network/phy.ts";
import { bitErrorRate154, bitErrorRateFsk, packetReception } from "#shared/network/reception.ts";
import { floodSteps } from "#shared/network/schedule.ts";
import { MatrixLinks } from "#shared/network/wave-links.ts";
import type { PathLossModel } from "#shared/scenario/floor-schema.ts";
import { at, floorOf, scenarioOn, within } from "../shared/network/floors.ts";

const db = (level: number) => 10 ** (level / 10);

function close(value: number, wanted: number, tolerance: number): void {
  expect(Math.abs(value - wanted), `${value} against ${wanted}`).toBeLessThanOrEqual(tolerance);
}

describe("channels", () => {
  // IEEE Std 802.15.4-2011, 8.1.2.1; Bluetooth Core Specification v5.x, Vol 6 Part A, 2.
  it("lie where the standards put them", () => {
    expect([11, 15, 20, 25, 26].map((k) => channelBand("ieee802154", k).centreMHz)).toEqual([2405, 2425, 2450, 2475, 2480]);
    expect([0, 12, 39].map((k) => channelBand("le-2m", k).centreMHz)).toEqual([2402, 2426, 2480]);
  });
});

describe("reception of IEEE 802.15.4", () => {
  // IEEE 802.15.4-2006 annex E.4.1.8 (from memory): 8/15 of the symbol error rate of non-coherent 16-ary orthogonal signalling at Es/N0 = 20 SINR.
  it("has the bit error rates of the standard's coexistence annex", () => {
    const rates = [
      [-10, 0.322050677845],
      [-6, 0.122210378789],
      [-5, 0.0751715640896],
      [-4, 0.0391634599256],
      [-3, 0.0164186377818],
      [-2, 0.00519699956741],
      [-1, 0.00114894371604],
      [0, 0.000161526687923],
      [1, 1.29118662648e-5],
      [2, 5.13139208877e-7],
      [3, 8.59719127469e-9],
      [4, 4.92750505752e-11],
    ] as const;
    for (const [level, rate] of rates) close(bitErrorRate154(db(level)), rate, 1e-9 * rate);
    close(bitErrorRate154(db(5)), 7.3860094132e-14, 1e-3 * 7.3860094132e-14);
    close(bitErrorRate154(0), 0.5, 1e-12);
  });

  // PER = 1 - (1 - BER)^(8 N), N octets of PSDU.
  it("loses packets of 20 octets as independent bit errors do", () => {
    const losses = [
      [-2, 0.565555967073],
      [-1, 0.168011517378],
      [0, 0.0255151996721],
      [1, 0.00206377941251],
    ] as const;
    for (const [level, loss] of losses) close(1 - packetReception(bitErrorRate154(db(level)), 20), loss, 1e-9);
    // The SINR of 1 % lost, as the standard defines sensitivity (2011, 10.3.4).
    close(1 - packetReception(bitErrorRate154(db(0.403498908072)), 20), 0.01, 1e-8);
  });
});

describe("reception of Bluetooth LE", () => {
  // Proakis, Digital Communications, non-coherent orthogonal binary FSK: 1/2 exp(-Eb/(2 N0)); at Eb/N0 = 2 ln 500 one bit in a thousand.
  it("has the bit error rate of non-coherent binary FSK", () => {
    close(bitErrorRateFsk(2 * Math.log(500)), 1e-3, 1e-15);
    close(bitErrorRateFsk(0), 0.5, 0);
  });
});

describe("path loss", () => {
  const loss = (model: PathLossModel, frequencyMHz: number, distanceM: number) => pathLoss(model, frequencyMHz)(distanceM);

  // 3GPP TR 38.901 Table 7.4.1-1 (Rel-16 and later), f = 2.44 GHz.
  it.each([
    [1, [39.2004067004, 40.7477965268, 40.7477965268, 40.1477965268, 41.3777965268]],
    [10, [60.7004067004, 66.2477965268, 66.2477965268, 63.1477965268, 63.2777965268]],
    [30, [70.9585136769, 78.4143885221, 79.0810253203, 74.1215853853, 73.7267520051]],
    [100, [82.2004067004, 91.7477965268, 97.7477965268, 86.1477965268, 85.1777965268]],
  ])("in an indoor factory at %d m is that of 3GPP TR 38.901, with its lower bounds", (d, wanted) => {
    const clutters = ["LOS", "SL", "DL", "SH", "DH"] as const;
    clutters.forEach((clutter, i) => {
      close(loss({ type: "indoor-factory", clutter }, 2440, d), wanted[i] ?? Number.NaN, 1e-9);
    });
  });

  // ITU-R P.1238-10 (coefficients from memory).
  it("in industry at 50 m is that of ITU-R P.1238-10", () => {
    close(loss({ type: "p1238-10", environment: "industrial-los" }, 2440, 50), 71.996128524, 1e-9);
    close(loss({ type: "p1238-10", environment: "industrial-nlos" }, 2440, 50), 93.667224095, 1e-9);
  });

  // ITU-R P.1238-8: 20 log10 f_MHz + N log10 d - 28 with N = 28, 30, 22, by hand at 2400 MHz and 10 m.
  it("indoors at 10 m is that of ITU-R P.1238-8", () => {
    const at1m = 20 * Math.log10(2400) - 28;
    const environments = { residential: 28, office: 30, commercial: 22 } as const;
    for (const environment of ["residential", "office", "commercial"] as const)
      close(loss({ type: "p1238-8", environment }, 2400, 10), at1m + environments[environment], 1e-9);
  });

  // ITU-R P.525, 20 log10(4 pi d f / c), and the rounded rule of thumb with 27.55.
  it("in free space is that of Friis", () => {
    [40.1955797487, 60.1955797487, 80.1955797487].forEach((wanted, i) => {
      close(loss({ type: "free-space" }, 2440, 10 ** i), wanted, 1e-9);
    });
    close(loss({ type: "free-space" }, 2440, 10), 20 + 20 * Math.log10(2440) - 27.55, 0.0023);
  });

  it("is never less than at 1 m, and with exponent 2 log-distance is free space", () => {
    close(loss({ type: "free-space" }, 2440, 0.01), 40.1955797487, 1e-9);
    close(loss({ type: "log-distance", exponent: 2, lossAt1mDb: null }, 2440, 37), loss({ type: "free-space" }, 2440, 37), 1e-9);
    close(loss({ type: "log-distance", exponent: 3, lossAt1mDb: 40 }, 2440, 100), 100, 1e-9);
  });
});

describe("noise and link budget", () => {
  // kT at 290 K is -173.9752 dBm/Hz, rounded to -174.
  it("has the noise floor of -174 dBm/Hz, bandwidth and noise figure", () => {
    close(noiseDbm(2, 0), -110.989700043, 1e-9);
    close(noiseDbm(2, 6), -104.989700043, 1e-9);
    close(noiseDbm(1, 6), -108, 1e-9);
  });

  // checks.md link.budget_example: 0 dBm over 30 m of InF-DL at 2.44 GHz into 2 MHz with a noise figure of 6 dB.
  it("gives the example's received power and signal-to-noise ratio", () => {
    const links = { type: "budget" as const, pathLoss: { type: "indoor-factory" as const, clutter: "DL" as const }, noiseFigureDb: 6 };
    const { floor, radio } = scenarioOn({ floor: floorOf(at([20, 50], [50, 50], [50, 60]), { links }), radio: { txPowerDbm: 0 } });
    if (floor?.links.type !== "budget") throw new Error("no budget");
    const budget = new LinkBudget(floor, floor.links, radio, floor.nodes, 0);
    close(10 * Math.log10(budget.powerMw[1] ?? 0), -79.0810253203, 1e-9);
    close(10 * Math.log10((budget.powerMw[3] ?? 0) / budget.noiseMw), 25.9086747231, 1e-9);
  });

  it("has the Doppler frequency v f / c", () => {
    close(dopplerHz(1, 2440), 2.44e9 / 299_792_458, 1e-9);
  });
});

describe("random numbers by key and counter", () => {
  // Known answers of Threefry-2x32 with 20 rounds, published with Salmon et al., SC 2011 (Random123, kat_vectors).
  it("are Threefry's", () => {
    const words = new Int32Array(2);
    const answer = (key: [number, number], counter: [number, number]) => {
      threefry({ a: key[0], b: key[1] }, counter[0], counter[1], words);
      return Array.from(words, (word) => (word >>> 0).toString(16));
    };
    expect(answer([0, 0], [0, 0])).toEqual(["6b200159", "99ba4efe"]);
    expect(answer([0xffffffff, 0xffffffff], [0xffffffff, 0xffffffff])).toEqual(["1cb996fc", "bb002be7"]);
    expect(answer([0x13198a2e, 0x03707344], [0x243f6a88, 0x85a308d3])).toEqual(["c4923a9c", "483df7a0"]);
  });

  // Python 3.11, statistics.NormalDist().inv_cdf((word + 1/2) / 2^32), Wichura's AS 241 as well.
  it("become normal by the law's inverse", () => {
    const wanted = [
      [0, -6.337957754553789],
      [12345, -4.535422762090429],
      [2 ** 30, -0.6744897498297384],
      [2 ** 31, 2.9180993729166234e-10],
      [4e9, 1.4857137558957358],
      [2 ** 32 - 1, 6.337957754553789],
    ] as const;
    for (const [word, value] of wanted) close(normalOfWord(word), value, 1e-14 * Math.abs(value));
  });
});

describe("the wave", () => {
  interface Case {
    graph: string;
    prr: number[][];
    source: number;
    relay: Relay["relay"];
    transmissions: number;
    steps: number;
    slotEnd: boolean;
    reach: number[];
    sets: [mask: number, p: number][];
    firstStep: [step: number, p: number][][];
  }
  // scripts/fixtures/make_floods.py: enumerated in exact fractions, no simulation.
  const { cases }: { cases: Case[] } = JSON.parse(readFileSync(new URL("../fixtures/floods.json", import.meta.url), "utf8"));
  const FLOODS = 40_000;

  /** Relative frequencies of the sets of receivers and of the steps of first reception, over floods with a fixed key. */
  function drawn({ prr, source, relay, transmissions, steps }: Case) {
    const n = prr.length;
    const places = prr.map((_, i) => i);
    const wave = new FloodWave(Int32Array.from(places), { relay, transmissions });
    const links = new MatrixLinks(prr, places);
    const first = new Uint8Array(n);
    const sets = new Map<number, number>();
    const firsts = places.map(() => new Map<number, number>());
    const add = (map: Map<number, number>, key: number) => map.set(key, (map.get(key) ?? 0) + 1 / FLOODS);
    for (let round = 0; round < FLOODS; round++) {
      first.fill(0);
      wave.draw(links, source, { a: 7, b: 11 }, round, { start: 0, step: 1, steps }, first);
      let mask = 0;
      first.forEach((step, i) => {
        if (step !== NOT_RECEIVED) mask += 2 ** i;
        if (step !== NOT_RECEIVED && i !== source) add(firsts[i] ?? new Map(), step);
      });
      add(sets, mask);
    }
    return { sets, firsts };
  }

  it.each(
    cases.map((one) => [`${one.graph}, ${one.relay}, N = ${one.transmissions}, ${one.slotEnd ? `${one.steps} steps` : "no slot end"}`, one] as const),
  )("reaches the enumerated nodes in the enumerated steps: %s", (_, one) => {
    const { sets, firsts } = drawn(one);
    expect([...sets.keys()].every((mask) => one.sets.some(([known]) => known === mask))).toBe(true);
    for (const [mask, p] of one.sets) close(sets.get(mask) ?? 0, p, within(p, FLOODS));
    one.firstStep.forEach((steps, node) => {
      for (const [step, p] of steps) close(firsts[node]?.get(step) ?? 0, p, within(p, FLOODS));
      expect(firsts[node]?.size).toBeLessThanOrEqual(steps.length);
    });
  });

  const lineOf3 = (relay: Relay["relay"], transmissions: number, slotEnd: boolean) =>
    cases.find((one) => one.graph === "line of 3 hops" && one.relay === relay && one.transmissions === transmissions && one.slotEnd === slotEnd)
      ?.reach[3];

  // loop-tables.md, mistake 12: H 3, N 2, q 0.9.
  it("over three hops of 90 % with N = 2 was enumerated as by hand", () => {
    close(lineOf3("alternating", 2, true) ?? 0, 0.9477, 1e-9);
    close(lineOf3("back-to-back", 2, true) ?? 0, 0.96957, 1e-9);
    close(lineOf3("alternating", 2, false) ?? 0, 0.970299, 1e-9);
    close(lineOf3("back-to-back", 2, false) ?? 0, 0.970299, 1e-9);
  });

  it("with one transmission per node is the same step by step with both policies", () => {
    const one = cases.find(({ graph, transmissions }) => graph === "two ways of unlike links" && transmissions === 1);
    if (!one) throw new Error("no such case");
    const places = one.prr.map((_, i) => i);
    const [a, b] = [new Uint8Array(places.length), new Uint8Array(places.length)];
    const waves = (["alternating", "back-to-back"] as const).map((relay) => new FloodWave(Int32Array.from(places), { relay, transmissions: 1 }));
    for (let round = 0; round < 2000; round++) {
      waves[0]?.draw(new MatrixLinks(one.prr, places), 0, { a: 1, b: 2 }, round, { start: 0, step: 1, steps: 6 }, a);
      waves[1]?.draw(new MatrixLinks(one.prr, places), 0, { a: 1, b: 2 }, round, { start: 0, step: 1, steps: 6 }, b);
      expect(a).toEqual(b);
    }
  });

  // Jacob et al., "TTW: A Time-Triggered-Wireless Design for CPS", DATE 2018: T_flood = (H + 2N - 1) T_hop; a lossless line is over exactly then.
  it("on a lossless line ends with the slot that the published relation gives", () => {
    const pairs = [
      [1, 1, 2],
      [2, 2, 5],
      [3, 2, 6],
      [4, 3, 9],
      [6, 3, 11],
      [5, 1, 6],
    ] as const;
    for (const [hops, transmissions, wanted] of pairs) {
      const places = Array.from({ length: hops + 1 }, (_, i) => i);
      const links = new MatrixLinks(
        places.map((i) => places.map((j) => (Math.abs(i - j) === 1 ? 1 : 0))),
        places,
      );
      const first = new Uint8Array(hops + 1);
      const relay: Relay = { relay: "alternating", transmissions };
      new FloodWave(Int32Array.from(places), relay).draw(links, 0, { a: 0, b: 0 }, 0, { start: 0, step: 1, steps: 60 }, first);
      expect([...first]).toEqual(places);
      expect(transmissionsOf(relay, hops, wanted)).toBe(transmissions);
      expect(transmissionsOf(relay, hops, wanted - 1)).toBe(transmissions - 1);
      expect(floodSteps("alternating", hops, transmissions)).toBe(wanted);
    }
    // The same four of them with PSDUs of 30 octets and a turnaround of 192 us (checks.md flood.time), in us.
    const stepUs = (phyTiming("ieee802154").airtimeNs(28) + 192_000) / 1000;
    expect([2, 6, 9, 11].map((steps) => steps * stepUs)).toEqual([2688, 8064, 12096, 14784]);
  });
});
