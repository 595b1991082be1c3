import { QueryClientProvider } from "@tanstack/react-query";
import { configure, render } from "@testing-library/react";
import { userEvent } from "@testing-library/user-event";
import { createMemoryRouter, RouterProvider } from "react-router-dom";
import { vi } from "vitest";
import { createQueryClient } from "#src/app/query-client.ts";
import { routes } from "#src/app/router.tsx";
// Fetched by the router when they are first shown: here beforehand, so that no test waits for a module.
import "#src/pages/scenarios/scenarios-page.tsx";
import "#src/pages/sign-in/sign-in-page.tsx";

// A busy machine takes its time; a test that fails pays for it, one that passes does not.
configure({ asyncUtilTimeout: 8000 });
vi.setConfig({ testTimeout: 30_000 });

/** The whole page at an address, as main.tsx puts it together. */
export function renderApp(path: string) {
  window.scrollTo = () => {};
  const router = createMemoryRouter(routes, { initialEntries: [path] });
  const client = createQueryClient();
  const view = render(
    <QueryClientProvider client={client}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  return {
    ...view,
    router,
    client,
    user: userEvent.setup({ delay: null }),
    address: () => router.state.location.pathname + router.state.location.search,
  };
}
