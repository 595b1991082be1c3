import { describe, expect, it } from "vitest";
import { packetsPerRound } from "#shared/reception/loss-process.ts";
import { lossProcessSchema } from "#shared/scenario/schema.ts";
import { fittedProcess, MOST_RUNS, replayFrom, replayProcess, roundsToEmbed } from "#src/pages/logs/model/loss-process.ts";

describe("a replay", () => {
  it("takes the rounds of the run and a tenth more, at least a hundred", () => {
    expect(roundsToEmbed(10, 0.025)).toEqual({ rounds: 400, reserve: 100 });
    expect(roundsToEmbed(60, 0.02)).toEqual({ rounds: 3000, reserve: 300 });
    // 0.3 / 0.1 is not 3 in binary.
    expect(roundsToEmbed(0.3, 0.1).rounds).toBe(3);
  });
  it("begins with a delivered run, of length 0 when its first packet was lost", () => {
    expect(replayFrom([5, 3, 4, 1, 9], 6, 8)).toEqual({ runs: [0, 2, 4, 1, 1], packets: 8, lost: 3, short: null });
    expect(replayFrom([5, 3, 4, 1, 9], 2, 4)).toEqual({ runs: [3, 1], packets: 4, lost: 1, short: null });
  });
  it("says that the log ends, and how much there is", () => {
    expect(replayFrom([5, 3], 4, 100)).toEqual({ runs: [1, 3], packets: 4, lost: 3, short: "log" });
  });
  it("holds no more run lengths than a scenario may", () => {
    const runs = Array<number>(MOST_RUNS + 50).fill(1);
    const replayed = replayFrom(runs, 0, runs.length);
    expect(replayed).toMatchObject({ short: "runs", packets: MOST_RUNS });
    const link = { link: "S1 > C1", runs: replayed.runs };
    const process = replayProcess({
      log: { id: "44444444-4444-4444-8444-000000000001", name: "Line west" },
      measurement: link,
      command: link,
      then: "repeat",
    });
    expect(lossProcessSchema.safeParse(process).success).toBe(true);
  });
  it("takes one of so many packets where the log is quicker than the round", () => {
    expect(packetsPerRound({ intervalS: 0.01 }, 0.02)).toBe(2);
    expect(packetsPerRound({ intervalS: 0.2 }, 0.02)).toBe(1);
    expect(packetsPerRound({ intervalS: null }, 0.02)).toBe(1);
    expect(replayFrom([1, 1, 1, 1, 2], 0, 3, 2)).toMatchObject({ packets: 3, lost: 0 });
    expect(replayFrom([1, 1, 1, 1, 2], 1, 2, 2)).toMatchObject({ packets: 2, lost: 2 });
  });
});

describe("a fitted process", () => {
  const figures = { ratio: 0.0308, upper: 0.035, chain: { goodToBad: 0.00729123456, badToGood: 0.229437 } };
  it("has the fitted moves, and loses exactly while the channel is bad", () => {
    const process = fittedProcess("gilbert-elliott", figures, figures);
    expect(process).toMatchObject({ type: "gilbert-elliott", command: { goodToBad: 0.00729123, badToGood: 0.229437, lossInGood: 0, lossInBad: 1 } });
    expect(lossProcessSchema.safeParse(process).success).toBe(true);
  });
  it("is at the measured share, or at the upper end of its interval", () => {
    const other = { ...figures, ratio: 0.2, upper: 0.25 };
    expect(fittedProcess("bernoulli", figures, other)).toEqual({ type: "bernoulli", measurement: 0.0308, command: 0.2 });
    expect(fittedProcess("bernoulli-upper", figures, other)).toEqual({ type: "bernoulli", measurement: 0.035, command: 0.25 });
  });
  it("is not there for bursts where there was nothing to fit", () => {
    expect(fittedProcess("gilbert-elliott", figures, { ...figures, chain: null })).toBeNull();
  });
});
