import { act, render, screen, waitFor } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { MemoryRouter } from "react-router-dom";
import { describe, expect, it } from "vitest";
import { received } from "#shared/network/flood.ts";
import { drawFloods } from "#shared/network/floods.ts";
import { roundTiming } from "#shared/network/round.ts";
import { roundsOf } from "#shared/scenario/rounds.ts";
import { type Scenario, scenarioSchema } from "#shared/scenario/schema.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { createPlotCursor, PlotCursorContext } from "#src/components/plots/plot-cursor.ts";
import { FloodAtCursor, floodsDecide, useRunFloods } from "#src/pages/run/flood-at-cursor.tsx";
import { NodeTable } from "#src/pages/run/node-table.tsx";
import { madeRun } from "../../helpers/made-run.ts";
import { createEngine } from "../scenario/in-process-engine.ts";

const base = TEMPLATES[0]?.scenario as Scenario;
const node = (id: number, xM: number, more: object = {}) => ({ id, xM, yM: 5, ...more });
const scenario = scenarioSchema.parse({
  ...base,
  run: { ...base.run, durationS: 4 },
  floor: { widthM: 80, depthM: 20, nodes: [node(1, 5), node(2, 30), node(3, 55), node(4, 75, { name: "Truck", outages: [{ fromS: 2 }] })] },
  loops: [{ ...base.loops[0], nodes: { sensor: 1, controller: 3, actuator: 2 } }],
  losses: { ...base.losses, process: { type: "flood" } },
});
const timing = roundTiming(scenario);
const SEED = 7;
const record = drawFloods(scenario, timing, roundsOf(scenario), SEED);
const reachedIn = (round: number, slot: number) => {
  const at = (round * record.slots + slot) * record.nodes.length;
  return record.firstStep.subarray(at, at + record.nodes.length).filter(received).length;
};

const engine = createEngine();
const run = { scenario, timing, seed: SEED };
function Shown() {
  const floods = useRunFloods(engine, run);
  return <FloodAtCursor scenario={scenario} timing={timing} floods={floods} floorAt={(round, slot) => `/floor?round=${round}&slot=${slot}`} />;
}
function open(atS: number) {
  const cursor = createPlotCursor(4, atS);
  render(
    <MemoryRouter>
      <PlotCursorContext value={cursor}>
        <Shown />
      </PlotCursorContext>
    </MemoryRouter>,
  );
  return cursor;
}
const says = (round: number, slot: number) =>
  screen.getByText(
    (_, element) => element?.tagName === "P" && (element.textContent ?? "").startsWith(`Round ${round}: ${reachedIn(round, slot)} of 4 nodes`),
  );

describe("the flood at the cursor", () => {
  it("is the one that decided the round under the cursor, and follows it", async () => {
    const cursor = open(1.0125);
    await waitFor(() => says(40, 1));
    act(() => cursor.moveTo(2.5125));
    await waitFor(() => says(100, 1));
    expect(reachedIn(100, 1)).toBeLessThan(4);
    expect(screen.getByRole("link", { name: "Step by step" }).getAttribute("href")).toBe("/floor?round=100&slot=balancer/measurement");
  });

  it("shows another slot on demand, and tells the plan in words", async () => {
    const user = userEvent.setup();
    open(1.0125);
    await user.selectOptions(await screen.findByLabelText("Flood"), "3 Command, plan of 6");
    await waitFor(() => says(40, 2));
    expect(screen.getByRole("img", { name: new RegExp(`round 40: ${reachedIn(40, 2)} of 4 nodes have the message`) })).toBeDefined();
  });

  it("is drawn only where floods decide", () => {
    expect(floodsDecide(scenario)).toBe(true);
    expect(floodsDecide({ ...scenario, losses: base.losses })).toBe(false);
    expect(floodsDecide(base)).toBe(false);
  });
});

describe("what nodes spent", () => {
  it("stands in a table per round, and is left out of runs that were kept without it", () => {
    const { result } = madeRun({ durationS: 4 });
    const rounds = roundsOf(scenario);
    const nodes = [{ node: 4, name: "Truck", radioOnS: 0.01 * rounds, chargeC: 80e-6 * rounds, batteryDays: 25 }];
    const { unmount } = render(<NodeTable scenario={scenario} result={{ ...result, figures: { ...result.figures, nodes } }} />);
    const text = screen
      .getByRole("row", { name: /4 Truck/ })
      .textContent?.replaceAll("\u2009", " ")
      .replaceAll("\u2060", "");
    expect(text).toBe("4 Truck10.00 ms40.0 %80.0 µC25 days");
    unmount();
    const { nodes: _, ...older } = result.figures;
    const { container } = render(<NodeTable scenario={scenario} result={{ ...result, figures: older as typeof result.figures }} />);
    expect(container.textContent).toBe("");
  });
});
