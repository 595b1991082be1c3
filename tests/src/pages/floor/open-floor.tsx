/** The floor page of a scenario, with a fake server behind it and the engine in the test's own process. */
import { screen } from "@testing-library/react";
import type { Role } from "#shared/api/permissions.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { emptyFloor } from "#src/pages/floor/model/example-floor.ts";
import { floorOf, newNode } from "#src/pages/floor/model/floor-edits.ts";
import { draftKey } from "#src/pages/scenario/model/draft-store.ts";
import type { fakeServer } from "../../helpers/fake-server.ts";
import { renderApp } from "../../helpers/render-app.tsx";
import { FENNICK, TEAM } from "../../helpers/team-data.ts";
import { SHORT, serveScenario } from "../scenario/open-scenario.tsx";
import "#src/pages/floor/floor-view.tsx";

/** Four nodes in a row, 12 m apart; sensor 1, controller 3, actuator 2. */
export const ROW: Floor = {
  ...emptyFloor("Hall 2", 50, 20),
  nodes: [newNode(1, 5, 10, "Cart"), newNode(2, 17, 10, "Drive"), newNode(3, 29, 10, "Controller"), newNode(4, 41, 10)],
};

export const onFloor = (floor: Floor | null, more: Partial<Scenario> = {}): Scenario => ({
  ...SHORT,
  run: { ...SHORT.run, durationS: 2 },
  floor,
  losses: { ...SHORT.losses, process: { type: "flood" } },
  loops: [{ ...SHORT.loops[0], nodes: { sensor: 1, controller: 3, actuator: 2 } }],
  ...more,
});

export async function openFloor(server: ReturnType<typeof fakeServer>, scenario: Scenario, roles: Role[] = ["engineer"]) {
  const served = serveScenario(server, { scenario, roles });
  const app = renderApp(`/teams/${TEAM.id}/scenarios/${served.one.id}/floor`);
  await screen.findByRole(scenario.floor ? "toolbar" : "region", { name: scenario.floor ? "Plan tools" : "Lay out a floor" });
  const kept = () => JSON.parse(localStorage.getItem(draftKey(served.one.id, FENNICK.id)) ?? "null") as { draft: { json: Scenario } | null } | null;
  return {
    ...app,
    ...served,
    /** As the draft has it now. */
    floor: () => floorOf(kept()?.draft?.json ?? scenario) as Floor,
    draft: () => (kept()?.draft?.json ?? scenario) as Scenario,
  };
}

export const markOf = (id: number): SVGGElement => {
  const found = document.querySelector<SVGGElement>(`[data-thing="node:${id}"]`);
  if (!found) throw new Error(`Node ${id} is not on the plan.`);
  return found;
};
