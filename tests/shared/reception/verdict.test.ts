import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { uniformStream } from "#shared/math/random.ts";
import { binomialAtMost } from "#shared/math/statistics.ts";
import { measureForClaim, shownReliability, slowerThanRound } from "#shared/reception/claim.ts";
import { fitLink } from "#shared/reception/fit.ts";
import { hoursCovered, hoursThatDiffer } from "#shared/reception/hours.ts";
import { burstThatWouldShow, testIndependence } from "#shared/reception/independence.ts";
import { bernoulliOf, gilbertElliottOf, packetsPerRound, replayOf, replayProcess, roundsInReplay } from "#shared/reception/loss-process.ts";
import type { LinkTrace } from "#shared/reception/types.ts";
import { verdictWords } from "#shared/reception/verdict-words.ts";
import { lossProcessSchema } from "#shared/scenario/schema.ts";

const traceOf = (runs: number[], more: Partial<LinkTrace> = {}): LinkTrace => ({
  source: "3",
  receiver: "7",
  firstNumber: 0,
  runs,
  packets: runs.reduce((sum, length) => sum + length, 0),
  lost: runs.filter((_, i) => i % 2 === 1).reduce((sum, length) => sum + length, 0),
  lostBefore: 0,
  lostAfter: 0,
  intervalS: 0.02,
  firstTimeS: null,
  lastTimeS: null,
  hours: null,
  rssi: null,
  ...more,
});
/** Without the thin spaces that keep numbers and units together. */
const plain = (text: string): string => text.replaceAll("\u2009\u2060", " ");
const words = (trace: LinkTrace, periodS: number | null = null) => {
  const { headline, sentences } = verdictWords({ trace, fit: fitLink(trace), test: testIndependence(trace), periodS });
  return { headline: plain(headline), sentences: sentences.map(plain) };
};
/** Loss after every so many packets, a little irregular. */
const scattered = (losses: number, gap: number): number[] =>
  Array.from({ length: 2 * losses + 1 }, (_, i) => (i % 2 === 1 ? 1 : gap + ((i * 7919) % gap) - Math.floor(gap / 2)));
const inBursts = (bursts: number, length: number, gap: number): number[] =>
  Array.from({ length: 2 * bursts + 1 }, (_, i) => (i % 2 === 1 ? length : gap + ((i * 7919) % gap) - Math.floor(gap / 2)));

