import { execFileSync, spawnSync } from "node:child_process";
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import Ajv2020 from "ajv/dist/2020.js";
import { afterAll, describe, expect, it } from "vitest";

const folder = mkdtempSync(join(tmpdir(), "holdfast-cli-"));
afterAll(() => rmSync(folder, { recursive: true }));

const holdfast = (...args: string[]) => spawnSync("node", ["--import", "tsx", "server/cli.ts", ...args], { encoding: "utf8" });
const EXAMPLES = readdirSync("examples")
  .filter((name) => name.endsWith(".json"))
  .map((name) => join("examples", name));
const schema = JSON.parse(execFileSync("node", ["--import", "tsx", "server/cli.ts", "schema"], { encoding: "utf8" }));
const file = (name: string, content: string): string => {
  const path = join(folder, name);
  writeFileSync(path, content);
  return path;
};

describe("the printed schema", () => {
  const validate = new Ajv2020({ allErrors: true }).compile(schema);

  it.each(EXAMPLES)("accepts %s", (example) => {
    expect(validate(JSON.parse(readFileSync(example, "utf8"))), JSON.stringify(validate.errors)).toBe(true);
  });

  it("refuses a misspelt field and a mass below the range", () => {
    const scenario = JSON.parse(readFileSync("examples/balancer-rig-1.json", "utf8"));
    expect(validate({ ...scenario, limit: [] })).toBe(false);
    scenario.loops[0].plant.cartMassKg = -1;
    expect(validate(scenario)).toBe(false);
  });

  it("has no field that examples/README.md does not explain", () => {
    const text = readFileSync("examples/README.md", "utf8");
    const names = new Set<string>();
    const walk = (node: unknown): void => {
      if (Array.isArray(node)) node.forEach(walk);
      else if (node !== null && typeof node === "object") {
        const properties = (node as { properties?: Record<string, unknown> }).properties;
        for (const name of Object.keys(properties ?? {})) names.add(name);
        Object.values(node).forEach(walk);
      }
    };
    walk(schema);
    expect(names.size).toBeGreaterThan(80);
    expect([...names].filter((name) => !new RegExp(`\\b${name}\\b`).test(text))).toEqual([]);
  });
});

describe("run", () => {
  it("prints verdict, figures and digest as JSON, and writes the tables", () => {
    const series = join(folder, "series.csv");
    const { status, stdout, stderr } = holdfast("run", "examples/film-dancer-arm-1.json", "--seed", "5", "--series", series);
    expect(stderr).toBe("");
    expect(status).toBe(0);
    const answer = JSON.parse(stdout);
    expect(answer).toMatchObject({ seed: 5, ended: "complete", verdict: expect.any(String), digest: expect.stringMatching(/^[0-9a-f]{64}$/) });
    const lines = readFileSync(series, "utf8").trim().split("\n");
    expect(lines[0]).toBe("t_s,armAngle_rad,armRate_rad_per_s,torque_N_m,reference_armAngle_rad");
    expect(lines.length).toBe(1 + 6001);
  });

  it("gives the same run again from what it wrote out", () => {
    const explicit = join(folder, "explicit.json");
    const first = holdfast("run", "examples/pallet-crane-bay-3.json", "--explicit", explicit);
    const again = holdfast("run", explicit);
    expect(JSON.parse(again.stdout).digest).toBe(JSON.parse(first.stdout).digest);
  });

  it.each([
    ["a file that is not there", () => "nowhere.json", /cannot be read/],
    ["NaN", () => file("nan.json", '{"name": NaN}'), /is not JSON/],
    [
      "an unknown field",
      () => file("field.json", JSON.stringify({ ...JSON.parse(readFileSync("examples/balancer-rig-1.json", "utf8")), colour: 1 })),
      /colour: "colour" is not a field/,
    ],
  ])("refuses %s on standard error with exit code 2", (_what, make, message) => {
    const { status, stdout, stderr } = holdfast("run", make());
    expect(status).toBe(2);
    expect(stdout).toBe("");
    expect(stderr).toMatch(message);
  });

  it("refuses a seed that is none", () => {
    expect(holdfast("run", "examples/balancer-rig-1.json", "--seed", "-3").status).toBe(2);
    expect(holdfast("run", "examples/balancer-rig-1.json", "--seed", "x").stderr).toMatch(/permitted: whole numbers 0 to 4294967295/);
  });
});

