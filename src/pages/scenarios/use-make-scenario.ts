import { useMutation } from "@tanstack/react-query";
import { useNavigate } from "react-router-dom";
import type { Template } from "#shared/scenario/templates.ts";
import { useCreateScenario } from "#src/api/scenarios/create-scenario.ts";
import { paths } from "#src/app/paths.ts";
import { failureText } from "#src/components/ui/query-error.tsx";

/** Makes a scenario of a template at once and opens it. */
export function useMakeScenario(teamId: string) {
  const navigate = useNavigate();
  const { mutateAsync: create } = useCreateScenario(teamId);
  const making = useMutation({
    mutationFn: (template: Template) => create({ scenario: template.scenario, note: `From the template “${template.title}”` }),
    onSuccess: ({ id }) => navigate(paths.scenario(teamId, id)),
  });
  return {
    make: (template: Template) => making.mutate(template),
    isPending: making.isPending,
    template: making.variables?.key ?? null,
    failure: making.isError ? failureText(making.error) : null,
  };
}
