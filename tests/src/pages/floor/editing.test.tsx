import { act, fireEvent, screen, waitFor } from "@testing-library/react";
import { beforeEach, describe, expect, it, vi } from "vitest";
import { fakeServer } from "../../helpers/fake-server.ts";
import { field, plain, typeInto } from "../scenario/open-scenario.tsx";
import { markOf, onFloor, openFloor, ROW } from "./open-floor.tsx";

vi.mock("#src/workers/pool.ts", () => import("../scenario/in-process-engine.ts"));
vi.mock("#src/components/drawings/run-bench.tsx", () => import("../scenario/run-bench-stub.tsx"));

const server = fakeServer();
beforeEach(() => localStorage.clear());

const focus = (id: number) => act(() => markOf(id).focus());

describe("editing a floor", () => {
  it("moves the node that has the focus by 0.1 m, with Shift by 1 m, as one step of undo", async () => {
    const { floor } = await openFloor(server, onFloor(ROW));
    focus(4);
    fireEvent.keyDown(markOf(4), { key: "ArrowRight" });
    fireEvent.keyDown(markOf(4), { key: "ArrowRight" });
    fireEvent.keyDown(markOf(4), { key: "ArrowUp", shiftKey: true });
    expect(floor().nodes[3]).toMatchObject({ xM: 41.2, yM: 9 });
    expect(field("floor.nodes[3].xM").value).toBe("41.2");
    fireEvent.keyDown(document.body, { key: "z", ctrlKey: true });
    expect(floor().nodes[3]).toMatchObject({ xM: 41, yM: 10 });
  });

  it("does not move a node out of the plan", async () => {
    const { floor } = await openFloor(server, onFloor(ROW));
    focus(4);
    for (let i = 0; i < 15; i++) fireEvent.keyDown(markOf(4), { key: "ArrowRight", shiftKey: true });
    expect(floor().nodes[3].xM).toBe(50);
  });

  it("explains a place outside of the plan at its field, with the permitted range", async () => {
    const { user } = await openFloor(server, onFloor(ROW));
    focus(2);
    await typeInto(user, "floor.nodes[1].xM", "80");
    expect(plain((await screen.findAllByText(/Node 2 is 80/))[0].parentElement?.textContent ?? "")).toMatch(/permitted 0 to 50/);
    expect(field("floor.nodes[1].xM").getAttribute("aria-invalid")).toBe("true");
  });

  it("refuses a number that another node has and names a free one; a new number goes along with the loop", async () => {
    const { user, draft } = await openFloor(server, onFloor(ROW));
    focus(3);
    const number = screen.getByRole("textbox", { name: "Number" });
    await user.clear(number);
    await user.type(number, "4{Enter}");
    expect(await screen.findByText("There is a node 4 already.")).toBeDefined();
    expect(screen.getByText(/5 is free/)).toBeDefined();
    expect(draft().floor?.nodes[2].id).toBe(3);
    await user.clear(screen.getByRole("textbox", { name: "Number" }));
    await user.type(screen.getByRole("textbox", { name: "Number" }), "30{Enter}");
    expect(draft().floor?.nodes[2].id).toBe(30);
    expect(draft().loops[0].nodes?.controller).toBe(30);
  });

  it("adds a node at a typed place with the lowest free number", async () => {
    const { user, floor } = await openFloor(server, onFloor({ ...ROW, nodes: ROW.nodes.filter(({ id }) => id !== 4) }));
    await user.click(screen.getByRole("button", { name: "Node" }));
    await user.clear(screen.getByRole("textbox", { name: /^Across/ }));
    await user.type(screen.getByRole("textbox", { name: /^Across/ }), "33.5");
    await user.click(screen.getByRole("button", { name: "Add the node" }));
    expect(floor().nodes.at(-1)).toMatchObject({ id: 4, xM: 33.5, yM: 10 });
    expect(screen.getByRole("heading", { name: "Node 4" })).toBeDefined();
  });

  it("draws a wall by typed ends, and weakens the links that cross it", async () => {
    const { user, floor } = await openFloor(server, onFloor(ROW));
    focus(1);
    expect((await screen.findAllByText("clear")).length).toBe(3);
    await user.click(screen.getByRole("button", { name: "Wall" }));
    for (const [name, value] of [
      [/^From, across/, "23"],
      [/^From, down/, "0"],
      [/^To, across/, "23"],
      [/^To, down/, "20"],
    ] as const) {
      await user.clear(screen.getByRole("textbox", { name }));
      await user.type(screen.getByRole("textbox", { name }), value);
    }
    await user.click(screen.getByRole("button", { name: "Add the wall" }));
    expect(floor().obstacles).toEqual([expect.objectContaining({ type: "wall", fromXM: 23, toXM: 23, fromYM: 0, toYM: 20 })]);
    await user.keyboard("{Escape}");
    focus(1);
    await waitFor(() => expect(screen.getAllByText("1 wall").length).toBe(2));
  });

  it("removes a node by key, says what ran on it, and brings it back by undo", async () => {
    const { floor } = await openFloor(server, onFloor(ROW));
    focus(3);
    fireEvent.keyDown(markOf(3), { key: "Delete" });
    expect(floor().nodes.map(({ id }) => id)).toEqual([1, 2, 4]);
    expect(await screen.findByText(/It was controller of/)).toBeDefined();
    fireEvent.keyDown(document.body, { key: "z", ctrlKey: true });
    expect(floor().nodes.map(({ id }) => id)).toEqual([1, 2, 3, 4]);
  });

  it("pans and zooms by keys, and shows the whole plan again", async () => {
    const { user } = await openFloor(server, onFloor(ROW));
    const plan = screen.getByRole("group", { name: /^Plan of Hall 2/ });
    const at = () => markOf(1).getAttribute("transform");
    const whole = at();
    fireEvent.keyDown(plan, { key: "+" });
    const near = at();
    expect(near).not.toBe(whole);
    fireEvent.keyDown(plan, { key: "ArrowRight" });
    expect(at()).not.toBe(near);
    await user.click(screen.getByRole("button", { name: "Whole plan" }));
    expect(at()).toBe(whole);
  });

  it("offers to let floods decide where something else does", async () => {
    const { user, draft } = await openFloor(server, onFloor(ROW, { losses: { process: { type: "none" }, streams: "own", outages: [] } }));
    await user.click(await screen.findByRole("button", { name: "Let floods decide" }));
    expect(draft().losses.process).toEqual({ type: "flood" });
    expect(screen.queryByRole("button", { name: "Let floods decide" })).toBeNull();
  });

  it("keeps the draft and its undo while one goes to the bench and back", async () => {
    const { user, floor } = await openFloor(server, onFloor(ROW));
    focus(4);
    fireEvent.keyDown(markOf(4), { key: "ArrowLeft", shiftKey: true });
    await user.click(screen.getByRole("link", { name: "Bench" }));
    await screen.findByRole("region", { name: "Set-up" });
    await user.click(screen.getAllByRole("link", { name: "Floor" })[0]);
    await screen.findByRole("toolbar", { name: "Plan tools" });
    expect(floor().nodes[3].xM).toBe(40);
    fireEvent.keyDown(document.body, { key: "z", ctrlKey: true });
    expect(floor().nodes[3].xM).toBe(41);
  });
});
