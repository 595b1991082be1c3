import { screen, waitFor, within } from "@testing-library/react";
import { beforeEach, describe, expect, it, vi } from "vitest";
import { simulate } from "#shared/simulation/simulate.ts";
import { setAt } from "#src/pages/scenario/model/json-path.ts";
import { placementRows } from "#src/pages/scenario/placements/placement-rows.ts";
import { variantsOf } from "#src/pages/scenario/placements/variants.ts";
import { fakeServer } from "../../helpers/fake-server.ts";
import { changes, openScenario, plain, SHORT } from "./open-scenario.tsx";

vi.mock("#src/workers/pool.ts", () => import("./in-process-engine.ts"));
vi.mock("#src/components/drawings/run-bench.tsx", () => import("./run-bench-stub.tsx"));

const server = fakeServer();
beforeEach(() => localStorage.setItem("holdfast.setup-open", JSON.stringify(["round", "loop"])));

const reported = setAt(SHORT, ["loops", 0, "controller", "acknowledgement"], "reported");

describe("the placements of a controller", () => {
  it("differ in slots, and what cannot be kept is changed and said", () => {
    const [sensor, apart, actuator] = variantsOf(reported);
    expect([sensor, apart, actuator].map((variant) => variant?.timing?.slots.map(({ message }) => message))).toEqual([
      ["beacon", "command"],
      ["beacon", "measurement", "command"],
      ["beacon", "measurement"],
    ]);
    expect(apart?.notes).toEqual([]);
    expect(sensor?.notes[0]).toContain("there is no measurement message that could report them");
    expect(actuator?.notes[0]).toContain("knows what acts");
    for (const variant of [sensor, apart, actuator]) expect(variant?.issues).toEqual([]);
  });

  it("let a typed latency go where it is not possible", () => {
    const early = setAt(setAt(SHORT, ["loops", 0, "controller", "placement"], "sensor"), ["loops", 0, "timing", "actAfterSampleS"], 0.0115);
    const apart = variantsOf(early).find(({ placement }) => placement === "apart");
    expect(apart?.notes).toEqual(["The typed latency is not possible here: commands act at the round boundary."]);
    expect(apart?.scenario?.loops[0].timing.actAfterSampleS).toBeNull();
  });

  it("are compared by what their rounds and runs come to, against the present one", () => {
    const variants = variantsOf(SHORT);
    const runs = Object.fromEntries(
      variants.map(({ placement, scenario }) => {
        const outcome = simulate(scenario);
        if (!outcome.ok) throw new Error(outcome.issues[0]?.message);
        return [placement, { state: "done" as const, result: outcome.result }];
      }),
    );
    const row = (label: string) => placementRows(variants, runs).find((one) => one.label === label)?.cells;
    expect(row("Slots")).toMatchObject({ sensor: { text: "2", difference: "−1" }, apart: { text: "3", difference: null } });
    expect(row("Measurement delivered")?.sensor.text).toBe("no radio");
    expect(row("Command delivered")?.actuator.text).toBe("no radio");
    const lost = runs.apart?.result.figures.messages.find(({ message }) => message === "command");
    expect(plain(row("Command delivered")?.apart.text ?? "")).toBe(`${((1 - (lost?.lost ?? 0) / (lost?.sent ?? 1)) * 100).toFixed(1)} %`);
    expect(row("Verdict")?.apart).toMatchObject({ text: "Holds", mark: "holds" });
    expect(plain(row("Reserve")?.sensor.difference ?? "")).toMatch(/^\+\d\.\d\d ms$/);
  });

  it("say so when one does not fit, and the others are still compared", () => {
    const tight = setAt(SHORT, ["round", "periodS"], 0.012);
    const rows = placementRows(variantsOf(tight), {});
    const verdict = rows.find(({ label }) => label === "Verdict")?.cells;
    expect(verdict?.apart.text).toBe("Does not fit");
    expect(verdict?.sensor.text).toBe("…");
  });

  it("are taken over as one edit that can be undone", async () => {
    const { user } = await openScenario(server);
    await user.click(screen.getByRole("button", { name: "Compare placements of the controller" }));
    const dialog = await screen.findByRole("dialog", { name: "Where the controller sits" });
    await waitFor(() => expect(within(dialog).getAllByText("Holds").length).toBe(3));
    await user.click(within(dialog).getByRole("button", { name: "Use this placement: with the sensor" }));
    expect(changes()).toBe("1 unsaved change");
    await user.keyboard("{Control>}z{/Control}");
    expect(changes()).toBe("none");
  });
});
