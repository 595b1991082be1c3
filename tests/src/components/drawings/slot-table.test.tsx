import { render, screen, within } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { describe, expect, it, vi } from "vitest";
import { roundTiming } from "#shared/network/round.ts";
import { type Scenario, scenarioSchema } from "#shared/scenario/schema.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { linesOf, ribbonScale, ribbonText, roundsText, stairOf } from "#src/components/drawings/ribbon-geometry.ts";
import { RoundRibbon } from "#src/components/drawings/round-ribbon.tsx";
import { occupiedS, roundSum, slotsCsv } from "#src/components/drawings/slot-facts.ts";
import { SlotTable } from "#src/components/drawings/slot-table.tsx";
import { SmallRibbon } from "#src/components/drawings/small-ribbon.tsx";

const base = TEMPLATES[0]?.scenario as Scenario;
const plain = (text: string | null) => (text ?? "").replaceAll("\u2009", " ").replaceAll("\u2060", "");
const node = (id: number, name = "") => ({ id, name, xM: id, yM: 1 });
const onFloor = scenarioSchema.parse({
  ...base,
  floor: { widthM: 72, depthM: 40, nodes: [node(1, "Cart"), node(2, "Drive"), node(3, "Controller"), node(4)] },
  loops: [{ ...base.loops[0], nodes: { sensor: 1, controller: 3, actuator: 2 } }],
});
const other = (id: string, name: string, everyRounds = 1, firstRound = 0) => ({
  id,
  name,
  everyRounds,
  firstRound,
  measurementBits: 64,
  commandBits: 32,
});
const sharing = (loops: object[], periodS: number) =>
  roundTiming(scenarioSchema.parse({ ...base, round: { ...base.round, periodS, otherLoops: loops } }));
const alternating = sharing([other("gantry", "Gantry", 2, 0), other("table", "Tilting table", 2, 1)], 0.05);

describe("the table of slots", () => {
  it("names sender and receivers by the floor, and sums the round up in one sentence", () => {
    const timing = roundTiming(onFloor);
    render(<SlotTable timing={timing} floor={onFloor.floor} delivered={{ beacon: 0.9994 }} />);
    const rows = screen.getAllByRole("row").map(({ textContent }) => plain(textContent));
    expect(rows[1]).toContain("3 Controllerall 4");
    expect(rows[1]).toContain("99.940");
    expect(rows[2]).toContain("1 Cart3 Controller");
    const sum = plain(roundSum(timing));
    expect(sum).toMatch(/^Slots \d+\.\d\d ms, compute 1\.50 ms, guard 0\.00 ms: the round fits with \d+\.\d\d ms in reserve$/);
    expect(rows.at(-1)).toContain(sum);
    const spans = [...document.querySelectorAll("tfoot td")].map((cell) => (cell as HTMLTableCellElement).colSpan);
    const heads = screen.getAllByRole("columnheader").map(({ textContent }) => textContent);
    expect(spans.reduce((total, span) => total + span, 0)).toBe(heads.length);
    expect(heads[spans[0] + spans[1]]).toBe("Slot, ms");
  });

  it("accounts for every part of the period, also where slots share a place", () => {
    for (const timing of [roundTiming(onFloor), alternating]) {
      const end = Math.max(...timing.slots.map(({ endS }) => endS));
      expect(occupiedS(timing)).toBeLessThanOrEqual(end + 1e-12);
      expect(end + timing.guardS + timing.reserveS).toBeCloseTo(timing.periodS, 12);
    }
    const lengths = alternating.slots.reduce((sum, { startS, endS }) => sum + endS - startS, 0);
    expect(occupiedS(alternating)).toBeLessThan(lengths - 1e-4);
  });

  it("says of a round that does not fit how much is missing", () => {
    const timing = roundTiming({ ...base, round: { ...base.round, periodS: 0.01 } });
    expect(plain(roundSum(timing))).toMatch(/the round does not fit, \d+\.\d\d ms are missing; the shortest period is 17\.11 ms$/);
  });

  it("lets a row be chosen by key", async () => {
    const onSelect = vi.fn();
    const user = userEvent.setup();
    render(<SlotTable timing={roundTiming(onFloor)} floor={onFloor.floor} selected="beacon" onSelect={onSelect} />);
    expect(screen.getByRole("button", { name: "Beacon" }).getAttribute("aria-pressed")).toBe("true");
    screen.getByRole("button", { name: "Measurement" }).focus();
    await user.keyboard("{Enter}");
    expect(onSelect).toHaveBeenCalledWith("balancer/measurement");
  });

  it("goes out as a file with one row per slot and exact times", () => {
    const timing = roundTiming(onFloor);
    const lines = slotsCsv(timing, onFloor.floor).trimEnd().split("\r\n");
    expect(lines).toHaveLength(timing.slots.length + 1);
    const [, beacon] = lines;
    expect(beacon?.split(",").slice(0, 8)).toEqual(["1", "Beacon", "", "3 Controller", "all", "1", "0", "4"]);
    expect(Number(lines[2]?.split(",")[12])).toBeCloseTo((timing.slots[1]?.endS ?? 0) * 1000, 6);
  });
});

