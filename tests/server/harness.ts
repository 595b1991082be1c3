/** A server on a database of its own, with one person per role in one team and an engineer of another. */

import bcrypt from "bcryptjs";
import type { Express } from "express";
import pino from "pino";
import supertest from "supertest";
import { vi } from "vitest";
import type { z } from "zod";
import { type App, createApp } from "#server/app.ts";
import { type Connection, connect } from "#server/db/client.ts";
import { memberships, teams, users } from "#server/db/schema.ts";
import { builtClient, builtPolicy, securityHeaders } from "#server/http/client.ts";
import { ROLES, type Role } from "#shared/api/permissions.ts";
import type { ScenarioResponse } from "#shared/api/scenarios.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { createTestDatabase, type TestDatabase } from "../helpers/database.ts";

export const PASSWORD = "a long enough password";
export const SLOW = 120_000;
// A machine that does other things as well hashes passwords and writes to disk slowly.
vi.setConfig({ testTimeout: 30_000 });

export type Agent = ReturnType<typeof supertest.agent>;
export interface Person {
  id: string;
  email: string;
  agent: Agent;
}

export interface Harness {
  app: App;
  express: Express;
  connection: Connection;
  url: string;
  team: { id: string; name: string };
  otherTeam: { id: string; name: string };
  people: Record<Role, Person>;
  /** An engineer of the other team only. */
  stranger: Person;
  signIn(email: string, password?: string): Promise<Agent>;
  close(): Promise<void>;
}

export async function startHarness(given?: TestDatabase): Promise<Harness> {
  const database = given ?? (await createTestDatabase());
  const log = pino({ level: "silent" });
  const connection = connect(database.url, log);
  const { db } = connection;
  const nowhere = "/nonexistent";
  const app = createApp({
    connection,
    log,
    sessionSecret: "only for tests, only for tests, only",
    demo: true,
    security: securityHeaders(builtPolicy(nowhere)),
    client: builtClient(nowhere),
  });
  await app.warmUp();
  const express = app.app;

  const signIn = async (email: string, password = PASSWORD) => {
    const agent = supertest.agent(express);
    await agent.post("/api/session").send({ email, password }).expect(200);
    return agent;
  };
  const [team, otherTeam] = await db
    .insert(teams)
    .values([{ name: "Northquay Packaging" }, { name: "Saltmarsh Training Centre" }])
    .returning();
  // As cheap as can be: only a test of its own looks at how long hashing takes.
  const passwordHash = await bcrypt.hash(PASSWORD, 4);
  const enrol = async (email: string, name: string, teamId: string, roles: Role[]): Promise<Person> => {
    const [user] = await db.insert(users).values({ email, name, passwordHash }).returning();
    await db.insert(memberships).values({ teamId, userId: user.id, roles });
    return { id: user.id, email, agent: await signIn(email) };
  };
  const people = {} as Record<Role, Person>;
  for (const role of ROLES) people[role] = await enrol(`${role}@northquay.example`, `The ${role}`, team.id, [role]);
  const stranger = await enrol("stranger@saltmarsh.example", "A stranger", otherTeam.id, ["engineer"]);

  return {
    app,
    express,
    connection,
    url: database.url,
    team,
    otherTeam,
    people,
    stranger,
    signIn,
    async close() {
      await app.close();
      await connection.pool.end();
      await database.remove();
    },
  };
}

/** A pendulum that runs for one second only. */
export function scenarioNamed(name: string, change: (scenario: Scenario) => void = () => undefined): Scenario {
  const scenario = structuredClone(TEMPLATES[0].scenario);
  scenario.name = name;
  scenario.run.durationS = 1;
  // A second is too short to judge how the template settles.
  scenario.limits = scenario.limits.filter(({ type }) => type !== "settle");
  change(scenario);
  return scenario;
}

/** A scenario whose round is longer than its period. */
export const withoutRoom = (scenario: Scenario): void => {
  scenario.round.periodS = 0.005;
};

export async function createScenario({ team, people }: Harness, scenario: Scenario, by: Person = people.engineer): Promise<ScenarioResponse> {
  const response = await by.agent.post(`/api/teams/${team.id}/scenarios`).send({ scenario });
  if (response.status !== 201) throw new Error(`Not created: ${response.status} ${JSON.stringify(response.body)}`);
  return response.body;
}

/** The answer as its schema says it is; anything more or less fails. */
export function bodyOf<Schema extends z.ZodType>(schema: Schema, response: { body: unknown }): z.output<Schema> {
  return schema.parse(response.body);
}
