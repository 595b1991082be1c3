import { type RefObject, useRef } from "react";
import { useWidth } from "#src/components/plots/measure.ts";

/** The width that a picture may take; until it is known (and in tests), a middle one. */
export function usePictureWidth(): [RefObject<HTMLDivElement | null>, number] {
  const host = useRef<HTMLDivElement>(null);
  return [host, useWidth(host) || 640];
}
