import { act, renderHook, waitFor } from "@testing-library/react";
import { describe, expect, it, vi } from "vitest";
import { roundTiming } from "#shared/network/round.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { simulate } from "#shared/simulation/simulate.ts";
import { useBench } from "#src/pages/scenario/bench/use-bench.ts";
import { setAt } from "#src/pages/scenario/model/json-path.ts";
import type { EngineProgress, WorkerOutcome } from "#src/workers/contract.ts";
import { SHORT } from "./open-scenario.tsx";

/** An engine that answers when the test says so. */
function slowEngine() {
  const calls: { scenario: Scenario; answer: (outcome: WorkerOutcome) => void; fail: (error: Error) => void; tell: (now: EngineProgress) => void }[] =
    [];
  return {
    calls,
    run: (scenario: unknown, _seed: number | null, onProgress?: (now: EngineProgress) => void) =>
      new Promise<WorkerOutcome>((answer, fail) => calls.push({ scenario: scenario as Scenario, answer, fail, tell: onProgress ?? (() => {}) })),
    cancel: vi.fn(),
    digest: async () => null,
    dispose: () => {},
  };
}

const withMass = (mass: number) => setAt(SHORT, ["loops", 0, "plant", "cartMassKg"], mass) as Scenario;
const open = (engine: ReturnType<typeof slowEngine>) =>
  renderHook(({ scenario }: { scenario: Scenario | null }) => useBench(engine, scenario, scenario && roundTiming(scenario), null), {
    initialProps: { scenario: SHORT as Scenario | null },
  });
const massOf = (bench: ReturnType<typeof useBench>) => (bench.run?.scenario.loops[0].plant as { cartMassKg: number } | undefined)?.cartMassKg;

describe("the live bench", () => {
  it("shows the newest edit, whatever answers first", async () => {
    const engine = slowEngine();
    const { result, rerender } = open(engine);
    rerender({ scenario: withMass(2) });
    await act(async () => engine.calls[1].answer(simulate(withMass(2))));
    await act(async () => engine.calls[0].answer(simulate(SHORT)));
    expect(massOf(result.current)).toBe(2);
  });

  it("keeps the last good run while nothing can be run, and gives up what is under way", async () => {
    const engine = slowEngine();
    const { result, rerender } = open(engine);
    await act(async () => engine.calls[0].answer(simulate(SHORT)));
    rerender({ scenario: withMass(2) });
    rerender({ scenario: null });
    expect(engine.cancel).toHaveBeenCalled();
    await act(async () => engine.calls[1].answer(simulate(withMass(2))));
    expect(massOf(result.current)).toBe(1.2);
  });

  it("tells how far a long run is, and that it was stopped", async () => {
    vi.useFakeTimers({ toFake: ["performance"] });
    const engine = slowEngine();
    const { result } = open(engine);
    act(() => engine.calls[0].tell({ round: 1, rounds: 80 }));
    expect(result.current.progress).toBeNull();
    vi.advanceTimersByTime(1000);
    act(() => engine.calls[0].tell({ round: 40, rounds: 80 }));
    expect(result.current.progress).toEqual({ round: 40, rounds: 80 });
    vi.useRealTimers();
    await act(async () => engine.calls[0].answer({ ok: false, cancelled: true }));
    expect([result.current.cancelled, result.current.progress]).toEqual([true, null]);
  });

  it("does not go back to running when word of progress comes after the answer", async () => {
    vi.useFakeTimers({ toFake: ["performance"] });
    const engine = slowEngine();
    const { result } = open(engine);
    vi.advanceTimersByTime(1000);
    await act(async () => engine.calls[0].answer(simulate(SHORT)));
    act(() => engine.calls[0].tell({ round: 40, rounds: 80 }));
    expect(result.current.progress).toBeNull();
    expect(massOf(result.current)).toBe(1.2);
  });

  it("hands on why the engine refused, and can be asked again after it broke", async () => {
    const engine = slowEngine();
    const { result } = open(engine);
    const issue = { code: "no-gain", path: "loops[0].controller.law.stateWeights", message: "No gain." };
    await act(async () => engine.calls[0].answer({ ok: false, issues: [issue] }));
    expect(result.current.refused).toEqual([issue]);
    act(() => result.current.again());
    await act(async () => engine.calls[1].fail(new Error("worker gone")));
    expect([result.current.refused, result.current.broken]).toEqual([[], true]);
    act(() => result.current.again());
    await act(async () => engine.calls[2].answer(simulate(SHORT)));
    await waitFor(() => expect(massOf(result.current)).toBe(1.2));
  });
});
