/** Set-up of a test by way of the API, where the page's own way is not what is tested. */
import type { BrowserContext } from "playwright-core";
import type { LogListResponse } from "#shared/api/logs.ts";
import type { RunDetail } from "#shared/api/runs.ts";
import type { ScenarioResponse } from "#shared/api/scenarios.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { expect, type Visit } from "./app.ts";

export const pendulum = (): Scenario => structuredClone(TEMPLATES[0].scenario);

async function post<Answer>({ request }: BrowserContext, path: string, data: unknown): Promise<Answer> {
  const answer = await request.post(path, { data });
  expect(answer.status(), await answer.text()).toBe(201);
  return answer.json();
}

export const makeScenario = ({ context, team }: Visit, scenario: Scenario): Promise<ScenarioResponse> =>
  post(context, `/api/teams/${team.id}/scenarios`, { scenario, note: "Made for a test" });

export const saveRevision = ({ context, team }: Visit, id: string, baseRevision: number, scenario: Scenario): Promise<ScenarioResponse> =>
  post(context, `/api/teams/${team.id}/scenarios/${id}/revisions`, { baseRevision, scenario, note: "Saved for a test" });

export async function keepRun({ context, team }: Visit, { id, latest }: ScenarioResponse, seed: number): Promise<RunDetail> {
  const { run } = await post<{ run: RunDetail }>(context, `/api/teams/${team.id}/scenarios/${id}/runs`, {
    revision: latest.number,
    seed,
    digest: null,
  });
  return run;
}

export async function readScenario({ context, team }: Visit, id: string): Promise<ScenarioResponse> {
  const answer = await context.request.get(`/api/teams/${team.id}/scenarios/${id}`);
  expect(answer.status()).toBe(200);
  return answer.json();
}

/** Of the logs that came with the demo team. */
export async function anyLog({ context, team }: Visit): Promise<string> {
  const answer = await context.request.get(`/api/teams/${team.id}/logs`);
  const { items } = (await answer.json()) as LogListResponse;
  if (!items[0]) throw new Error("The demo team has no reception log.");
  return items[0].id;
}
