import { Dialog as Radix } from "radix-ui";
import { type ReactNode, useRef } from "react";
import { Button } from "./button.tsx";

export interface DialogProps {
  open: boolean;
  onOpenChange: (open: boolean) => void;
  title: string;
  /** One or two sentences under the title. */
  text?: ReactNode;
  children?: ReactNode;
  /** The row of buttons at the end; "Cancel" is put before them unless `cancel` is null. */
  actions?: ReactNode;
  cancel?: string | null;
  broad?: boolean;
  /** Over other dialogs, and not closed by a press beside it or by Escape. */
  above?: boolean;
}

export function Dialog({ open, onOpenChange, title, text, children, actions, cancel = "Cancel", broad, above }: DialogProps) {
  const shut = above ? (event: Event) => event.preventDefault() : undefined;
  // A press that begins on a text inside and ends on the veil (selecting words) closes nothing.
  const veil = useRef<HTMLDivElement>(null);
  return (
    <Radix.Root open={open} onOpenChange={onOpenChange}>
      <Radix.Portal>
        <Radix.Overlay className={`veil ${above ? "topmost" : ""}`} ref={veil}>
          <Radix.Content
            className={`dialog ${broad ? "broad" : ""}`}
            aria-describedby={undefined}
            onEscapeKeyDown={shut}
            onInteractOutside={shut}
            onPointerDownOutside={(event) => {
              const { clientX } = event.detail.originalEvent;
              // The veil scrolls: its scroll bar is no press beside the dialog.
              if (veil.current && clientX > veil.current.clientWidth) event.preventDefault();
            }}
          >
            <Radix.Title>{title}</Radix.Title>
            {text && <div className="second">{text}</div>}
            {children}
            {(actions || cancel) && (
              <div className="row">
                {cancel && (
                  <Radix.Close asChild>
                    <Button kind="bare">{cancel}</Button>
                  </Radix.Close>
                )}
                {actions}
              </div>
            )}
          </Radix.Content>
        </Radix.Overlay>
      </Radix.Portal>
    </Radix.Root>
  );
}
