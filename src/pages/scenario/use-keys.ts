import { useEffect, useRef } from "react";

interface Keys {
  undo: () => void;
  redo: () => void;
  save: () => void;
}

const inDialog = (target: EventTarget | null): boolean => target instanceof Element && target.closest("[role=dialog]") !== null;

/** Ctrl or Cmd with Z, Shift+Z, Y and S, everywhere on the page but in dialogs, whose own texts have their own undo. */
export function useKeys(keys: Keys): void {
  const now = useRef(keys);
  now.current = keys;
  useEffect(() => {
    const onKeyDown = (event: KeyboardEvent) => {
      if (!(event.ctrlKey || event.metaKey) || event.altKey || inDialog(event.target) || document.querySelector("[role=dialog]")) return;
      const key = event.key.toLowerCase();
      const act =
        key === "z" ? (event.shiftKey ? now.current.redo : now.current.undo) : key === "y" ? now.current.redo : key === "s" ? now.current.save : null;
      if (!act) return;
      event.preventDefault();
      act();
    };
    document.addEventListener("keydown", onKeyDown);
    return () => document.removeEventListener("keydown", onKeyDown);
  }, []);
}
