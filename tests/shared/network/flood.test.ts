import { describe, expect, it } from "vitest";
import { FloodWave, NOT_RECEIVED, RADIO_OFF, type Relay, radioOnTime, sendsIn, transmissionsOf } from "#shared/network/flood.ts";
import { MatrixLinks } from "#shared/network/wave-links.ts";

const alternating = (transmissions: number): Relay => ({ relay: "alternating", transmissions });
const backToBack = (transmissions: number): Relay => ({ relay: "back-to-back", transmissions });
const sending = (relay: Relay, first: number, steps = 12) =>
  Array.from({ length: steps }, (_, i) => i + 1).filter((step) => sendsIn(relay, first, step));

describe("a node", () => {
  it("sends in every other step after its first reception, the source from step 1", () => {
    expect(sending(alternating(3), 2)).toEqual([3, 5, 7]);
    expect(sending(alternating(2), 0)).toEqual([1, 3]);
  });

  it("sends in a row with back-to-back relay", () => {
    expect(sending(backToBack(3), 2)).toEqual([3, 4, 5]);
    expect(sending(backToBack(2), 0)).toEqual([1, 2]);
  });

  it("that has received nothing, or is off, never sends", () => {
    for (const first of [NOT_RECEIVED, RADIO_OFF, 253]) expect(sending(alternating(3), first)).toEqual([]);
  });

  it("sends as often as the slot has room for", () => {
    for (const relay of [alternating(3), backToBack(3), alternating(1)])
      for (let first = 0; first < 9; first++)
        for (let steps = 1; steps < 12; steps++) expect(transmissionsOf(relay, first, steps)).toBe(sending(relay, first, steps).length);
    expect(transmissionsOf(alternating(2), NOT_RECEIVED, 9)).toBe(0);
  });
});

describe("radio-on time", () => {
  const times = { wakeUp: 200, airtime: 800, step: 1000, steps: 6 };

  it("ends with the last transmission, or with the slot", () => {
    // N = 2 after step 1: sends in 2 and 4; asleep after 3 steps and an airtime.
    expect(radioOnTime(alternating(2), 1, times)).toEqual({ send: 1600, listen: 200 + 3800 - 1600 });
    expect(radioOnTime(backToBack(2), 0, times)).toEqual({ send: 1600, listen: 200 + 1800 - 1600 });
    // Only one transmission fits before the slot's end.
    expect(radioOnTime(alternating(2), 5, times)).toEqual({ send: 800, listen: 200 + 6000 - 800 });
    expect(radioOnTime(alternating(2), NOT_RECEIVED, times)).toEqual({ send: 0, listen: 6200 });
  });

  it("of a node is never longer than the slot's wake-up and steps", () => {
    for (const relay of [alternating(3), backToBack(2)])
      for (let first = 0; first <= 6; first++) {
        const { send, listen } = radioOnTime(relay, first, times);
        expect(send + listen).toBeLessThanOrEqual(6200);
        expect(listen).toBeGreaterThanOrEqual(times.wakeUp);
      }
  });
});

describe("a wave", () => {
  const places = [0, 1, 2, 3, 4, 5];
  const prr = places.map((i) => places.map((j) => (i === j ? 0 : 1 / (1 + (i - j) ** 2))));
  const draw = (ratios: number[][], relay: Relay, round: number, steps = 8, off: number[] = []) => {
    const first = new Uint8Array(places.length);
    for (const node of off) first[node] = RADIO_OFF;
    new FloodWave(
      Int32Array.from(places, (place) => place + 1),
      relay,
    ).draw(new MatrixLinks(ratios, places), 0, { a: 3, b: 4 }, round, { start: 0, step: 1, steps }, first);
    return first;
  };

  it("leaves the source at 0 and no first reception beyond the last step", () => {
    for (let round = 0; round < 500; round++) {
      const first = draw(prr, alternating(3), round, 3);
      expect(first[0]).toBe(0);
      for (const step of first) expect(step <= 3 || step === NOT_RECEIVED).toBe(true);
    }
  });

  it("is first received only while somebody within reach sends", () => {
    const line = places.map((i) => places.map((j) => (Math.abs(i - j) === 1 ? 0.6 : 0)));
    for (let round = 0; round < 500; round++) {
      const first = draw(line, alternating(2), round, 14);
      for (let node = 1; node < places.length; node++) {
        const step = first[node] ?? 0;
        if (step !== NOT_RECEIVED) expect(sendsIn(alternating(2), first[node - 1] ?? 0, step)).toBe(true);
      }
    }
  });

  it("over better links, with the same random numbers, only gains until the first step in which that matters", () => {
    const better = prr.map((row) => row.map((ratio) => Math.min(1, ratio * 1.2)));
    for (let round = 0; round < 500; round++) {
      const [a, b] = [draw(prr, backToBack(2), round), draw(better, backToBack(2), round)];
      const matters = Math.min(...places.filter((node) => a[node] !== b[node]).map((node) => Math.min(a[node] ?? 0, b[node] ?? 0)));
      // Whoever differs in that step received over the better links.
      for (const node of places) if (a[node] !== b[node] && Math.min(a[node] ?? 0, b[node] ?? 0) === matters) expect(b[node]).toBe(matters);
    }
  });

  it("does not touch nodes that are off, and does without their relaying", () => {
    const line = places.map((i) => places.map((j) => (Math.abs(i - j) === 1 ? 1 : 0)));
    expect([...draw(line, alternating(2), 0, 14, [3])]).toEqual([0, 1, 2, RADIO_OFF, NOT_RECEIVED, NOT_RECEIVED]);
  });

  it("takes several senders over given ratios as independent tries", () => {
    const links = new MatrixLinks(prr, places);
    const senders = Int32Array.from([0, 2, 5]);
    expect(links.reception(1, senders, 2)).toBeCloseTo(1 - (1 - 0.5) * (1 - 0.5), 15);
    expect(links.reception(1, senders, 3)).toBeCloseTo(1 - 0.25 * (1 - 1 / 17), 15);
  });

  it("reads given ratios by row of the sender and column of the receiver", () => {
    const oneWay = places.map((i) => places.map((j) => (j === i + 1 ? 1 : 0)));
    expect([...draw(oneWay, alternating(1), 0, 14)]).toEqual([0, 1, 2, 3, 4, 5]);
  });
});
