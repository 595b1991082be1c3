import { MAX_SCENARIO_BYTES } from "#shared/api/errors.ts";
import { PLANT_LABELS, plantKind } from "#shared/api/scenarios.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import { ProblemNote } from "#src/components/ui/field.tsx";
import { Icon } from "#src/components/ui/icon.tsx";
import { bytesText, counted, msText, significant, withUnit } from "#src/lib/format.ts";
import type { Reading } from "./read-scenario.ts";

const MOST_SHOWN = 100;

/** Some messages begin with the path, which already stands before them. */
const withoutPath = ({ path, message }: Issue): string => (path && message.startsWith(`${path} `) ? message.slice(path.length + 1) : message);

/** Field, value and permitted range of everything that is wrong. */
export function IssueList({ issues }: { issues: readonly Issue[] }) {
  return (
    // biome-ignore lint/a11y/noNoninteractiveTabindex: it scrolls, and keys have to be able to scroll it
    <ol className="issues mt-2" tabIndex={0} aria-label="What has to be put right">
      {issues.slice(0, MOST_SHOWN).map((issue) => (
        <li key={`${issue.path} ${issue.code} ${issue.message}`}>
          {issue.path && <span className="at">{issue.path}</span>} {withoutPath(issue)}
          {issue.help && issue.help.length > 0 && <span className="pl">What would help: {issue.help.join("; ")}.</span>}
        </li>
      ))}
      {issues.length > MOST_SHOWN && <li>and {issues.length - MOST_SHOWN} more.</li>}
    </ol>
  );
}

export function ImportReading({ reading }: { reading: Reading }) {
  if (reading.kind === "too-large") {
    return (
      <ProblemNote
        problem={{
          title: `This has ${bytesText(reading.bytes)}; at most ${bytesText(MAX_SCENARIO_BYTES)} are taken.`,
          text: "Given sequences of losses or noise are usually what makes a scenario large: shorten them or let them repeat.",
        }}
      />
    );
  }
  if (reading.kind === "not-json") {
    return (
      <ProblemNote
        problem={{
          title: reading.message,
          text: reading.line.trim() && <code className="mt-1 block border-t border-line pt-1 font-sans wrap-anywhere">{reading.line}</code>,
        }}
      />
    );
  }
  if (reading.kind === "invalid") {
    return (
      <>
        <p className="strong coral">
          <Icon name="cross" size={14} /> {counted(reading.issues.length, "field has", "fields have")} to be put right.
        </p>
        <IssueList issues={reading.issues} />
      </>
    );
  }
  const { scenario, toPutRight } = reading;
  return (
    <>
      <p>
        <Icon name="check" size={14} className="kelp" /> <b className="strong">{scenario.name}</b>
        <span className="second">
          {` · ${PLANT_LABELS[plantKind(scenario.loops[0].plant)]} · ${msText(scenario.round.periodS)} round · ${withUnit(significant(scenario.run.durationS), "s")} · ${counted(scenario.limits.length, "limit")}`}
        </span>
      </p>
      {toPutRight.length > 0 && (
        <>
          <p className="mt-2">It can be imported, but it does not run until this is put right:</p>
          <IssueList issues={toPutRight} />
        </>
      )}
    </>
  );
}
