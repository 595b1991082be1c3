import { fireEvent, screen, waitFor } from "@testing-library/react";
import { beforeEach, describe, expect, it, vi } from "vitest";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import { fakeServer } from "../../helpers/fake-server.ts";
import { field } from "../scenario/open-scenario.tsx";
import { markOf, onFloor, openFloor, ROW } from "./open-floor.tsx";

vi.mock("#src/workers/pool.ts", () => import("../scenario/in-process-engine.ts"));
vi.mock("#src/components/drawings/run-bench.tsx", () => import("../scenario/run-bench-stub.tsx"));

const server = fakeServer();
beforeEach(() => localStorage.clear());

/** A line on which every node hears its neighbours only: one hop a step, whatever is drawn. */
const line: Floor = {
  ...ROW,
  links: {
    type: "matrix",
    prr: [
      [0, 1, 0, 0],
      [1, 0, 1, 0],
      [0, 1, 0, 1],
      [0, 0, 1, 0],
    ],
  },
};

const slider = () => screen.findByRole("slider", { name: "Step of the flood" });

describe("the wave on the plan", () => {
  it("goes on by one hop a step, in marks and in words", async () => {
    await openFloor(server, onFloor(line));
    const steps = await slider();
    fireEvent.keyDown(steps, { key: "Home" });
    expect(steps.getAttribute("aria-valuetext")).toMatch(/^step 1 of \d+: 2 of 4 nodes/);
    expect(markOf(1).getAttribute("aria-label")).toContain("starts the flood");
    expect(markOf(2).getAttribute("aria-label")).toContain("receives now");
    expect(markOf(3).getAttribute("aria-label")).toContain("not yet");
    fireEvent.keyDown(steps, { key: "ArrowRight" });
    expect(markOf(2).getAttribute("aria-label")).toContain("sends now");
    expect(markOf(3).getAttribute("aria-label")).toContain("receives now");
    expect(await screen.findByText(/^Delivered to 3.*Controller in step 2 of/)).toBeDefined();
  });

  it("says where a flood was lost, and finds the round in which somebody missed it", async () => {
    const cut: Floor = { ...line, nodes: line.nodes.map((node) => (node.id === 2 ? { ...node, outages: [{ fromS: 1, untilS: 1.5 }] } : node)) };
    const { user } = await openFloor(server, onFloor(cut));
    await slider();
    const round = screen.getByRole("textbox", { name: /^Round, 0 to/ }) as HTMLInputElement;
    await user.clear(round);
    await user.type(round, "0{Enter}");
    expect(await screen.findByText(/^Delivered to 3/)).toBeDefined();
    await user.click(screen.getByRole("button", { name: "Next missed" }));
    expect(await screen.findByText(/^Lost at 3.*The loop needs it there/)).toBeDefined();
    expect(Number(round.value)).toBeGreaterThan(0);
    expect(markOf(2).getAttribute("aria-label")).toContain("out of service");
  });

  it("shows another slot's flood when it is chosen in the table", async () => {
    const { user } = await openFloor(server, onFloor(line));
    await slider();
    await user.click(screen.getByRole("button", { name: /^Command/ }));
    expect((screen.getByRole("combobox", { name: "Slot" }) as HTMLSelectElement).value).toMatch(/command/);
    await waitFor(() => expect(markOf(3).getAttribute("aria-label")).toContain("starts the flood"));
  });

  it("surveys the floor with intervals and makes advised changes through undo", async () => {
    const { user } = await openFloor(server, onFloor(line));
    await slider();
    await user.click(screen.getByRole("button", { name: "Survey the floor" }));
    expect(await screen.findByRole("button", { name: "Survey again" })).toBeDefined();
    expect(screen.getByRole("columnheader", { name: /Half by step/ })).toBeDefined();
    expect(screen.getAllByText(/99\.8\d to 100\.00/).length).toBeGreaterThan(0);
  }, 60_000);

  it("takes pasted ratios, per cent and with names; says which row is wrong and keeps what was pasted", async () => {
    const { user, floor } = await openFloor(server, onFloor(line));
    await user.click(screen.getByRole("heading", { name: "Link model" }));
    const area = await waitFor(() => field("floor.links.prr"));
    fireEvent.change(area, { target: { value: "node\t1\t2\t3\t4\n1\t\t90%\t0\t0\n2\t90\t\t100\t0\n3\t0\t100\t\t100\n4\t0\t0\t100\t" } });
    expect((floor().links as { prr: number[][] }).prr[1]).toEqual([0.9, 0, 1, 0]);
    fireEvent.change(area, { target: { value: "0 1 0 0\n1 0 x 0\n0 1 0 1\n0 0 1 0" } });
    expect((await screen.findAllByText(/Row 2, column 3: “x” is no number/)).length).toBeGreaterThan(0);
    expect((area as unknown as HTMLTextAreaElement).value).toContain("1 0 x 0");
    expect((floor().links as { prr: number[][] }).prr[1]).toEqual([0.9, 0, 1, 0]);
  });
});

describe("a scenario without a floor", () => {
  it("explains a bad size and lays out loop and relays at places that follow from a good one", async () => {
    const { user, draft } = await openFloor(
      server,
      onFloor(null, { losses: { process: { type: "none" }, streams: "own", outages: [] }, loops: [{ ...onFloor(null).loops[0], nodes: null }] }),
    );
    const width = screen.getByRole("textbox", { name: "Width" });
    await user.clear(width);
    await user.type(width, "0.5");
    expect(screen.getByText(/Width is 0.5 m: 1 to 2000 m is permitted/)).toBeDefined();
    expect(screen.getByRole("button", { name: "Place the loop and relays" }).getAttribute("aria-disabled")).toBe("true");
    await user.clear(width);
    await user.type(width, "60");
    await user.click(screen.getByRole("button", { name: "Place the loop and relays" }));
    await screen.findByRole("toolbar", { name: "Plan tools" });
    const { floor, loops } = draft();
    expect(floor?.nodes.length).toBeGreaterThan(4);
    expect(floor?.nodes.every(({ xM, yM }) => xM <= 60 && yM <= 40)).toBe(true);
    expect(loops[0].nodes).toEqual({ sensor: 1, controller: 3, actuator: 2 });
  });
});
