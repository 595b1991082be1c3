/** A team with people and scenarios, as the server would describe them. */

import type { Role } from "#shared/api/permissions.ts";
import { type RoundSummary, roundSummarySchema, type ScenarioItem, type ScenarioListResponse, type ScenarioResponse } from "#shared/api/scenarios.ts";
import type { SessionResponse } from "#shared/api/session.ts";
import { roundTiming } from "#shared/network/round.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";

export const TEAM = { id: "11111111-1111-4111-8111-111111111111", name: "Northquay Packaging" };
export const FENNICK = { id: "33333333-3333-4333-8333-333333333333", name: "R. Fennick" };
const EMAIL = "r.fennick@northquay.example";

export const sessionOf = (...roles: Role[]): SessionResponse => ({
  user: { ...FENNICK, email: EMAIL },
  memberships: [{ team: TEAM, roles }],
  expiresAt: "2030-01-01T00:00:00.000Z",
});
export const SIGNED_OUT: SessionResponse = { user: null, memberships: [], expiresAt: null };

const scenario = TEMPLATES[0]?.scenario;
if (!scenario) throw new Error("There is no template.");
const timing = roundTiming(scenario);
const round = Object.fromEntries(Object.keys(roundSummarySchema.shape).map((key) => [key, timing[key as keyof typeof timing]])) as RoundSummary;

let made = 0;
export function item(name: string, about: Partial<ScenarioItem> = {}): ScenarioItem {
  made += 1;
  return {
    id: `44444444-4444-4444-8444-${String(made).padStart(12, "0")}`,
    name,
    plant: { kind: "pendulum-on-cart", type: "pendulum-on-cart", rest: "upright" },
    revision: 3,
    round,
    delivery: { sent: 800, lost: 92, ratio: 0.885 },
    verdict: { state: "holds", word: "Holds", sentence: "All five limits kept." },
    owner: FENNICK,
    changedAt: "2025-11-28T12:00:00.000Z",
    archivedAt: null,
    mayEdit: true,
    ...about,
  };
}

export function listOf(items: ScenarioItem[], about: Partial<ScenarioListResponse> = {}): ScenarioListResponse {
  return {
    items,
    total: items.length,
    page: 1,
    pageSize: 10,
    totalUnfiltered: items.length,
    archivedTotal: 0,
    owners: [FENNICK],
    plants: ["pendulum-on-cart", "overhead-crane"],
    ...about,
  };
}

export function whole(one: ScenarioItem): ScenarioResponse {
  if (!scenario) throw new Error("There is no template.");
  return {
    ...one,
    createdAt: one.changedAt,
    latest: {
      number: one.revision,
      name: one.name,
      note: "",
      author: FENNICK,
      savedAt: one.changedAt,
      verdict: one.verdict,
      scenario: { ...scenario, name: one.name },
    },
    latestRun: null,
  };
}
