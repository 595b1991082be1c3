import { useMemo, useState } from "react";
import { useNavigate } from "react-router-dom";
import type { LogDetail } from "#shared/api/logs.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { useScenario } from "#src/api/scenarios/get-scenario.ts";
import { useScenarioList } from "#src/api/scenarios/list-scenarios.ts";
import { paths } from "#src/app/paths.ts";
import { useSession, useTeam } from "#src/app/session.tsx";
import { Button, LinkButton } from "#src/components/ui/button.tsx";
import { PickField } from "#src/components/ui/choice.tsx";
import { Dialog } from "#src/components/ui/dialog.tsx";
import { ProblemNote } from "#src/components/ui/field.tsx";
import { failureText } from "#src/components/ui/query-error.tsx";
import { Empty, Loading } from "#src/components/ui/states.tsx";
import { msText, significant, withUnit } from "#src/lib/format.ts";
import { browserStore, draftKey } from "#src/pages/scenario/model/draft-store.ts";
import { getAt } from "#src/pages/scenario/model/json-path.ts";
import { LogChoice, type LogChoiceOutcome } from "./log-choice.tsx";
import { NEWEST_SCENARIOS } from "./newest-scenarios.ts";

const NOTHING: LogChoiceOutcome = { process: null, problem: "Choose a scenario first." };

/** From a log: choose a scenario; it opens with the log's losses in its draft, unsaved. */
export function UseInScenarioDialog({ log, link, onClose }: { log: LogDetail; link: number; onClose: () => void }) {
  const team = useTeam();
  const navigate = useNavigate();
  const list = useScenarioList(team.id, NEWEST_SCENARIOS);
  const [chosen, setChosen] = useState<string | null>(null);
  const [outcome, setOutcome] = useState(NOTHING);
  const items = list.data?.items ?? [];
  const id = chosen ?? items[0]?.id ?? null;
  const none = list.data !== undefined && items.length === 0;
  const use = () => {
    if (id && outcome.process) navigate(paths.scenario(team.id, id), { state: { losses: { process: outcome.process, from: log.name } } });
  };
  return (
    <Dialog
      open
      broad
      onOpenChange={onClose}
      title={`Use “${log.name}” in a scenario`}
      text="The scenario opens with this log’s losses in its draft. Nothing is saved before you save it; undo takes it back."
      actions={
        none ? null : (
          <Button kind="go" impossible={outcome.problem} onClick={use}>
            Open the scenario with it
          </Button>
        )
      }
    >
      {list.isError && <ProblemNote problem={{ title: "The scenarios cannot be shown.", text: failureText(list.error) }} />}
      {list.isPending && <Loading what="The scenarios open" />}
      {none && (
        <Empty title="No scenario yet" text="Make one from a template first; it runs at once.">
          <LinkButton kind="go" to={paths.scenarios(team.id)}>
            To the scenarios
          </LinkButton>
        </Empty>
      )}
      {items.length > 0 && (
        <div className="mt-3">
          <PickField
            label="Scenario"
            options={items.map((item) => ({ value: item.id, word: `${item.name}, ${msText(item.round.periodS)} round` }))}
            value={id ?? ""}
            onChoose={(next) => {
              setOutcome(NOTHING);
              setChosen(next);
            }}
          />
        </div>
      )}
      {id && <ForScenario key={id} scenarioId={id} log={log} link={link} onOutcome={setOutcome} />}
    </Dialog>
  );
}

interface ForScenarioProps {
  scenarioId: string;
  log: LogDetail;
  link: number;
  onOutcome: (outcome: LogChoiceOutcome) => void;
}

/** Period and length are those of the person's own draft, where there is one. */
function ForScenario({ scenarioId, log, link, onOutcome }: ForScenarioProps) {
  const team = useTeam();
  const { user } = useSession();
  const query = useScenario(team.id, scenarioId);
  const latest = query.data?.latest.scenario;
  const { periodS, durationS, isDraft } = useMemo(() => {
    const found = browserStore(draftKey(scenarioId, user.id)).read();
    const draft = found?.state === "open" ? found.draft?.json : undefined;
    const number = (path: readonly string[], otherwise: number | undefined) => {
      const value = getAt(draft, path);
      return typeof value === "number" && value > 0 ? value : (otherwise ?? 0);
    };
    return {
      periodS: number(["round", "periodS"], latest?.round.periodS),
      durationS: number(["run", "durationS"], latest?.run.durationS),
      isDraft: draft !== undefined,
    };
  }, [scenarioId, user.id, latest]);
  if (query.isError) return <ProblemNote problem={{ title: "This scenario cannot be opened.", text: failureText(query.error) }} />;
  if (!latest) return <Loading what="The scenario is read" />;
  return (
    <>
      <p className="note second pb-1">
        {loopWords(latest)}; a run of {withUnit(significant(durationS), "s")}, {msText(periodS)} a round
        {isDraft && ", as in your unsaved draft"}.
      </p>
      <LogChoice log={log} link={link} periodS={periodS} durationS={durationS} onOutcome={onOutcome} />
    </>
  );
}

const loopWords = ({ loops }: Scenario): string => (loops.length === 1 ? `One loop, ${loops[0]?.name}` : `${loops.length} loops`);