describe("the verdict in words", () => {
  it("bounds the loss of a log without one, and says that bursts are unknown", () => {
    const { headline, sentences } = words(traceOf([2995]));
    expect(headline).toBe("None of 2 995 packets was lost");
    expect(sentences[0]).toBe("With 95 % confidence at least 99.9 % arrive, if losses are independent.");
    expect(sentences[1]).toMatch(/nothing can be said about bursts/);
  });
  it("never says more than the packets show: its lower limit is rounded down", () => {
    const shown = (packets: number) => /at least ([\d.]+) %/.exec(words(traceOf([packets])).sentences[0] ?? "")?.[1];
    expect([1, 10, 298, 299, 2900, 2994, 2995].map(shown)).toEqual(["5", "74", "98.9", "99", "99.89", "99.89", "99.9"]);
  });
  it("has too few losses to tell below ten, and says which bursts would have shown", () => {
    const trace = traceOf(scattered(7, 300));
    expect(testIndependence(trace)).toMatchObject({ verdict: "too-few", burstThatWouldShow: 2 });
    const { headline, sentences } = words(trace);
    expect(headline).toBe("Too few losses to tell: 7");
    expect(sentences[1]).toBe("At least 10 are needed for a verdict. Had they come in bursts of 2 or more, the runs test would have shown it.");
  });
  it("says so when those few came in one streak", () => {
    const { headline, sentences } = words(traceOf([1000, 7, 1000]));
    expect(headline).toBe("Too few losses to tell: 7");
    expect(sentences[2]).toMatch(/They did: the longest streak is 7/);
  });
  it("sees no burst where hardly anything was recorded", () => {
    expect(testIndependence({ runs: [2, 1, 3, 1, 2] }).burstThatWouldShow).toBeNull();
    expect(words(traceOf([2, 1, 3, 1, 2])).sentences[1]).toMatch(/no burst would have shown/);
  });
  it("speaks of deliveries when those are few", () => expect(words(traceOf([0, 500, 3, 500])).headline).toBe("Too few deliveries to tell: 3"));
  it("finds no dependence in scattered losses, and does not call that a proof", () => {
    const trace = traceOf([...scattered(120, 40), 1, 30, 2, 25]);
    expect(testIndependence(trace).verdict).toBe("independent");
    const { headline, sentences } = words(trace);
    expect(headline).toBe("No sign that losses depend on each other");
    expect(sentences.at(-1)).toMatch(/no proof/);
  });
  it("finds bursts, gives their length against chance, and widens the interval", () => {
    const trace = traceOf(inBursts(60, 4, 100));
    const { headline, sentences } = words(trace);
    expect(testIndependence(trace).verdict).toBe("bursts");
    expect(headline).toBe("Losses come in bursts of 4 packets on average");
    expect(sentences[1]).toMatch(/where independent losses would make 1\.04; the longest is 4 \(80 ms\)/);
    expect(sentences[2]).toMatch(/^Bursts make the log worth \d+ independent packets/);
    const fit = fitLink(trace);
    const [lo, hi] = fit.allowingForBursts?.wilson ?? [0, 0];
    expect(hi - lo).toBeGreaterThan(1.5 * (fit.wilson[1] - fit.wilson[0]));
  });
  it("tells one long outage from the link's usual ways", () => {
    const { sentences } = words(traceOf([...inBursts(60, 2, 100), 180, 400]));
    expect(sentences[2]).toBe(
      "One streak makes 60 % of all losses: an outage rather than the link's usual ways. Look at it apart, and at the rest without it.",
    );
    expect(words(traceOf(inBursts(60, 4, 100))).sentences.join(" ")).not.toMatch(/One streak makes/);
  });
  it("finds losses that keep apart", () => {
    const runs = Array.from({ length: 401 }, (_, i) => (i % 2 === 1 ? 1 : 1 + (i % 3)));
    expect(testIndependence({ runs }).verdict).toBe("apart");
    expect(words(traceOf(runs)).headline).toBe("Losses keep apart more than chance would have it");
  });
  it("finds a rhythm that successive packets do not show, and says how far apart", () => {
    // Independent losses of a third, repeated five packets later: alike at lag 5, not at lag 1.
    let state = 12_345;
    const random = (): number => {
      state = (state * 1_103_515_245 + 12_345) % 2_147_483_648;
      return state / 2_147_483_648;
    };
    const bits: number[] = [];
    for (let k = 0; k < 4000; k++) bits.push(k >= 5 && random() < 0.4 ? bits[k - 5] : random() < 0.33 ? 1 : 0);
    const runs = [0];
    for (const bit of bits) {
      if ((runs.length % 2 === 0) === (bit === 1)) runs[runs.length - 1]++;
      else runs.push(1);
    }
    expect(testIndependence({ runs }).verdict).toBe("rhythm");
    expect(words(traceOf(runs)).sentences[1]).toMatch(/packets that lie 5 apart \(100 ms\) are alike: correlation 0\.\d+/);
  });
  it("asks whether the column is the right way round when everything was lost", () => {
    expect(words(traceOf([0, 80]))).toEqual({
      headline: "All 80 packets were lost",
      sentences: ["Nothing can be fitted. Is the received column the right way round?"],
    });
  });
  it("speaks of one packet as of one", () => {
    expect([traceOf([1]), traceOf([0, 1])].map((trace) => words(trace).headline)).toEqual([
      "The only packet was not lost",
      "The only packet was lost",
    ]);
  });
  it("says with both numbers that a log is slower than the round", () => {
    const trace = traceOf(scattered(30, 50), { intervalS: 0.1 });
    expect(words(trace, 0.02).sentences.at(-1)).toBe(
      "This log has one packet each 100 ms, the round lasts 20 ms: bursts shorter than 5 rounds cannot be seen in it. Log one packet a round to see them.",
    );
    expect(slowerThanRound(trace, 0.1)).toMatchObject({ slower: false, sentence: null });
    expect(slowerThanRound({ intervalS: 0.0201 }, 0.02).slower).toBe(false);
    expect(plain(slowerThanRound({ intervalS: null }, 0.02).sentence ?? "")).toMatch(/does not say how far its packets lie apart/);
  });
  it("names rounds at the ends that only others saw", () => {
    expect(words(traceOf([0, 40, 500], { lostBefore: 40 })).sentences.join(" ")).toMatch(/40 rounds at the ends count as lost/);
  });
});

