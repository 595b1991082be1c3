import { createBrowserRouter, type RouteObject } from "react-router-dom";
import { Crashed } from "#src/pages/errors/crashed.tsx";
import { NotFound } from "#src/pages/errors/not-found.tsx";
import { patterns } from "./paths.ts";
import { Root } from "./root.tsx";
import { SignedIn } from "./signed-in.tsx";
import { Home, TeamScope } from "./team-scope.tsx";

export const routes: RouteObject[] = [
  {
    Component: Root,
    // The last resort, when the frame itself breaks.
    ErrorBoundary: Crashed,
    HydrateFallback: () => null,
    children: [
      { path: patterns.signIn, lazy: async () => ({ Component: (await import("#src/pages/sign-in/sign-in-page.tsx")).SignInPage }) },
      {
        Component: SignedIn,
        children: [
          {
            // A page that breaks leaves the frame standing.
            ErrorBoundary: Crashed,
            children: [
              { path: patterns.home, Component: Home },
              {
                Component: TeamScope,
                children: [
                  { path: patterns.team, Component: Home },
                  {
                    path: patterns.scenarios,
                    lazy: async () => ({ Component: (await import("#src/pages/scenarios/scenarios-page.tsx")).ScenariosPage }),
                  },
                  {
                    path: patterns.scenario,
                    lazy: async () => ({ Component: (await import("#src/pages/scenario/scenario-page.tsx")).ScenarioPage }),
                    // Bench and floor are two views of one draft: the page stays while one goes from one to the other.
                    children: [
                      { index: true, element: null },
                      { path: patterns.scenarioFloor, element: null },
                    ],
                  },
                  {
                    path: patterns.scenarioRevisions,
                    lazy: async () => ({ Component: (await import("#src/pages/scenario/revisions-page.tsx")).RevisionsPage }),
                  },
                  { path: patterns.scenarioRuns, lazy: async () => ({ Component: (await import("#src/pages/run/runs-page.tsx")).RunsPage }) },
                  { path: patterns.run, lazy: async () => ({ Component: (await import("#src/pages/run/run-page.tsx")).RunPage }) },
                  { path: patterns.logs, lazy: async () => ({ Component: (await import("#src/pages/logs/logs-page.tsx")).LogsPage }) },
                  { path: patterns.logUpload, lazy: async () => ({ Component: (await import("#src/pages/logs/upload-page.tsx")).UploadPage }) },
                  { path: patterns.log, lazy: async () => ({ Component: (await import("#src/pages/logs/log-page.tsx")).LogPage }) },
                  { path: patterns.members, lazy: async () => ({ Component: (await import("#src/pages/account/members-page.tsx")).MembersPage }) },
                ],
              },
              { path: patterns.account, lazy: async () => ({ Component: (await import("#src/pages/account/account-page.tsx")).AccountPage }) },
              { path: patterns.methods, lazy: async () => ({ Component: (await import("#src/pages/methods/methods-page.tsx")).MethodsPage }) },
              { path: "*", Component: NotFound },
            ],
          },
        ],
      },
    ],
  },
];

export const createRouter = () => createBrowserRouter(routes);
