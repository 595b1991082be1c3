import { Button } from "#src/components/ui/button.tsx";
import { Dialog } from "#src/components/ui/dialog.tsx";
import { ProblemNote } from "#src/components/ui/field.tsx";
import { counted } from "#src/lib/format.ts";
import type { ScenarioActs } from "./use-scenario-acts.ts";

export function DeleteDialog({ acts }: { acts: ScenarioActs }) {
  const item = acts.toDelete;
  if (!item) return null;
  return (
    <Dialog
      open
      onOpenChange={acts.keep}
      title={`Delete “${item.name}”?`}
      text={`Its ${counted(item.revision, "revision")} and all of its runs go with it, for everybody in the team. This cannot be taken back; an export as JSON keeps the latest revision.`}
      cancel="Keep it"
      actions={
        <>
          <Button onClick={() => acts.exportJson(item)}>Export as JSON</Button>
          <Button kind="back" busy={acts.isDeleting} onClick={() => acts.deleteForGood(item)}>
            Delete for good
          </Button>
        </>
      }
    >
      {acts.deleteFailure && (
        <div className="mt-3">
          <ProblemNote problem={{ title: "It was not deleted.", text: acts.deleteFailure }} />
        </div>
      )}
    </Dialog>
  );
}
