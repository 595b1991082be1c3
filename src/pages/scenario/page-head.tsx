import { Link } from "react-router-dom";
import { paths } from "#src/app/paths.ts";
import { Button, ButtonPair, IconButton } from "#src/components/ui/button.tsx";
import { Menu, MenuItem, MenuRule } from "#src/components/ui/menu.tsx";
import { Way } from "#src/components/ui/way.tsx";
import { counted } from "#src/lib/format.ts";
import { usePhone } from "./use-phone.ts";

export const changesText = (count: number, trying: boolean): string =>
  trying ? `${counted(count, "value")} tried` : `${counted(count, "unsaved change")}`;

interface PageHeadProps {
  teamId: string;
  scenarioId: string;
  name: string;
  machine: string;
  revision: number;
  note: string;
  changes: number;
  /** Somebody who may not save: values are tried, nothing is "unsaved". */
  trying: boolean;
  runs: number | undefined;
  canUndo: boolean;
  canRedo: boolean;
  onUndo: () => void;
  onRedo: () => void;
  onShowChanges: () => void;
  onSave: () => void;
  /** Why saving is not possible; undefined: it is not offered at all. */
  saveImpossible: string | null | undefined;
  onDuplicate: (() => void) | null;
  duplicating: boolean;
  onExport: () => void;
  onImport: () => void;
  onRename: (() => void) | null;
  /** Beside the pages: what is known of the floor. */
  tail?: string;
}

export function PageHead(props: PageHeadProps) {
  const { teamId, scenarioId, name, machine, revision, note, changes, trying, runs, saveImpossible } = props;
  const saved = changes === 0;
  const phone = usePhone();
  return (
    <>
      <div className="title">
        <div>
          <p className="trail">
            <Link to={paths.scenarios(teamId)}>Scenarios</Link> / {machine}
          </p>
          <h1>
            {name}{" "}
            <span className="rev">
              <Link className="rev-link" to={paths.scenarioRevisions(teamId, scenarioId)} title="All revisions of this scenario">
                Revision {revision}
              </Link>
              {note && <span className="rev-note">, {note}</span>}
              {" · "}
              {saved ? (
                trying ? (
                  "nothing tried"
                ) : (
                  "all saved"
                )
              ) : (
                <button type="button" className="dirty" onClick={props.onShowChanges} title="Show what changed">
                  {changesText(changes, trying)}
                </button>
              )}
            </span>
          </h1>
        </div>
        <div className="acts">
          <ButtonPair label="Undo and redo">
            <IconButton icon="undo" label="Undo (Ctrl+Z)" impossible={props.canUndo ? null : "Nothing to undo."} onClick={props.onUndo} />
            {!phone && (
              <IconButton icon="redo" label="Redo (Ctrl+Shift+Z)" impossible={props.canRedo ? null : "Nothing to redo."} onClick={props.onRedo} />
            )}
          </ButtonPair>
          {props.onDuplicate && !phone && (
            <Button busy={props.duplicating} onClick={props.onDuplicate}>
              Duplicate
            </Button>
          )}
          <Menu trigger={<IconButton icon="more" label="More" />}>
            {phone && (
              <MenuItem onSelect={props.onRedo} impossible={props.canRedo ? null : "Nothing to redo."}>
                Redo
              </MenuItem>
            )}
            <MenuItem onSelect={props.onExport}>Export as JSON</MenuItem>
            <MenuItem onSelect={props.onImport}>Import JSON into this scenario</MenuItem>
            {props.onDuplicate && phone && <MenuItem onSelect={props.onDuplicate}>Duplicate</MenuItem>}
            {props.onRename && <MenuItem onSelect={props.onRename}>Rename</MenuItem>}
            <MenuRule />
            <MenuItem asChild>
              <Link to={paths.scenarioRevisions(teamId, scenarioId)}>All revisions</Link>
            </MenuItem>
            {!saved && <MenuItem onSelect={props.onShowChanges}>Show or discard changes</MenuItem>}
          </Menu>
          {saveImpossible !== undefined && (
            <Button kind="go" impossible={saveImpossible} onClick={props.onSave} title="Ctrl+S">
              {saved ? "Saved" : `Save ${phone ? "" : "revision "}${revision + 1}`}
            </Button>
          )}
        </div>
      </div>
      <Way
        label={name}
        tail={phone ? undefined : props.tail}
        points={[
          { to: paths.scenario(teamId, scenarioId), word: "Bench", end: true },
          { to: paths.scenarioFloor(teamId, scenarioId), word: "Floor" },
          { to: paths.scenarioRuns(teamId, scenarioId), word: "Runs", count: runs },
        ]}
      />
    </>
  );
}
