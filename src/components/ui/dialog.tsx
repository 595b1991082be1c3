import { Dialog as Radix } from "radix-ui";
import { type ReactNode, useLayoutEffect, useRef } from "react";
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
  /** As wide as a picture of a round needs. */
  wide?: boolean;
  /** Over other dialogs, and not closed by a press beside it or by Escape. */
  above?: boolean;
}

/** An entry of a menu is gone when its dialog closes; the button of the menu stays. */
function lasting(element: Element | null): Element | null {
  const button = element?.closest("[role=menu]")?.getAttribute("aria-labelledby");
  return button ? document.getElementById(button) : element;
}

export function Dialog({ open, onOpenChange, title, text, children, actions, cancel = "Cancel", broad, wide, above }: DialogProps) {
  const shut = above ? (event: Event) => event.preventDefault() : undefined;
  // A press that begins on a text inside and ends on the veil (selecting words) closes nothing.
  const veil = useRef<HTMLDivElement>(null);
  // Dialogs are opened by state, not by a trigger inside them, so that the way back has to be remembered here: before the
  // portal fills, since a field in it may take the focus at once.
  const before = useRef<Element | null>(null);
  useLayoutEffect(() => {
    if (open) before.current = lasting(document.activeElement);
  }, [open]);
  return (
    <Radix.Root open={open} onOpenChange={onOpenChange}>
      <Radix.Portal>
        <Radix.Overlay className={`veil ${above ? "topmost" : ""}`} ref={veil}>
          <Radix.Content
            className={`dialog ${wide ? "wide" : broad ? "broad" : ""}`}
            aria-describedby={undefined}
            onCloseAutoFocus={(event) => {
              event.preventDefault();
              const back = before.current?.isConnected ? before.current : document.getElementById("main");
              if (back instanceof HTMLElement) back.focus({ preventScroll: true });
            }}
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