it("every log gets figures and plain sentences, however short or odd", () => {
  const anyRuns = fc
    .tuple(fc.nat(3), fc.array(fc.oneof(fc.integer({ min: 1, max: 4 }), fc.integer({ min: 1, max: 5_000_000 })), { maxLength: 30 }))
    .map(([first, rest]) => [first, ...rest])
    .filter((runs) => runs.length > 1 || runs[0] > 0);
  const leaves = (value: unknown): unknown[] => (value !== null && typeof value === "object" ? Object.values(value).flatMap(leaves) : [value]);
  fc.assert(
    fc.property(anyRuns, fc.constantFrom(null, 0.02, 3), (runs, periodS) => {
      const trace = traceOf(runs);
      const fit = fitLink(trace);
      const test = testIndependence(trace);
      expect(leaves([fit, test]).filter((leaf) => typeof leaf === "number" && !Number.isFinite(leaf))).toEqual([]);
      const [lo, hi] = fit.clopperPearson;
      expect(lo).toBeLessThanOrEqual(fit.lossRatio);
      expect(hi).toBeGreaterThanOrEqual(fit.lossRatio);
      for (const p of [test.runs?.p, test.ljungBox?.p, test.transitions?.p, fit.gilbertElliott?.pValue]) {
        if (p !== undefined) expect(p >= 0 && p <= 1, `p = ${p}`).toBe(true);
      }
      const { headline, sentences } = words(trace, periodS);
      for (const text of [headline, ...sentences]) expect(text).not.toMatch(/NaN|Infinity|undefined|null|none/);
    }),
    { seed: 5, numRuns: 500 },
  );
});

describe("how often the verdict errs", () => {
  /** A Gilbert-Elliott channel that starts stationary; independent when goodToBad + badToGood = 1. */
  const drawn = (packets: number, goodToBad: number, badToGood: number, seed: number): number[] => {
    const uniform = uniformStream(seed, "verdict");
    let bad = uniform() < goodToBad / (goodToBad + badToGood);
    const runs = [0];
    for (let k = 0; k < packets; k++) {
      if ((runs.length % 2 === 0) === bad) runs[runs.length - 1]++;
      else runs.push(1);
      const u = uniform();
      bad = bad ? u >= badToGood : u < goodToBad;
    }
    return runs;
  };
  const shareOf = (verdict: string, packets: number, goodToBad: number, badToGood: number): number => {
    const seeds = Array.from({ length: 200 }, (_, seed) => seed);
    return seeds.filter((seed) => testIndependence({ runs: drawn(packets, goodToBad, badToGood, seed) }).verdict === verdict).length / seeds.length;
  };

  it.each([
    [5000, 0.02],
    [1000, 0.05],
    [2000, 0.2],
    [2000, 0.5],
  ])("raises a false alarm over %i independent packets at loss %d at most once in twenty logs", (packets, loss) => {
    expect(shareOf("independent", packets, loss, 1 - loss)).toBeGreaterThanOrEqual(0.95);
  });
  it("finds bursts of two packets in five thousand nearly always", () => expect(shareOf("bursts", 5000, 0.02, 0.5)).toBeGreaterThan(0.99));
  it("finds losses that keep apart nearly always", () => expect(shareOf("apart", 3000, 0.3, 0.8)).toBeGreaterThan(0.99));
});

describe("the hours of the day", () => {
  const day = (entries: Record<number, [number, number]>) =>
    Array.from({ length: 24 }, (_, hour) => ({ packets: entries[hour]?.[0] ?? 0, lost: entries[hour]?.[1] ?? 0 }));
  it("are named where the log covers them", () => {
    expect(hoursCovered(day({ 5: [10, 0], 6: [10, 1], 22: [5, 0] }))).toBe("5 to 7 h and 22 to 23 h");
    expect(hoursCovered(Array.from({ length: 24 }, () => ({ packets: 3, lost: 0 })))).toBeNull();
  });
  it("are told apart when their losses differ by more than chance", () => {
    expect(hoursThatDiffer(day({ 3: [5000, 10], 14: [5000, 250], 15: [50, 40] }))).toEqual({
      best: { hour: 3, loss: 0.002 },
      worst: { hour: 14, loss: 0.05 },
    });
    expect(hoursThatDiffer(day({ 3: [5000, 100], 14: [5000, 112] }))).toBeNull();
  });
});

describe("how long one must measure", () => {
  it("says 2 995 packets without a loss for 99.9 % at 95 %, and how long that takes", () => {
    const claim = measureForClaim(0.999, 0.95, 0, 0.02);
    expect(claim).toMatchObject({ packets: 2995, durationS: 59.9 });
    expect(plain(claim.sentence)).toMatch(
      /^2 995 packets without a loss show that at least 99\.9 % arrive, with 95 % confidence, that is 59\.9 s at one each 20 ms\./,
    );
    expect(measureForClaim(0.999, 0.95)).toMatchObject({ packets: 2995, durationS: null });
  });
  it("needs more when losses are allowed, and shows the reliability that it asks for", () => {
    const { packets, sentence } = measureForClaim(0.99, 0.95, 2);
    expect(packets).toBe(628);
    expect(plain(sentence)).toMatch(/628 packets with at most 2 losses/);
    expect(shownReliability(packets, 2, 0.95)).toBeGreaterThanOrEqual(0.99);
    expect(shownReliability(packets - 1, 2, 0.95)).toBeLessThan(0.99);
    expect(binomialAtMost(2, packets, 1 - shownReliability(packets, 2, 0.95))).toBeCloseTo(0.05, 9);
  });
});

