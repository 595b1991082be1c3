import { screen, within } from "@testing-library/react";
import { beforeEach, describe, expect, it, vi } from "vitest";
import type { Scenario } from "#shared/scenario/schema.ts";
import { setAt } from "#src/pages/scenario/model/json-path.ts";
import { fakeServer } from "../../helpers/fake-server.ts";
import { renderApp } from "../../helpers/render-app.tsx";
import { TEAM } from "../../helpers/team-data.ts";
import { bench, changes, field, MASS, openScenario, PLAN, plain, SHORT, serveScenario, typeInto, untilRun } from "./open-scenario.tsx";

vi.mock("#src/workers/pool.ts", () => import("./in-process-engine.ts"));
vi.mock("#src/components/drawings/run-bench.tsx", () => import("./run-bench-stub.tsx"));

const server = fakeServer();
beforeEach(() => localStorage.clear());

describe("editing a scenario", () => {
  it("runs each edit and counts the changed settings", async () => {
    const { user } = await openScenario(server);
    expect(changes()).toBe("none");
    await typeInto(user, MASS, "1.5");
    await untilRun(({ mass, stale }) => expect([mass, stale]).toEqual(["1.5", "false"]));
    expect(changes()).toBe("1 unsaved change");
    await typeInto(user, "losses.process.command", "11.2");
    expect(changes()).toBe("2 unsaved changes");
  });

  it("explains a bad value at its field, keeps the last good run and does not save", async () => {
    const { user } = await openScenario(server);
    await typeInto(user, PLAN, "40");
    const note = await screen.findByText(/Plan is 40/);
    expect(plain(note.parentElement?.textContent ?? "")).toContain("Enter a whole number, 1 to 12 steps.");
    expect(field(PLAN).getAttribute("aria-invalid")).toBe("true");
    expect(document.getElementById(field(PLAN).getAttribute("aria-describedby")?.split(" ")[0] ?? "")?.textContent).toContain("Plan is 40");
    expect(bench().stale).toBe("true");
    expect(screen.getByText(/One field in the set-up has to be put right first/)).toBeDefined();
    const save = screen.getByRole("button", { name: /^Save revision/ });
    expect(save.getAttribute("aria-disabled")).toBe("true");
    expect(save.title).toBe("Put the marked field right first.");
  });

  it("keeps what was typed while it is no number, and takes it back on Escape", async () => {
    const { user } = await openScenario(server);
    await typeInto(user, MASS, "1.x");
    expect(field(MASS).value).toBe("1.x");
    expect(await screen.findByText(/“1.x” is no number/)).toBeDefined();
    await user.type(field(MASS), "{Escape}");
    expect(field(MASS).value).toBe("1.2");
    expect(changes()).toBe("none");
  });

  it("undoes and redoes by key, one step for each field, and says what it did", async () => {
    const { user } = await openScenario(server);
    await typeInto(user, MASS, "1.5");
    await typeInto(user, "loops[0].plant.rodMassKg", "0.3");
    await user.keyboard("{Control>}z{/Control}");
    expect(field("loops[0].plant.rodMassKg").value).toBe("0.21");
    expect(field(MASS).value).toBe("1.5");
    expect(await screen.findByText(/Undone: Rod mass is 0.21/)).toBeDefined();
    await user.keyboard("{Control>}z{/Control}{Control>}{Shift>}z{/Shift}{/Control}{Control>}y{/Control}");
    expect(field("loops[0].plant.rodMassKg").value).toBe("0.3");
  });

  it("steps a value by arrow keys within its range", async () => {
    const { user } = await openScenario(server);
    await user.type(field(MASS), "{ArrowUp}{ArrowUp}");
    expect(field(MASS).value).toBe("1.4");
    await user.type(field(PLAN), "{Shift>}{ArrowUp}{/Shift}");
    expect(field(PLAN).value).toBe("12");
    await user.keyboard("{Control>}z{/Control}");
    expect([field(PLAN).value, field(MASS).value]).toEqual(["6", "1.4"]);
  });

  it("steps through seeds without changing the scenario", async () => {
    const { user } = await openScenario(server);
    await user.click(screen.getByRole("button", { name: "Another seed: 11" }));
    await untilRun(({ seed }) => expect(seed).toBe("11"));
    expect(changes()).toBe("none");
    await user.click(screen.getByRole("button", { name: "Back to seed 10" }));
    await untilRun(({ seed }) => expect(seed).toBe("10"));
  });

  it("marks a closed section that has something to put right, and tells what no field can on top of it", async () => {
    const lost = setAt(SHORT, ["limits", 0, "signal"], "tilt") as Scenario;
    const served = serveScenario(server, { scenario: lost });
    const { user } = renderApp(`/teams/${TEAM.id}/scenarios/${served.one.id}`);
    const limits = (await screen.findByRole("heading", { level: 2, name: "Limits" })).closest("details") as HTMLElement;
    expect(limits.textContent).toContain("1 to put right");
    expect(screen.getByText("No result yet")).toBeDefined();
    await user.click(limits.querySelector("summary") as Element);
    expect(await within(limits).findByText(/"tilt" is not a state/)).toBeDefined();
  });
});
