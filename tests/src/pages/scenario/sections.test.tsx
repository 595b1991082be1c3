import { screen, waitFor, within } from "@testing-library/react";
import { beforeEach, describe, expect, it, vi } from "vitest";
import type { Scenario } from "#shared/scenario/schema.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { setAt } from "#src/pages/scenario/model/json-path.ts";
import { fakeServer } from "../../helpers/fake-server.ts";
import { changes, field, openScenario, openSection, plain, SHORT, typeInto, untilRun } from "./open-scenario.tsx";

vi.mock("#src/workers/pool.ts", () => import("./in-process-engine.ts"));
vi.mock("#src/components/drawings/run-bench.tsx", () => import("./run-bench-stub.tsx"));

const server = fakeServer();
beforeEach(() => localStorage.clear());

describe("the sections of the set-up", () => {
  it("speak of trolley and load for a machine that hangs", async () => {
    const crane = { ...TEMPLATES[1].scenario, run: { ...TEMPLATES[1].scenario.run, durationS: 12 } };
    await openScenario(server, { scenario: crane });
    expect(screen.getByText("Trolley mass")).toBeDefined();
    expect(screen.getByText("Rope, trolley to load")).toBeDefined();
    expect(screen.queryByText("Rod mass")).toBeNull();
  });

  it("keep what was set for another kind of controller, and begin typed gains with the gains of the weights", async () => {
    const { user } = await openScenario(server);
    await typeInto(user, "loops[0].controller.law.stateWeights[1]", "75");
    const kind = screen.getByLabelText("Controller");
    await user.selectOptions(kind, "gain");
    const angleGain = () => Number(field("loops[0].controller.law.gain[0][1]").value.replace("\u2212", "-"));
    const gain = angleGain();
    expect(gain).toBeLessThan(-20);
    await untilRun(({ stale }) => expect(stale).toBe("false"));
    await user.selectOptions(screen.getByLabelText("Controller"), "lqr");
    expect(field("loops[0].controller.law.stateWeights[1]").value).toBe("75");
    await user.selectOptions(screen.getByLabelText("Controller"), "gain");
    expect(angleGain()).toBe(gain);
  });

  it("begin typed gains after a PID with the gains of the law that ran before it", async () => {
    const onHold = setAt(SHORT, ["loops", 0, "actuator", "onLoss"], { policy: "hold" }) as Scenario;
    const { user } = await openScenario(server, { scenario: onHold });
    await user.selectOptions(screen.getByLabelText("Controller"), "pid");
    const proportional = Number(field("loops[0].controller.law.proportional").value.replace("\u2212", "-"));
    await untilRun(({ stale }) => expect(stale).toBe("false"));
    await user.selectOptions(screen.getByLabelText("Controller"), "gain");
    expect(Number(field("loops[0].controller.law.gain[0][1]").value.replace("\u2212", "-"))).toBe(proportional);
  });

  it("show what a channel of bursts comes to", async () => {
    const { user } = await openScenario(server);
    await user.selectOptions(screen.getByLabelText("Process"), "gilbert-elliott-shared");
    await typeInto(user, "losses.process.channel.goodToBad", "5");
    await typeInto(user, "losses.process.channel.badToGood", "20");
    expect(plain((await screen.findByText(/Loses/)).textContent ?? "")).toBe("Loses 20.0 % of the messages; bad for 5 rounds (125 ms) on average.");
  });

  it("take given losses as text, count them, and say where a character is wrong", async () => {
    const { user } = await openScenario(server);
    await user.selectOptions(screen.getByLabelText("Process"), "given");
    const text = screen.getByLabelText("Command, round by round");
    await user.clear(text);
    await user.type(text, "1101 0");
    expect(screen.getByText(/5 rounds, 2 lost/)).toBeDefined();
    await user.type(text, "x");
    expect(await screen.findByText(/“x” in line 1, after 5 rounds/)).toBeDefined();
  });

  it("add, copy, move and remove entries by keyboard", async () => {
    const { user } = await openScenario(server);
    await openSection(user, "Limits");
    const limits = screen.getByRole("heading", { level: 2, name: "Limits" }).closest("details") as HTMLElement;
    const names = () => [...limits.querySelectorAll(".su-name")].map(({ textContent }) => plain(textContent ?? ""));
    const first = within(limits)
      .getByText(/^Angle within/)
      .closest("summary") as HTMLElement;
    first.focus();
    await user.keyboard("{Alt>}{ArrowDown}{/Alt}");
    expect(names().slice(0, 2)).toEqual(["Position within ±0.3 m", expect.stringMatching(/^Angle within/)]);
    await user.click(within(limits).getByRole("button", { name: "Add a limit" }));
    expect(names()).toHaveLength(6);
    await waitFor(() => expect(document.activeElement?.closest(".su-entry")).toBe(limits.querySelectorAll(".su-entry")[5]));
    await user.click(within(limits).getByRole("button", { name: "Duplicate limit 6" }));
    expect(names()).toHaveLength(7);
    await user.click(within(limits).getAllByRole("button", { name: "Remove limit" })[0]);
    expect(names()).toHaveLength(6);
    await user.keyboard("{Control>}z{/Control}{Control>}z{/Control}{Control>}z{/Control}{Control>}z{/Control}");
    expect(names()).toHaveLength(5);
    expect(changes()).toBe("none");
  });

  it("offer what would make a round fit, each with one press", async () => {
    const { user } = await openScenario(server);
    await openSection(user, "Round");
    await typeInto(user, "round.periodS", "15");
    await screen.findByText(/What would make room/);
    await user.click(screen.getByRole("button", { name: /^Apply: Transmissions/ }));
    await waitFor(() => expect(screen.queryByText(/What would make room/)).toBeNull());
    expect(field("round.transmissions").value).toBe("1");
    await untilRun(({ stale }) => expect(stale).toBe("false"));
  });

  it("show a state-space model to be read", async () => {
    const plant = {
      type: "state-space",
      a: [
        [0, 1],
        [2, 0],
      ],
      b: [[0], [1]],
      c: null,
      d: null,
      states: null,
      inputs: null,
      outputs: null,
    };
    const signal = (name: string) => ({ signal: name, noiseStd: 0, encoding: null });
    const loop = {
      ...SHORT.loops[0],
      plant,
      start: { state: [0.1, 0], estimate: null, networkJoinsAtS: 0 },
      sensor: { ...SHORT.loops[0].sensor, signals: [signal("x1"), signal("x2")] },
      controller: { ...SHORT.loops[0].controller, law: { type: "lqr", stateWeights: [1, 1], inputWeights: [1], integral: [] } },
      references: [],
    };
    const scenario = { ...SHORT, loops: [loop], pushes: [], limits: [] } as unknown as Scenario;
    await openScenario(server, { scenario });
    expect(
      within(screen.getByRole("table", { name: "Matrix A" }))
        .getAllByRole("cell")
        .map(({ textContent }) => textContent),
    ).toEqual(["0", "1", "2", "0"]);
    expect(screen.getByText(/importing a scenario as JSON sets them/)).toBeDefined();
  });
});
