import { useSyncExternalStore } from "react";

const query = () => window.matchMedia("(max-width: 719px)");
const subscribe = (changed: () => void) => {
  const media = query();
  media.addEventListener("change", changed);
  return () => media.removeEventListener("change", changed);
};

/** Narrow as a phone: fewer buttons in sight, the rest in the menu. */
export const usePhone = (): boolean => useSyncExternalStore(subscribe, () => query().matches);
