import { Link } from "react-router-dom";
import { paths } from "#src/app/paths.ts";

export type PhoneView = "bench" | "setup" | "floor";

interface PhoneBarProps {
  name: string;
  teamId: string;
  scenarioId: string;
  view: PhoneView;
  issues: number;
  /** Of an old revision: goes along to its floor. */
  search?: string;
  onView: (view: PhoneView) => void;
}

/** The pages of the scenario at the bottom of a phone's screen. */
export function PhoneBar({ name, teamId, scenarioId, view, issues, search = "", onView }: PhoneBarProps) {
  return (
    <nav className="ph-bar" aria-label={`${name}: pages`}>
      <button type="button" aria-current={view === "bench" ? "page" : undefined} onClick={() => onView("bench")}>
        Bench
      </button>
      <button type="button" aria-current={view === "setup" ? "page" : undefined} onClick={() => onView("setup")}>
        Set-up{issues > 0 && <span className="coral strong"> {issues}</span>}
      </button>
      <Link to={`${paths.scenarioFloor(teamId, scenarioId)}${search}`} aria-current={view === "floor" ? "page" : undefined}>
        Floor
      </Link>
      <Link to={paths.scenarioRuns(teamId, scenarioId)}>Runs</Link>
      <Link to={paths.scenarioRevisions(teamId, scenarioId)}>Revisions</Link>
    </nav>
  );
}