it("a burst that would show has a p below the significance, and one shorter has not", () => {
  expect(burstThatWouldShow(9, 100_000, 0.05)).toBe(2);
  expect(burstThatWouldShow(9, 30, 0.05)).toBeGreaterThan(2);
  expect(burstThatWouldShow(1, 1000, 0.05)).toBeNull();
});

describe("a log as a scenario's losses", () => {
  const trace = traceOf(inBursts(60, 4, 100));
  const fit = fitLink(trace);
  const log = { id: "0b3c2a52-6f7e-4d0a-9a51-3f5a1f0f7a11", name: "Bay 3, press running" };

  it("is a replay that the scenario's schema takes, from any packet on", () => {
    const from = trace.runs[0];
    const measurement = replayOf(trace, from, 50);
    expect(measurement).toMatchObject({ link: "3 > 7", runs: [0, 4, 46] });
    const process = replayProcess(log, measurement, replayOf(trace, 0, 1000), "repeat");
    expect(lossProcessSchema.parse(process)).toEqual(process);
    expect(replayProcess(null, measurement, measurement).log).toBeNull();
  });
  it("takes every n-th packet when it is faster than the round, and each when it is slower", () => {
    expect(packetsPerRound({ intervalS: 0.005 }, 0.02)).toBe(4);
    expect(packetsPerRound({ intervalS: 0.1 }, 0.02)).toBe(1);
    expect(packetsPerRound({ intervalS: null }, 0.02)).toBe(1);
    expect(roundsInReplay({ packets: 1001 }, 1, 4)).toBe(250);
    expect(replayOf(traceOf([8, 4, 8]), 0, 100, 4).runs).toEqual([2, 1, 2]);
  });
  it("is a fitted channel, at the estimate or at the unfavourable end", () => {
    const estimate = gilbertElliottOf(fit)?.value;
    const upper = gilbertElliottOf(fit, "upper")?.value;
    expect(estimate).toMatchObject({ goodToBad: fit.gilbertElliott?.goodToBad, badToGood: 0.25, lossInGood: 0, lossInBad: 1 });
    expect(upper?.goodToBad).toBeGreaterThan(estimate?.goodToBad ?? 1);
    expect(upper?.badToGood).toBeLessThan(estimate?.badToGood ?? 0);
    expect(gilbertElliottOf(fitLink({ runs: [500] }))).toBeNull();
  });
  it("is independent losses, at the estimate or at the upper end, wider for bursts", () => {
    expect(bernoulliOf(fit).value).toBe(trace.lost / trace.packets);
    expect(bernoulliOf(fit, "upper")).toEqual({
      value: fit.allowingForBursts?.wilson[1],
      sentence: "The upper end of the 95 % interval, allowing for bursts.",
    });
    expect(bernoulliOf(fitLink({ runs: [2995] }), "upper").value).toBeCloseTo(0.00123, 5);
  });
});

it("the streak histogram expects what independent losses bring, by enumeration of every outcome", () => {
  const trace = traceOf([2, 3, 1, 1, 3]);
  const { streaks, lossRatio } = fitLink(trace);
  const expected = streaks.map(() => 0);
  for (let outcome = 0; outcome < 2 ** trace.packets; outcome++) {
    const bits = outcome.toString(2).padStart(trace.packets, "0");
    const probability = [...bits].reduce((product, bit) => product * (bit === "1" ? lossRatio : 1 - lossRatio), 1);
    for (const [streak] of bits.matchAll(/1+/g)) if (streak.length <= expected.length) expected[streak.length - 1] += probability;
  }
  expect(expected.length).toBe(3);
  streaks.forEach(({ expectedIndependent }, i) => {
    expect(expectedIndependent).toBeCloseTo(expected[i] ?? -1, 12);
  });
});

it("the streak histogram adds up to all streaks, with what chance and channel would bring", () => {
  const fit = fitLink({ runs: [...inBursts(60, 4, 100), 30, 40] });
  const sum = (pick: (row: (typeof fit.streaks)[number]) => number): number => fit.streaks.reduce((total, row) => total + pick(row), 0);
  expect(fit.streaks.at(-1)).toMatchObject({ length: 20, orMore: true, count: 1 });
  expect(sum(({ count }) => count)).toBe(fit.counts.lostStreaks);
  expect(sum(({ expectedGilbertElliott }) => expectedGilbertElliott ?? 0)).toBeCloseTo(fit.counts.lostStreaks, 9);
  const { packets } = fit.counts;
  expect(sum(({ expectedIndependent }) => expectedIndependent)).toBeCloseTo((packets - 1) * fit.lossRatio * (1 - fit.lossRatio) + fit.lossRatio, 6);
});
