/** The scenario page at its address, with a fake server behind it. */
import { screen, waitFor } from "@testing-library/react";
import type { UserEvent } from "@testing-library/user-event";
import type { Role } from "#shared/api/permissions.ts";
import type { RevisionDetail } from "#shared/api/revisions.ts";
import type { ScenarioResponse } from "#shared/api/scenarios.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import type { fakeServer } from "../../helpers/fake-server.ts";
import { json } from "../../helpers/fake-server.ts";
import { renderApp } from "../../helpers/render-app.tsx";
import { FENNICK, item, sessionOf, TEAM, whole } from "../../helpers/team-data.ts";
import "#src/pages/scenario/scenario-page.tsx";

export const MOORLING = { id: "55555555-5555-4555-8555-555555555555", name: "A. Moorling" };

/** Long enough for its limits, short enough for a test. */
export const SHORT: Scenario = { ...(TEMPLATES[0].scenario as Scenario), run: { ...TEMPLATES[0].scenario.run, durationS: 6 } };

interface Opening {
  roles?: Role[];
  scenario?: Scenario;
  about?: Partial<ScenarioResponse>;
  search?: string;
}

export function detailOf(scenario: Scenario, number: number, about: Partial<RevisionDetail> = {}): RevisionDetail {
  const verdict = { state: "holds", word: "Holds", sentence: "All limits kept." } as const;
  return { number, name: scenario.name, note: "", author: FENNICK, savedAt: "2025-11-28T12:00:00.000Z", verdict, scenario, ...about };
}

export function serveScenario(server: ReturnType<typeof fakeServer>, { roles = ["engineer"], scenario = SHORT, about = {} }: Opening = {}) {
  const one = { ...whole(item(scenario.name)), latest: detailOf(scenario, 3), ...about };
  const at = `/api/teams/${TEAM.id}/scenarios/${one.id}`;
  server.on("GET /api/session", () => json(sessionOf(...roles)));
  server.on(`GET ${at}`, () => json(one));
  server.on(`GET ${at}/runs`, () => json({ items: [], total: 7, page: 1, pageSize: 1 }));
  return { one, at };
}

export async function openScenario(server: ReturnType<typeof fakeServer>, opening: Opening = {}) {
  const served = serveScenario(server, opening);
  const app = renderApp(`/teams/${TEAM.id}/scenarios/${served.one.id}${opening.search ?? ""}`);
  await screen.findByText(/run in/);
  return { ...app, ...served };
}

export const field = (path: string): HTMLInputElement => {
  const found = document.querySelector<HTMLInputElement>(`[data-path="${path}"]`);
  if (!found) throw new Error(`There is no field ${path} in the page.`);
  return found;
};

/** In one go, as from the clipboard: a key at a time takes long. */
export async function typeInto(user: UserEvent, path: string, text: string) {
  await user.clear(field(path));
  await user.paste(text);
}

/** What the pictures are given. */
export const bench = () => screen.getByTestId("run-bench").dataset;
export const untilRun = (what: (data: DOMStringMap) => void) => waitFor(() => what(bench()));

export const MASS = "loops[0].plant.cartMassKg";
export const PLAN = "loops[0].actuator.onLoss.length";

/** What the title says of unsaved changes. */
export const changes = () => document.querySelector(".title .dirty")?.textContent ?? "none";

export const openSection = (user: UserEvent, name: string) =>
  user.click(screen.getByRole("heading", { level: 2, name }).closest("summary") as Element);

/** Without the thin spaces and joiners between numbers and units. */
export const plain = (text: string) => text.replaceAll("\u2009", " ").replaceAll("\u2060", "");
