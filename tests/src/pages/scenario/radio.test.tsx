import { screen, waitFor, within } from "@testing-library/react";
import { beforeEach, describe, expect, it, vi } from "vitest";
import { type Scenario, scenarioSchema } from "#shared/scenario/schema.ts";
import { fakeServer } from "../../helpers/fake-server.ts";
import { changes, field, openScenario, plain, SHORT, typeInto, untilRun } from "./open-scenario.tsx";

vi.mock("#src/workers/pool.ts", () => import("./in-process-engine.ts"));
vi.mock("#src/components/drawings/run-bench.tsx", () => import("./run-bench-stub.tsx"));

const server = fakeServer();
beforeEach(() => localStorage.setItem("holdfast.setup-open", JSON.stringify(["radio", "round", "losses"])));

const part = (name: string) => screen.getByText(name, { selector: ".su-name" }).closest("summary") as HTMLElement;
const node = (id: number, name: string) => ({ id, name, xM: 5 * id, yM: 5 });
const onFloor = scenarioSchema.parse({
  ...SHORT,
  floor: { name: "Hall 2", widthM: 40, depthM: 20, nodes: [node(1, "Cart"), node(2, "Drive"), node(3, "Controller")] },
}) as Scenario;

describe("the radio in the set-up", () => {
  it("takes channels as numbers and ranges, refuses those that the PHY does not have, and changes them by a press in the picture", async () => {
    const { user } = await openScenario(server);
    await user.click(part("Channels"));
    await typeInto(user, "radio.channels.list", "11, 15 to 17");
    expect(screen.getByRole("checkbox", { name: /^Channel 16,/ }).getAttribute("aria-checked")).toBe("true");
    await user.click(screen.getByRole("checkbox", { name: /^Channel 26, 2480 MHz, clear/ }));
    expect(field("radio.channels.list").value).toBe("11, 15 to 17, 26");
    await typeInto(user, "radio.channels.list", "11, 27");
    expect(await screen.findByText(/There is no channel 27: IEEE 802.15.4, 2.4 GHz has 11 to 26/)).toBeDefined();
    expect(field("radio.channels.list").value).toBe("11, 27");
  });

  it("goes through the channels by arrow keys and takes one in with the space bar", async () => {
    const { user } = await openScenario(server);
    await user.click(part("Channels"));
    screen.getByRole("checkbox", { name: /^Channel 26,/ }).focus();
    await user.keyboard("{ArrowLeft}{ArrowLeft} ");
    expect(field("radio.channels.list").value).toBe("24");
  });

  it("begins another standard's channels anew", async () => {
    const { user } = await openScenario(server);
    await user.click(part("Channels"));
    await typeInto(user, "radio.channels.list", "11, 15");
    await user.selectOptions(screen.getByLabelText("PHY"), "le-2m");
    expect(field("radio.channels.list").value).toBe("");
    await untilRun(({ stale }) => expect(stale).toBe("false"));
  });

  it("begins a reception table as the formula's own curve and says in which line a pasted one is wrong", async () => {
    const { user } = await openScenario(server);
    await user.click(part("Reception"));
    const half = () =>
      Number(/at (.+) dB\./.exec(plain(screen.getByText(/Half of the packets arrive at/).textContent ?? ""))?.[1]?.replace("\u2212", "-"));
    const before = half();
    await user.click(screen.getByRole("radio", { name: "table" }));
    expect(Math.abs(half() - before)).toBeLessThan(0.11);
    await typeInto(user, "radio.reception.rows", "snr;prr\n-3;0,1\n0;0,5\n-1;0,9");
    expect(await screen.findByText(/Line 4: −1 dB does not lie above the row before it \(0 dB\)/)).toBeDefined();
    await typeInto(user, "radio.reception.rows", "snr;prr\n-3;0,1\n0;0,5\n2;0,9");
    await waitFor(() => expect(screen.queryByText(/does not lie above/)).toBeNull());
    expect(half()).toBeCloseTo(0, 9);
  });

  it("fills in a radio's figures with their source, and lets its own be named once one is changed", async () => {
    const { user } = await openScenario(server);
    await user.click(part("Power and battery"));
    await user.selectOptions(screen.getByLabelText("Figures of"), "CC2538");
    expect(field("radio.power.txMa").value).toBe("24");
    expect(screen.getByText(/Source: Texas Instruments CC2538 data sheet/)).toBeDefined();
    await typeInto(user, "radio.power.txMa", "25");
    expect((screen.getByLabelText("Figures of") as HTMLSelectElement).value).toBe("own");
    expect(field("radio.power.source").value).toContain("CC2538");
  });

  it("offers the floor's nodes for sensor, controller and actuator", async () => {
    const { user } = await openScenario(server, { scenario: onFloor });
    await user.click(part("Nodes of the loop"));
    await user.click(screen.getByRole("radio", { name: "of the floor" }));
    await user.selectOptions(screen.getByLabelText("Controller at node"), "3 Controller");
    expect((screen.getByLabelText("Controller at node") as HTMLSelectElement).value).toBe("3");
    expect(plain(document.querySelector("#setup-radio .sum")?.textContent ?? "")).toBe("Hall 2 · 3 nodes · 0 dBm");
  });
});

