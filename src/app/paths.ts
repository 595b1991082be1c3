/** Every address of the page, once. `pattern` is what the router matches; the functions make links. */
export const patterns = {
  home: "/",
  signIn: "/sign-in",
  team: "/teams/:teamId",
  scenarios: "/teams/:teamId/scenarios",
  scenario: "/teams/:teamId/scenarios/:scenarioId",
  scenarioFloor: "/teams/:teamId/scenarios/:scenarioId/floor",
  scenarioRuns: "/teams/:teamId/scenarios/:scenarioId/runs",
  scenarioRevisions: "/teams/:teamId/scenarios/:scenarioId/revisions",
  run: "/teams/:teamId/runs/:runId",
  logs: "/teams/:teamId/logs",
  logUpload: "/teams/:teamId/logs/new",
  log: "/teams/:teamId/logs/:logId",
  members: "/teams/:teamId/members",
  account: "/account",
  methods: "/methods",
} as const;

const fill = (pattern: string, params: Record<string, string> = {}) =>
  pattern.replace(/:(\w+)/g, (_, name: string) => encodeURIComponent(params[name] ?? ""));

export const paths = {
  home: () => patterns.home,
  signIn: (from?: string) => (from && from !== "/" ? `${patterns.signIn}?from=${encodeURIComponent(from)}` : patterns.signIn),
  scenarios: (teamId: string) => fill(patterns.scenarios, { teamId }),
  scenario: (teamId: string, scenarioId: string) => fill(patterns.scenario, { teamId, scenarioId }),
  scenarioFloor: (teamId: string, scenarioId: string) => fill(patterns.scenarioFloor, { teamId, scenarioId }),
  scenarioRuns: (teamId: string, scenarioId: string) => fill(patterns.scenarioRuns, { teamId, scenarioId }),
  scenarioRevisions: (teamId: string, scenarioId: string) => fill(patterns.scenarioRevisions, { teamId, scenarioId }),
  run: (teamId: string, runId: string) => fill(patterns.run, { teamId, runId }),
  logs: (teamId: string) => fill(patterns.logs, { teamId }),
  logUpload: (teamId: string) => fill(patterns.logUpload, { teamId }),
  log: (teamId: string, logId: string) => fill(patterns.log, { teamId, logId }),
  members: (teamId: string) => fill(patterns.members, { teamId }),
  account: () => patterns.account,
  methods: () => patterns.methods,
} as const;
