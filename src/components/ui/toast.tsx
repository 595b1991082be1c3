import { createContext, type ReactNode, useCallback, useContext, useEffect, useRef, useState } from "react";
import { Link } from "react-router-dom";
import { Icon } from "./icon.tsx";

export interface Toast {
  /** One sentence about what is already done. */
  text: ReactNode;
  action?: { word: string; onPress: () => void } | { word: string; to: string };
}

const SHOWN_MS = 7000;
const ToastContext = createContext<((toast: Toast) => void) | null>(null);

export function useToast(): (toast: Toast) => void {
  const show = useContext(ToastContext);
  if (!show) throw new Error("useToast: no ToastProvider above this component.");
  return show;
}

/** One slip at a time: a newer one takes the place of the older. It stays while the pointer or the focus is on it. */
export function ToastProvider({ children }: { children: ReactNode }) {
  const [toast, setToast] = useState<(Toast & { key: number }) | null>(null);
  const [held, setHeld] = useState(false);
  const count = useRef(0);
  const show = useCallback((next: Toast) => {
    count.current += 1;
    setToast({ ...next, key: count.current });
  }, []);
  const shut = useCallback(() => {
    setToast(null);
    setHeld(false);
  }, []);

  useEffect(() => {
    if (!toast || held) return;
    const timer = setTimeout(shut, SHOWN_MS);
    return () => clearTimeout(timer);
  }, [toast, held, shut]);

  return (
    <ToastContext value={show}>
      {children}
      {/* The live region is there before its text, or the text is not read out. */}
      <div role="status" aria-live="polite" className="noprint">
        {toast && (
          // biome-ignore lint/a11y/noStaticElementInteractions: only holds the slip while it is being read or used
          <div
            key={toast.key}
            className="toast"
            onPointerEnter={() => setHeld(true)}
            onPointerLeave={() => setHeld(false)}
            onFocus={() => setHeld(true)}
            onBlur={() => setHeld(false)}
          >
            <Icon name="check" />
            <span>{toast.text}</span>
            {toast.action && "to" in toast.action && (
              <Link to={toast.action.to} onClick={shut}>
                {toast.action.word}
              </Link>
            )}
            {toast.action && "onPress" in toast.action && (
              <button
                type="button"
                onClick={() => {
                  const { action } = toast;
                  shut();
                  if (action && "onPress" in action) action.onPress();
                }}
              >
                {toast.action.word}
              </button>
            )}
            <button type="button" className="shut" aria-label="Close this message" onClick={shut}>
              <Icon name="cross" size={14} />
            </button>
          </div>
        )}
      </div>
    </ToastContext>
  );
}
