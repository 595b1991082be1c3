/** The runs of a scenario as rows; on a phone as a list. */
import { Link } from "react-router-dom";
import type { RunSummary } from "#shared/api/runs.ts";
import { paths } from "#src/app/paths.ts";
import { VerdictCell } from "#src/components/ui/mark.tsx";
import { instantText, percentText, significant, whenText, withUnit } from "#src/lib/format.ts";
import { useNow } from "#src/lib/use-now.ts";
import { endedText } from "./run-words.ts";

interface RowsProps {
  teamId: string;
  items: readonly RunSummary[];
  /** The rows of the question before, while the new ones are on their way. */
  waiting: boolean;
}

const seconds = (value: number) => withUnit(significant(value, 4), "s");

const Delivered = ({ run }: { run: RunSummary }) =>
  run.delivery.ratio === null ? (
    <span className="muted">none sent</span>
  ) : (
    <span title={`${run.delivery.sent - run.delivery.lost} of ${run.delivery.sent} messages`}>{percentText(run.delivery.ratio)}</span>
  );

const RunLink = ({ teamId, run, now }: { teamId: string; run: RunSummary; now: Date }) => (
  <Link
    to={paths.run(teamId, run.id)}
    title={instantText(run.createdAt)}
    aria-label={`${whenText(run.createdAt, now)}: open the run of revision ${run.revision} with seed ${run.seed}`}
  >
    {whenText(run.createdAt, now)}
  </Link>
);

export function RunTable({ teamId, items, waiting }: RowsProps) {
  const now = useNow();
  return (
    <div className="scroll-x" aria-busy={waiting || undefined}>
      <table className="t run-table">
        <thead>
          <tr>
            <th scope="col">Run</th>
            <th scope="col" className="r">
              Revision
            </th>
            <th scope="col" className="r">
              Seed
            </th>
            <th scope="col">Verdict</th>
            <th scope="col" className="r">
              Delivered
            </th>
            <th scope="col" className="r">
              Length
            </th>
            <th scope="col">Kept by</th>
          </tr>
        </thead>
        <tbody>
          {items.map((run) => (
            <tr key={run.id}>
              <th scope="row" className="nw">
                <RunLink teamId={teamId} run={run} now={now} />
              </th>
              <td className="r">{run.revision}</td>
              <td className="r">{run.seed}</td>
              <td>
                <VerdictCell verdict={run.verdict} />
              </td>
              <td className="r nw">
                <Delivered run={run} />
              </td>
              <td className="r">{endedText(run, seconds)}</td>
              <td className="nw">{run.author.name}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

export function RunCards({ teamId, items, waiting }: RowsProps) {
  const now = useNow();
  return (
    <ul className="run-cards" aria-busy={waiting || undefined}>
      {items.map((run) => (
        <li key={run.id}>
          <p className="run-line">
            <RunLink teamId={teamId} run={run} now={now} />
            <span className="second">
              revision {run.revision}, seed {run.seed}
            </span>
          </p>
          <VerdictCell verdict={run.verdict} />
          <p className="second small">
            <Delivered run={run} /> delivered · {endedText(run, seconds)} · {run.author.name}
          </p>
        </li>
      ))}
    </ul>
  );
}
