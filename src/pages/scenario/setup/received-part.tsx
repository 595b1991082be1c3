import { lazy, Suspense, useState } from "react";
import { Link, useParams } from "react-router-dom";
import type { LossProcess, Scenario } from "#shared/scenario/schema.ts";
import { paths } from "#src/app/paths.ts";
import { Button } from "#src/components/ui/button.tsx";
import { ProblemNote } from "#src/components/ui/field.tsx";
import { THEN } from "../model/choices.ts";
import { floorText } from "../model/floor-words.ts";
import { getAt, setAt } from "../model/json-path.ts";
import { runsText } from "../model/round-words.ts";
import { asProblem, PickAt } from "./fields.tsx";
import { useForm, useIssue } from "./form.tsx";
import { floorOf } from "./node-fields.tsx";

const PROCESS = ["losses", "process"] as const;

/** Fetched when a log is first asked for. */
const UseLogDialog = lazy(async () => ({ default: (await import("#src/pages/logs/use-log-dialog.tsx")).UseLogDialog }));

/** Which floor decides, and the way to it. */
export function FloodPart() {
  const { json } = useForm().draft;
  const { teamId = "", scenarioId } = useParams();
  const floor = floorOf(json);
  const nodes = getAt(json, ["loops", 0, "nodes"]);
  return (
    <p className="note second py-1">
      {floor
        ? `Delivered is what reaches the node that needs it: ${floor.name ? `${floor.name}, ` : ""}${floorText(floor)}. All receivers of one flood are drawn together.`
        : "Floods need a floor with the nodes of the loop."}{" "}
      {floor && nodes === null && "Say above, in Floor and radio, on which nodes the loop runs. "}
      {scenarioId && <Link to={paths.scenarioFloor(teamId, scenarioId)}>{floor ? "Open the floor" : "Lay out a floor"}</Link>}
    </p>
  );
}

type Replay = Extract<LossProcess, { type: "replay" }>;

/** The log that is replayed, what it holds, and what follows after its end. */
export function ReplayPart() {
  const { json } = useForm().draft;
  const { teamId = "" } = useParams();
  const process = getAt(json, PROCESS) as Replay;
  const { log } = process;
  return (
    <>
      <p className="note second py-1">
        {log ? (
          <>
            From <Link to={paths.log(teamId, log.id)}>{log.name}</Link>. The scenario carries the packets itself.
          </>
        ) : process.measurement.runs.length > 0 || process.command.runs.length > 0 ? (
          "The packets came with the scenario; no log of the team is named."
        ) : (
          "No log is chosen yet."
        )}
      </p>
      <dl className="su-replay">
        {(["measurement", "command"] as const).map((message) => (
          <Replayed key={message} message={message} link={process[message]} />
        ))}
      </dl>
      <PickAt path={[...PROCESS, "then"]} options={THEN} />
    </>
  );
}

function Replayed({ message, link }: { message: "measurement" | "command"; link: Replay["measurement"] }) {
  const issue = asProblem(useIssue([...PROCESS, message, "runs"]));
  return (
    <>
      <dt>{message === "measurement" ? "Measurement" : "Command"}</dt>
      <dd>
        {link.link && `${link.link}: `}
        {runsText(link.runs)}
      </dd>
      {issue && <ProblemNote problem={issue} />}
    </>
  );
}

/** Puts what was received into the losses, as it was or as a fitted process. */
export function UseLog() {
  const { draft, edit, readOnly } = useForm();
  const { teamId } = useParams();
  const [open, setOpen] = useState(false);
  if (readOnly || !teamId) return null;
  const scenario = draft.json as Scenario;
  const present = getAt(scenario, PROCESS) as LossProcess;
  const use = (process: LossProcess) => {
    edit({ kind: "put", json: setAt(draft.json, PROCESS, process), forget: [PROCESS] });
    setOpen(false);
  };
  return (
    <>
      <Button small className="su-add" onClick={() => setOpen(true)}>
        Use a reception log
      </Button>
      {open && (
        <Suspense fallback={null}>
          <UseLogDialog
            teamId={teamId}
            loops={scenario.loops.map(({ name }) => ({ name }))}
            periodS={scenario.round.periodS}
            durationS={scenario.run.durationS}
            logId={present.type === "replay" ? present.log?.id : null}
            onUse={use}
            onClose={() => setOpen(false)}
          />
        </Suspense>
      )}
    </>
  );
}
