import { useState } from "react";
import type { RevisionDetail } from "#shared/api/revisions.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Dialog } from "#src/components/ui/dialog.tsx";
import { failureText } from "#src/components/ui/query-error.tsx";
import { Tell } from "#src/components/ui/tell.tsx";
import { counted, instantText } from "#src/lib/format.ts";
import { describeChanges } from "../model/changes.ts";
import { isWithin } from "../model/json-path.ts";
import { mergeDrafts } from "../model/merge.ts";
import { SECTION_IDS, sectionOf } from "../model/sections.ts";

export type Resolution = "mine" | "both" | "theirs" | "new";

interface ConflictDialogProps {
  base: { revision: number; scenario: Scenario };
  mine: Scenario;
  theirs: RevisionDetail;
  busy: boolean;
  error: unknown;
  onResolve: (resolution: Resolution) => void;
  onClose: () => void;
}

interface Row {
  path: string;
  label: string;
  base: string;
  mine: string | null;
  theirs: string | null;
}

/** Every setting that either of the two changed, in the order of the set-up. */
function rowsOf(base: Scenario, mine: Scenario, theirs: Scenario): Row[] {
  const rows = describeChanges(base, theirs).map(({ path, label, before, after }): Row => ({ path, label, base: before, mine: null, theirs: after }));
  for (const { path, label, before, after } of describeChanges(base, mine)) {
    const same = rows.find((row) => row.path === path);
    if (same) same.mine = after;
    else rows.push({ path, label, base: before, mine: after, theirs: null });
  }
  const place = ({ path }: Row) => SECTION_IDS.indexOf(sectionOf(path));
  return rows.sort((a, b) => place(a) - place(b));
}

/** Somebody else saved in the meantime: what they changed, what I changed, and what is to become of it. */
export function ConflictDialog({ base, mine, theirs, busy, error, onResolve, onClose }: ConflictDialogProps) {
  const rows = rowsOf(base.scenario, mine, theirs.scenario);
  const { clashes } = mergeDrafts(base.scenario, mine, theirs.scenario);
  const [choice, setChoice] = useState<Resolution>("both");
  const next = theirs.number + 1;
  const undone = rows.filter(({ theirs: other, mine: own }) => other !== null && other !== own).length;
  const options: { value: Resolution; word: string; text: string; verb: string }[] = [
    {
      value: "both",
      word: "Put my changes on theirs",
      text:
        clashes.length === 0
          ? "Both stay: no setting was changed by both. The bench shows the result before you save it."
          : `Where both changed the same setting, mine holds (${counted(clashes.length, "setting")}). The bench shows the result before you save it.`,
      verb: "Put mine on theirs",
    },
    {
      value: "mine",
      word: `Save mine as revision ${next}`,
      text: `As I have it here. ${counted(undone, "setting")} of revision ${theirs.number} ${undone === 1 ? "is" : "are"} not in it; revision ${theirs.number} stays in the history.`,
      verb: `Save revision ${next}`,
    },
    {
      value: "theirs",
      word: "Take theirs",
      text: "The bench goes on from their revision. Mine is kept in this browser, to be looked at or downloaded.",
      verb: "Take theirs",
    },
    { value: "new", word: "Save mine as a new scenario", text: "Both go on side by side.", verb: "Save as a new scenario" },
  ];
  const chosen = options.find(({ value }) => value === choice) ?? options[0];
  return (
    <Dialog
      open
      broad
      // What is being saved takes the draft's place afterwards: nothing may be edited meanwhile.
      onOpenChange={() => !busy && onClose()}
      title={`${theirs.author.name} saved revision ${theirs.number} in the meantime`}
      text={
        <>
          {instantText(theirs.savedAt)}
          {theirs.note ? <>, with the note “{theirs.note}”.</> : ", without a note."} Your changes began from revision {base.revision}; nothing of
          them is lost.
        </>
      }
      actions={
        <Button kind="go" busy={busy} onClick={() => onResolve(choice)}>
          {busy ? "Working" : chosen.verb}
        </Button>
      }
    >
      <h3>What differs</h3>
      <div className="chg-scroll">
        <table className="t chg">
          <thead>
            <tr>
              <th scope="col">Setting</th>
              <th scope="col" className="r">
                Revision {base.revision}
              </th>
              <th scope="col" className="r">
                Theirs
              </th>
              <th scope="col" className="r">
                Mine
              </th>
            </tr>
          </thead>
          <tbody>
            {rows.map((row) => {
              const clash = clashes.some((path) => isWithin(row.path, path) || isWithin(path, row.path));
              return (
                <tr key={row.path}>
                  <th scope="row">
                    {row.label}
                    {clash && <span className="coral note"> both changed it</span>}
                  </th>
                  <td className="r second">{row.base}</td>
                  <td className={`r ${row.theirs === null ? "muted" : "strong"}`}>{row.theirs ?? "unchanged"}</td>
                  <td className={`r ${row.mine === null ? "muted" : "strong"}`}>{row.mine ?? "unchanged"}</td>
                </tr>
              );
            })}
          </tbody>
        </table>
      </div>
      <fieldset className="ways-on">
        <legend>What is to become of it</legend>
        {options.map(({ value, word, text }) => (
          <label key={value}>
            <input type="radio" name="resolution" value={value} checked={choice === value} onChange={() => setChoice(value)} />
            <span>
              <b className="strong">{word}</b>
              <span className="second">{text}</span>
            </span>
          </label>
        ))}
      </fieldset>
      {error !== null && error !== undefined && <Tell>{failureText(error)}</Tell>}
    </Dialog>
  );
}
