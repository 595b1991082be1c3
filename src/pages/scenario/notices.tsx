import { Button } from "#src/components/ui/button.tsx";
import { Tell } from "#src/components/ui/tell.tsx";
import { clockText } from "./clock.ts";
import type { DraftCopy } from "./model/draft-store.ts";
import type { DraftControl } from "./use-draft.ts";

/** What became of the draft while one was away, and what can be done about it. */
export function DraftNotices({ control }: { control: DraftControl }) {
  const { notice, stored, touched } = control;
  return (
    <>
      {notice?.kind === "restored" && (
        <Tell calm>
          <span>Your unsaved changes of {clockText(notice.at)} are back.</span>
          <Button small onClick={control.dismissNotice}>
            Keep them
          </Button>
          <Button small kind="bare" onClick={control.discard}>
            Discard them
          </Button>
        </Tell>
      )}
      {notice?.kind === "followed" && (
        <Tell calm>
          <span>This scenario was edited in another tab at {clockText(notice.at)}; this tab follows. Undo takes it back.</span>
          <Button small onClick={control.dismissNotice}>
            Good
          </Button>
        </Tell>
      )}
      {notice?.kind === "split" && (
        <Tell>
          <span>Another tab edited this scenario at {clockText(notice.other.at)}, and this one did not hear of it. Which of the two goes on?</span>
          <Button small onClick={control.keepMine}>
            What is in this tab
          </Button>
          <Button small onClick={control.takeOther}>
            What the other tab has
          </Button>
        </Tell>
      )}
      {!stored && touched && notice?.kind !== "split" && (
        <Tell>
          <span>This browser does not keep the draft: its storage is full or switched off. Save a revision before you leave.</span>
        </Tell>
      )}
    </>
  );
}

interface CopyNoticeProps {
  copy: DraftCopy;
  onRestore: () => void;
  onDownload: () => void;
  onDrop: () => void;
}

/** The version that gave way to somebody else's. */
export function CopyNotice({ copy, onRestore, onDownload, onDrop }: CopyNoticeProps) {
  return (
    <Tell calm>
      <span>
        Your own version of {clockText(copy.at)}, begun from revision {copy.base}, is kept in this browser.
      </span>
      <Button small onClick={onRestore}>
        Put it on the bench
      </Button>
      <Button small onClick={onDownload}>
        Download it
      </Button>
      <Button small kind="bare" onClick={onDrop}>
        Throw it away
      </Button>
    </Tell>
  );
}
