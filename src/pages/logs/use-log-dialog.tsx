import { useState } from "react";
import { logListQuery } from "#shared/api/logs.ts";
import type { LossProcess } from "#shared/scenario/schema.ts";
import { useChosenLog } from "#src/api/logs/get-log.ts";
import { useLogList } from "#src/api/logs/list-logs.ts";
import { paths } from "#src/app/paths.ts";
import { Button, LinkButton } from "#src/components/ui/button.tsx";
import { PickField } from "#src/components/ui/choice.tsx";
import { Dialog } from "#src/components/ui/dialog.tsx";
import { ProblemNote } from "#src/components/ui/field.tsx";
import { failureText } from "#src/components/ui/query-error.tsx";
import { Empty, Loading } from "#src/components/ui/states.tsx";
import { listed } from "#src/lib/format.ts";
import { LogChoice, type LogChoiceOutcome } from "./use/log-choice.tsx";
import "./logs.css";

/** The newest first; a team with more than a hundred opens the others from their own page. */
const NEWEST = logListQuery.parse({ pageSize: 100 });
const NOTHING: LogChoiceOutcome = { process: null, problem: "Choose a log first." };

export interface UseLogDialogProps {
  teamId: string;
  /** The loops whose messages the losses meet. */
  loops: readonly { name: string }[];
  /** Round period and length of the run, which say how much of a log is needed. */
  periodS: number;
  durationS: number;
  /** A log that is chosen already. */
  logId?: string | null;
  /** Puts the process into the draft; the dialog is then closed by its owner. */
  onUse: (process: LossProcess) => void;
  onClose: () => void;
}

/** From a scenario's losses: choose a log of the team, its links, and how its losses come in. */
export function UseLogDialog({ teamId, loops, periodS, durationS, logId = null, onUse, onClose }: UseLogDialogProps) {
  const list = useLogList(teamId, NEWEST);
  const [chosen, setChosen] = useState(logId);
  const items = list.data?.items ?? [];
  const id = chosen ?? items[0]?.id ?? null;
  const log = useChosenLog(teamId, id);
  const [outcome, setOutcome] = useState(NOTHING);
  const use = () => outcome.process && onUse(outcome.process);
  const none = list.data !== undefined && items.length === 0;
  return (
    <Dialog
      open
      broad
      onOpenChange={onClose}
      title="Use a reception log"
      text={`The losses of ${listed(loops.map(({ name }) => `“${name}”`))} become what was received on a floor. The draft changes; undo takes it back.`}
      actions={
        none ? null : (
          <Button kind="go" impossible={log.data ? outcome.problem : "Choose a log first."} onClick={use}>
            Put it into the draft
          </Button>
        )
      }
    >
      {list.isError && <ProblemNote problem={{ title: "The reception logs cannot be shown.", text: failureText(list.error) }} />}
      {list.isPending && <Loading what="The reception logs open" />}
      {none && (
        <Empty
          title="No reception log yet"
          text="A log is a text file that says which packets arrived on a link. Upload one first; the draft of this scenario stays as it is."
        >
          <LinkButton kind="go" to={paths.logs(teamId)}>
            To the reception logs
          </LinkButton>
        </Empty>
      )}
      {items.length > 0 && (
        <div className="mt-3">
          <PickField
            label="Reception log"
            options={items.map((item) => ({ value: item.id, word: item.name }))}
            value={id ?? ""}
            onChoose={(next) => {
              setOutcome(NOTHING);
              setChosen(next);
            }}
          />
        </div>
      )}
      {log.isError && <ProblemNote problem={{ title: "This log cannot be shown.", text: failureText(log.error) }} />}
      {id !== null && log.isPending && <Loading what="The log opens" />}
      {log.data && <LogChoice key={log.data.id} log={log.data} periodS={periodS} durationS={durationS} onOutcome={setOutcome} />}
    </Dialog>
  );
}
