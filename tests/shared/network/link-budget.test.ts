import { describe, expect, it } from "vitest";
import { LinkBudget } from "#shared/network/link-budget.ts";
import { combinedPower } from "#shared/network/wave-links.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { at, type FloorInput, floorOf, type Setting, scenarioOn } from "./floors.ts";

const FREE = { type: "budget" as const, pathLoss: { type: "log-distance" as const, exponent: 2, lossAt1mDb: 40 } };

function budgetOf({ floor, radio }: Scenario, atS = 0): LinkBudget {
  if (floor?.links.type !== "budget") throw new Error("no budget");
  return new LinkBudget(floor, floor.links, radio, floor.nodes, atS);
}
const on = (floor: FloorInput, rest: Partial<Setting> = {}) => scenarioOn({ floor, ...rest });
const dbm = (milliwatts: number | undefined) => 10 * Math.log10(milliwatts ?? Number.NaN);

describe("a link budget", () => {
  it("takes path loss and obstacles off the transmit power of radio or node", () => {
    const nodes = at([10, 10], [20, 10], [10, 110]);
    const wall = { type: "wall" as const, fromXM: 15, fromYM: 0, toXM: 15, toYM: 50, lossDb: 7.5 };
    const scenario = on(
      floorOf([{ ...nodes?.[0], id: 1, xM: 10, yM: 10, txPowerDbm: 8 }, ...(nodes ?? []).slice(1)], { links: FREE, obstacles: [wall] }),
      {
        radio: { txPowerDbm: -4 },
      },
    );
    const { powerMw } = budgetOf(scenario);
    // Row = receiver, column = sender.
    expect(dbm(powerMw[1 * 3 + 0])).toBeCloseTo(8 - 60 - 7.5, 9);
    expect(dbm(powerMw[0 * 3 + 1])).toBeCloseTo(-4 - 60 - 7.5, 9);
    expect(dbm(powerMw[2 * 3 + 0])).toBeCloseTo(8 - 80, 9);
    expect(powerMw[0]).toBe(0);
  });

  it("counts the height of nodes, and at least 1 m", () => {
    const scenario = on(
      floorOf(
        [
          { id: 1, xM: 10, yM: 10, heightM: 1 },
          { id: 2, xM: 13, yM: 10, heightM: 5 },
          { id: 3, xM: 10, yM: 10, heightM: 1 },
        ],
        { links: FREE },
      ),
    );
    const budget = budgetOf(scenario);
    expect(budget.distanceM(0, 1)).toBe(5);
    expect(dbm(budget.powerMw[2])).toBeCloseTo(-40, 9);
  });

  const SHADOWED = { ...FREE, shadowing: { sigmaDb: 6, correlationM: 10, seed: 3 } };

  it("brings a moving node to any instant as if it were computed there, and leaves the others as they are", () => {
    const nodes = [
      { id: 1, xM: 10, yM: 10, wayPoints: [{ atS: 10, xM: 60, yM: 40 }] },
      { id: 2, xM: 80, yM: 10 },
      { id: 3, xM: 40, yM: 90 },
    ];
    const obstacles = [{ type: "block" as const, xM: 30, yM: 20, widthM: 20, depthM: 10, lossDb: 9 }];
    const scenario = on(
      floorOf(nodes, { links: SHADOWED, obstacles, interferers: [{ xM: 50, yM: 50, powerDbm: 10, centreMHz: 2480, bandwidthMHz: 2 }] }),
    );
    const budget = budgetOf(scenario);
    const still = budget.powerMw[2 * 3 + 1];
    for (const atS of [0.5, 2, 5.25, 7, 10, 12]) {
      budget.moveTo(atS);
      const afresh = budgetOf(scenario, atS);
      expect(budget.powerMw).toEqual(afresh.powerMw);
      expect(budget.interferenceMw).toEqual(afresh.interferenceMw);
      expect(budget.powerMw[2 * 3 + 1]).toBe(still);
    }
    expect(budget.powerMw).not.toEqual(budgetOf(scenario, 0).powerMw);
  });

  it("has the same links whatever the order of the list, and whoever else is there", () => {
    const nodes = at([10, 10], [80, 10], [40, 90], [100, 100]) ?? [];
    const whole = budgetOf(on(floorOf(nodes, { links: SHADOWED })));
    const turned = budgetOf(on(floorOf([...nodes].reverse(), { links: SHADOWED })));
    const without = budgetOf(on(floorOf(nodes.slice(0, 3), { links: SHADOWED })));
    expect(whole.powerMw[0 * 4 + 1]).toBe(turned.powerMw[3 * 4 + 2]);
    expect(whole.powerMw[0 * 4 + 1]).toBe(without.powerMw[0 * 3 + 1]);
  });

  it("receives interferers by the same path loss and obstacles, without shadowing", () => {
    const interferer = { xM: 10, yM: 110, powerDbm: 20, centreMHz: 2480, bandwidthMHz: 20 };
    const wall = { type: "wall" as const, fromXM: 0, fromYM: 50, toXM: 30, toYM: 50, lossDb: 5 };
    const budget = budgetOf(on(floorOf(at([10, 10], [110, 110], [50, 50]), { links: SHADOWED, obstacles: [wall], interferers: [interferer] })));
    expect(dbm(budget.interferenceMw[0])).toBeCloseTo(20 - 80 - 5, 9);
    expect(dbm(budget.interferenceMw[1])).toBeCloseTo(20 - 80, 9);
  });
});

describe("nodes that send at once", () => {
  const [capture, penalty] = [2, 0.5];

  it("add up, less the penalty unless the strongest is that much above the others together", () => {
    expect(combinedPower(5, 5, capture, penalty)).toBe(5);
    expect(combinedPower(3, 2, capture, penalty)).toBe(3);
    expect(combinedPower(3.1, 2, capture, penalty)).toBe(1.55);
    expect(combinedPower(4, 2, capture, penalty)).toBe(2);
  });

  it("lose nothing with a penalty of 0 dB", () => {
    expect(combinedPower(4, 2, capture, 1)).toBe(4);
  });
});
