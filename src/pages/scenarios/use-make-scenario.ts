import { useMutation } from "@tanstack/react-query";
import { useNavigate } from "react-router-dom";
import { apiPaths } from "#shared/api/paths.ts";
import { scenarioListResponse } from "#shared/api/scenarios.ts";
import type { Template } from "#shared/scenario/templates.ts";
import { queryText, request } from "#src/api/client.ts";
import { useCreateScenario } from "#src/api/scenarios/create-scenario.ts";
import { paths } from "#src/app/paths.ts";
import { failureText } from "#src/components/ui/query-error.tsx";

/** "Overhead crane", or "Overhead crane 2" where that is taken. */
export function nextName(name: string, taken: readonly string[]): string {
  if (!taken.includes(name)) return name;
  for (let k = 2; ; k++) if (!taken.includes(`${name} ${k}`)) return `${name} ${k}`;
}

/** A list that cannot be had is no reason not to make a scenario. */
async function freeName(teamId: string, name: string): Promise<string> {
  const found = await request(apiPaths.scenarios(teamId) + queryText({ search: name, page: 1, pageSize: 100 }), scenarioListResponse).catch(
    () => null,
  );
  return nextName(name, found?.items.map((item) => item.name) ?? []);
}

/** Makes a scenario of a template at once and opens it. */
export function useMakeScenario(teamId: string) {
  const navigate = useNavigate();
  const { mutateAsync: create } = useCreateScenario(teamId);
  const making = useMutation({
    mutationFn: async (template: Template) => {
      const name = await freeName(teamId, template.scenario.name);
      return create({ scenario: { ...template.scenario, name }, note: `From the template “${template.title}”` });
    },
    onSuccess: ({ id }) => navigate(paths.scenario(teamId, id)),
  });
  return {
    make: (template: Template) => making.mutate(template),
    isPending: making.isPending,
    template: making.variables?.key ?? null,
    failure: making.isError ? failureText(making.error) : null,
  };
}