describe("who shares the round", () => {
  it("adds loops with ids and names of their own, copies them, and shows their slots", async () => {
    const { user } = await openScenario(server, { scenario: { ...SHORT, round: { ...SHORT.round, periodS: 0.1 } } });
    await user.click(part("Other loops in the round"));
    await user.click(screen.getByRole("button", { name: "Add another loop" }));
    await user.click(screen.getByRole("button", { name: "Duplicate loop 1" }));
    const names = () => [...document.querySelectorAll(".su-entry .su-name")].map(({ textContent }) => plain(textContent ?? ""));
    expect(names().filter((name) => name.startsWith("Loop"))).toEqual([
      "Loop 2: every round, measurement 32 bits, command 16 bits",
      "Loop 3: every round, measurement 32 bits, command 16 bits",
    ]);
    expect(screen.getByText(/7 slots · fits/)).toBeDefined();
    await untilRun(({ stale }) => expect(stale).toBe("false"));
    await user.keyboard("{Control>}z{/Control}{Control>}z{/Control}");
    expect(changes()).toBe("none");
  });

  it("asks for the first round only where there is a choice, with its range", async () => {
    const { user } = await openScenario(server);
    await user.click(part("Other messages"));
    await user.click(screen.getByRole("button", { name: "Add a message" }));
    expect(document.querySelector('[data-path="round.messages[0].firstRound"]')).toBeNull();
    await typeInto(user, "round.messages[0].everyRounds", "4");
    expect(within(field("round.messages[0].firstRound").closest(".field") as HTMLElement).getByText(/0 to 3/)).toBeDefined();
    await typeInto(user, "round.messages[0].firstRound", "4");
    expect(await screen.findByText(/begins in round 4, but comes every 4 rounds/)).toBeDefined();
  });
});

describe("losses that were received", () => {
  it("send those who choose floods to the floor, and say that nothing is recorded before a log is chosen", async () => {
    const { user } = await openScenario(server);
    await user.selectOptions(screen.getByLabelText("Process"), "flood");
    expect((await screen.findAllByRole("link", { name: "Lay out a floor" })).length).toBeGreaterThan(0);
    await user.selectOptions(screen.getByLabelText("Process"), "replay");
    expect(await screen.findByText("Nothing is recorded for the measurement.")).toBeDefined();
    expect(screen.getByRole("button", { name: "Use a reception log" })).toBeDefined();
  });

  it("show the packets of a replayed log", async () => {
    const replay = {
      type: "replay",
      log: null,
      measurement: { link: "1 to 3", runs: [95, 2, 30, 3, 170] },
      command: { link: "3 to 2", runs: [300] },
      then: "repeat",
    };
    await openScenario(server, { scenario: { ...SHORT, losses: { ...SHORT.losses, process: replay } } as Scenario });
    expect(plain(document.querySelector(".su-replay")?.textContent ?? "")).toContain("1 to 3: 300 packets, 5 lost (1.7 %), at most 3 in a row");
  });
});
