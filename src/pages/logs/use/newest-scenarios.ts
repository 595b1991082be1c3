import { scenarioListQuery } from "#shared/api/scenarios.ts";

/** The scenarios that a list to choose from shows: not archived, newest first. */
export const NEWEST_SCENARIOS = scenarioListQuery.parse({ pageSize: 100 });
