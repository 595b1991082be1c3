/** Light, dark, or as the system has it. src/public/theme.js sets a chosen one before the first paint; same key. */
import { useSyncExternalStore } from "react";

export const THEMES = ["system", "light", "dark"] as const;
export type Theme = (typeof THEMES)[number];
const KEY = "holdfast.theme";

const listeners = new Set<() => void>();
const darkSystem = () => matchMedia("(prefers-color-scheme: dark)").matches;

function stored(): Theme {
  const chosen = document.documentElement.dataset.theme;
  return chosen === "light" || chosen === "dark" ? chosen : "system";
}

function show(theme: Theme) {
  if (theme === "system") delete document.documentElement.dataset.theme;
  else document.documentElement.dataset.theme = theme;
  for (const listener of listeners) listener();
}

export function setTheme(theme: Theme) {
  try {
    if (theme === "system") localStorage.removeItem(KEY);
    else localStorage.setItem(KEY, theme);
  } catch {
    // Storage is switched off: the choice holds until the page is left.
  }
  show(theme);
}

/** From what is seen now to the other. */
export function turnTheme() {
  const dark = stored() === "system" ? darkSystem() : stored() === "dark";
  setTheme(dark ? "light" : "dark");
}

function subscribe(listener: () => void) {
  // Chosen in another tab.
  const follow = (event: StorageEvent) => {
    if (event.key === KEY) show(event.newValue === "light" || event.newValue === "dark" ? event.newValue : "system");
  };
  listeners.add(listener);
  window.addEventListener("storage", follow);
  return () => {
    listeners.delete(listener);
    window.removeEventListener("storage", follow);
  };
}

export const useTheme = (): Theme => useSyncExternalStore(subscribe, stored);
