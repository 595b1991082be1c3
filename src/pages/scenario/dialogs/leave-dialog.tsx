import { matchPath, useBlocker } from "react-router-dom";
import { patterns } from "#src/app/paths.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Dialog } from "#src/components/ui/dialog.tsx";

/** The scenario whose draft an address shows, on the bench or on the floor. */
const shownAt = (pathname: string) => (matchPath(patterns.scenario, pathname) ?? matchPath(patterns.scenarioFloor, pathname))?.params.scenarioId;

/** Only while the browser refuses to keep the draft: otherwise leaving loses nothing, and nobody is asked. */
export function LeaveDialog({ when, onDownload }: { when: boolean; onDownload: () => void }) {
  const blocker = useBlocker(({ currentLocation, nextLocation }) => when && shownAt(currentLocation.pathname) !== shownAt(nextLocation.pathname));
  if (blocker.state !== "blocked") return null;
  return (
    <Dialog
      open
      onOpenChange={(open) => !open && blocker.reset()}
      title="Leave without your changes?"
      text="This browser does not keep the draft (its storage is full or switched off). Save a revision or download the draft first."
      cancel="Stay here"
      actions={
        <>
          <Button onClick={onDownload}>Download the draft</Button>
          <Button kind="back" onClick={() => blocker.proceed()}>
            Leave, lose them
          </Button>
        </>
      }
    />
  );
}
