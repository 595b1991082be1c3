import { Dialog } from "#src/components/ui/dialog.tsx";
import { useToast } from "#src/components/ui/toast.tsx";
import { PLACEMENT, wordOf } from "../model/choices.ts";
import { useForm } from "../setup/form.tsx";
import { PlacementsView } from "./placements-view.tsx";

/** Compares the placements of what is being edited, and takes one over. */
export function PlacementsDialog({ seed = null, onClose }: { seed?: number | null; onClose: () => void }) {
  const { draft, edit, readOnly } = useForm();
  const toast = useToast();
  return (
    <Dialog open wide onOpenChange={(open) => !open && onClose()} title="Where the controller sits" cancel="Close">
      <PlacementsView
        json={draft.json}
        seed={seed}
        onUse={
          readOnly
            ? undefined
            : (json, placement) => {
                edit({
                  kind: "put",
                  json,
                  forget: [
                    ["loops", 0, "controller", "acknowledgement"],
                    ["loops", 0, "timing", "actAfterSampleS"],
                  ],
                });
                toast({ text: `The controller sits ${wordOf(PLACEMENT, placement)} now; undo takes it back.` });
                onClose();
              }
        }
      />
    </Dialog>
  );
}
