import { useCallback, useSyncExternalStore } from "react";

/** Does the query hold now? Renders again when that changes. */
export function useMedia(query: string): boolean {
  const subscribe = useCallback(
    (listener: () => void) => {
      const media = matchMedia(query);
      media.addEventListener("change", listener);
      return () => media.removeEventListener("change", listener);
    },
    [query],
  );
  return useSyncExternalStore(subscribe, () => matchMedia(query).matches);
}

/** Phones: below this a table becomes a list. Same width as in tokens.css. */
export const useNarrow = (): boolean => useMedia("(max-width: 719px)");