describe("round", () => {
  it("prints the slot table, the latency of every loop and what a round costs a node at most", () => {
    const { status, stdout, stderr } = holdfast("round", "examples/balancer-rig-1.json");
    expect(stderr).toBe("");
    expect(status).toBe(0);
    const answer = JSON.parse(stdout);
    expect(answer).toMatchObject({
      fits: true,
      loops: [{ loop: "balancer", everyRounds: 1, commandDelay: 0, latencyS: 0.025 }],
      slots: [
        { id: "beacon", message: "beacon", copy: 1, everyRounds: 1 },
        { message: "measurement", from: null },
        { message: "command", to: null },
      ],
      energy: { device: "nRF52840, DC/DC", source: expect.stringMatching(/Nordic/), floor: null, floorNeeds: [] },
    });
    const { bound } = answer.energy;
    expect(bound.slots).toHaveLength(3);
    expect(bound.radioOnS).toBeCloseTo(
      answer.slots.reduce((sum: number, { startS, floodEndS }: { startS: number; floodEndS: number }) => sum + floodEndS - startS, 0),
      12,
    );
  });

  it("tells what each node spends on the floor, within the bound", () => {
    const { energy } = JSON.parse(holdfast("round", "examples/balancer-rig-1-floor.json").stdout);
    expect(energy.floor.nodes).toHaveLength(17);
    for (const { radioOnS } of energy.floor.nodes) {
      expect(radioOnS).toBeGreaterThan(0);
      expect(radioOnS).toBeLessThanOrEqual(energy.bound.radioOnS);
    }
  });

  it("tells what a round that does not fit would need, with exit code 1", () => {
    const scenario = JSON.parse(readFileSync("examples/balancer-rig-1.json", "utf8"));
    scenario.round.periodS = 0.012;
    const { status, stdout, stderr } = holdfast("round", file("short.json", JSON.stringify(scenario)));
    expect(status).toBe(1);
    expect(JSON.parse(stdout).fits).toBe(false);
    expect(stderr).toMatch(/does not fit.*\n.*saves/);
  });
});

describe("floods", () => {
  const FLOOR = "examples/balancer-rig-1-floor.json";

  it("prints what each node received, with intervals, the same for the same seed", () => {
    const first = holdfast("floods", FLOOR, "--rounds", "100", "--seed", "3");
    expect(first.status).toBe(0);
    expect(first.stderr).toBe("");
    const answer = JSON.parse(first.stdout);
    expect(answer).toMatchObject({ rounds: 100, seed: 3, outagesLeftOut: [14] });
    expect(answer.slots).toHaveLength(3);
    for (const { nodes, floods } of answer.slots) {
      expect(floods).toBe(100);
      expect(nodes).toHaveLength(16);
      for (const { ratio, lo, hi } of nodes) expect(lo <= ratio && ratio <= hi).toBe(true);
      expect(nodes[0]).not.toHaveProperty("hops");
    }
    expect(answer.loops[0].both.of).toBe(100);
    expect(Array.isArray(answer.advice)).toBe(true);
    expect(holdfast("floods", FLOOR, "--rounds", "100", "--seed", "3").stdout).toBe(first.stdout);
  });

  it("adds the steps in which floods arrived", () => {
    const [slot] = JSON.parse(holdfast("floods", FLOOR, "--rounds", "100", "--steps").stdout).slots;
    expect(slot.reachedShare).toHaveLength(7);
    for (const { hops, received } of slot.nodes) expect(hops.reduce((sum: number, count: number) => sum + count, 0)).toBe(received);
  });

  it.each([
    ["a scenario without a floor", ["floods", "examples/balancer-rig-1.json"], /floor: .* has none; floods need a floor/],
    ["fewer rounds than tell anything", ["floods", FLOOR, "--rounds", "3"], /--rounds is 3; permitted: whole numbers 100 to 1000000/],
    ["an option of another command", ["floods", FLOOR, "--series", "x.csv"], /--series: only for run\./],
    ["two files", ["floods", FLOOR, FLOOR], /one file at a time/],
    ["a command that there is none", ["flood", FLOOR], /flood is not a command/],
  ])("refuses %s on standard error with exit code 2", (_what, args, message) => {
    const { status, stdout, stderr } = holdfast(...args);
    expect(status).toBe(2);
    expect(stdout).toBe("");
    expect(stderr).toMatch(message);
  });
});
