/** Every address of the API, once. */
const team = (teamId: string) => `/api/teams/${encodeURIComponent(teamId)}`;
const scenario = (teamId: string, id: string) => `${team(teamId)}/scenarios/${encodeURIComponent(id)}`;
const run = (teamId: string, runId: string) => `${team(teamId)}/runs/${encodeURIComponent(runId)}`;

export const apiPaths = {
  health: () => "/api/health",
  demo: () => "/api/demo",
  session: () => "/api/session",
  scenarios: (teamId: string) => `${team(teamId)}/scenarios`,
  scenario,
  duplicate: (teamId: string, id: string) => `${scenario(teamId, id)}/duplicate`,
  revisions: (teamId: string, id: string) => `${scenario(teamId, id)}/revisions`,
  revision: (teamId: string, id: string, number: number) => `${scenario(teamId, id)}/revisions/${number}`,
  runs: (teamId: string, id: string) => `${scenario(teamId, id)}/runs`,
  run,
  series: (teamId: string, runId: string) => `${run(teamId, runId)}/series`,
  members: (teamId: string) => `${team(teamId)}/members`,
  activity: (teamId: string) => `${team(teamId)}/activity`,
} as const;
