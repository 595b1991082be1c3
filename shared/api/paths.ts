/** Every address of the API, once. */
const team = (teamId: string) => `/api/teams/${encodeURIComponent(teamId)}`;
const scenario = (teamId: string, id: string) => `${team(teamId)}/scenarios/${encodeURIComponent(id)}`;
const run = (teamId: string, runId: string) => `${team(teamId)}/runs/${encodeURIComponent(runId)}`;
const log = (teamId: string, id: string) => `${team(teamId)}/logs/${encodeURIComponent(id)}`;

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
  logs: (teamId: string) => `${team(teamId)}/logs`,
  log,
  /** The file as it was uploaded, for a link with `download`. */
  logOriginal: (teamId: string, id: string) => `${log(teamId, id)}/original`,
  pictures: (teamId: string) => `${team(teamId)}/pictures`,
  /** The picture itself, for an image's source. */
  picture: (teamId: string, id: string) => `${team(teamId)}/pictures/${encodeURIComponent(id)}`,
  members: (teamId: string) => `${team(teamId)}/members`,
  activity: (teamId: string) => `${team(teamId)}/activity`,
} as const;
