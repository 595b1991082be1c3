import { useQueryClient } from "@tanstack/react-query";
import { useCallback, useMemo, useState } from "react";
import { useParams, useSearchParams } from "react-router-dom";
import type { ScenarioResponse } from "#shared/api/scenarios.ts";
import { useRevision } from "#src/api/revisions/get-revision.ts";
import { scenarioOptions, useScenario } from "#src/api/scenarios/get-scenario.ts";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths } from "#src/app/paths.ts";
import { useSession, useTeam } from "#src/app/session.tsx";
import { LinkButton } from "#src/components/ui/button.tsx";
import { QueryError } from "#src/components/ui/query-error.tsx";
import { Loading } from "#src/components/ui/states.tsx";
import { browserStore, draftKey, type StoredDraft } from "./model/draft-store.ts";
import { OldRevision } from "./old-revision.tsx";
import { Workshop } from "./workshop.tsx";
import "./scenario.css";

export function ScenarioPage() {
  const { scenarioId = "" } = useParams();
  const [search] = useSearchParams();
  const team = useTeam();
  const query = useScenario(team.id, scenarioId);
  if (!query.data) {
    return query.isError ? (
      <>
        <DocumentTitle>Scenario</DocumentTitle>
        <QueryError error={query.error} what="The scenario" onRetry={() => void query.refetch()}>
          <LinkButton to={paths.scenarios(team.id)}>To the scenarios</LinkButton>
        </QueryError>
      </>
    ) : (
      <Loading what="The scenario opens" />
    );
  }
  const asked = Number(search.get("revision"));
  const old = Number.isInteger(asked) && asked > 0 && asked !== query.data.latest.number ? asked : null;
  if (old !== null) return <OldRevision key={`${scenarioId} ${old}`} data={query.data} revision={old} />;
  return <WithDraft key={scenarioId} data={query.data} />;
}

/** Looks for a draft of an earlier visit, and for the revision that it began from. */
function WithDraft({ data }: { data: ScenarioResponse }) {
  const { user } = useSession();
  const team = useTeam();
  const client = useQueryClient();
  const store = useMemo(() => browserStore(draftKey(data.id, user.id)), [data.id, user.id]);
  // Decided once a visit: a revision that is saved from here, or by somebody else, does not open the page anew.
  const [visit, setVisit] = useState(() => ({ count: 0, found: store.read(), newest: data.latest }));
  const startOver = useCallback(async () => {
    const fresh = await client.fetchQuery({ ...scenarioOptions(team.id, data.id), staleTime: 0 }).catch(() => null);
    setVisit(({ count, newest }) => ({ count: count + 1, found: store.read(), newest: fresh?.latest ?? newest }));
  }, [client, team.id, data.id, store]);
  const { found, newest, count } = visit;
  if (found?.state === "open" && found.draft && found.base < newest.number)
    return <OnOlderBase key={count} data={data} store={store} found={found} onOtherBase={startOver} />;
  return (
    <Workshop
      key={count}
      data={data}
      base={{ revision: newest.number, scenario: newest.scenario }}
      store={store}
      found={found}
      onOtherBase={startOver}
    />
  );
}

interface OnOlderBaseProps {
  data: ScenarioResponse;
  store: ReturnType<typeof browserStore>;
  found: StoredDraft;
  onOtherBase: () => void;
}

function OnOlderBase({ data, store, found, onOtherBase }: OnOlderBaseProps) {
  const team = useTeam();
  const query = useRevision(team.id, data.id, found.base);
  if (query.data) {
    const base = { revision: query.data.number, scenario: query.data.scenario };
    return <Workshop data={data} base={base} store={store} found={found} onOtherBase={onOtherBase} />;
  }
  if (query.isError) {
    return (
      <QueryError error={query.error} what={`Revision ${found.base}, from which your draft began,`} onRetry={() => void query.refetch()}>
        <LinkButton to={paths.scenarios(team.id)}>To the scenarios</LinkButton>
      </QueryError>
    );
  }
  return <Loading what="Your draft opens" />;
}