describe("a round that loops share", () => {
  it("tells slots apart that share a place in different rounds", () => {
    const lines = linesOf(alternating.slots);
    const sharingPlace = alternating.slots.flatMap((a, i) =>
      alternating.slots.flatMap((b, j) => (j > i && a.startS < b.endS - 1e-9 && b.startS < a.endS - 1e-9 ? [[lines[i], lines[j]]] : [])),
    );
    expect(sharingPlace.length).toBeGreaterThan(0);
    for (const [a, b] of sharingPlace) expect(a).not.toBe(b);
    alternating.slots.forEach((slot, i) => {
      if (slot.everyRounds === 1) expect(lines[i]).toBe(0);
    });
    render(<SlotTable timing={alternating} />);
    const gantry = screen.getAllByRole("row", { name: /Gantry/ })[0] as HTMLElement;
    expect(within(gantry).getByText("0, 2, 4 …")).toBeDefined();
  });

  it("says in words in which rounds a slot occurs and what each loop's latency is", () => {
    expect(roundsText({ everyRounds: 2, firstRound: 1 })).toBe("1, 3, 5 …");
    expect(roundsText({ everyRounds: 1, firstRound: 0 })).toBe("");
    const text = ribbonText(alternating);
    expect(text).toContain("Measurement, Tilting table from");
    expect(text).toContain("in rounds 1, 3, 5 …");
    expect(text).toMatch(/Gantry samples at 0 ms in rounds 0, 2, 4 …, .*latency 50 ms/);
  });

  it("draws a lane with its latency for each of twelve loops, large and small", () => {
    const twelve = sharing(
      Array.from({ length: 11 }, (_, i) => other(`l${i}`, `Loop number ${i + 2}`)),
      0.25,
    );
    const { container } = render(<RoundRibbon timing={twelve} tabled />);
    const words = [...container.querySelectorAll("text")].map(({ textContent }) => plain(textContent));
    expect(words.filter((word) => word === "250.00 ms")).toHaveLength(12);
    expect(words).toContain("Loop number 12");
    expect(words).toContain("25");
    const small = render(<SmallRibbon timing={twelve} />);
    expect(small.container.querySelectorAll(".small-lane")).toHaveLength(12);
  });
});

describe("stairs of computed shares", () => {
  it("stand as high as the share of nodes that have the message, and bear no hop numbers", () => {
    const timing = roundTiming(base);
    const slot = timing.slots[1];
    if (!slot) throw new Error("The template has no measurement slot.");
    const { path, treads } = stairOf(slot, 3, ribbonScale(timing, 12, 612), { base: 100, height: 60, shares: [0.25, 0.5, 1] });
    const tops = [...path.matchAll(/V([\d.]+)H/g)].map(([, y]) => Number(y));
    expect(tops).toEqual([85, 70, 40, 40, 40, 40]);
    expect(treads).toEqual([]);
  });
});
