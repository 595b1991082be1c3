import { useCallback, useState } from "react";

export const TOOLS = ["select", "node", "wall", "block", "interferer", "way", "measure", "picture"] as const;
export type Tool = (typeof TOOLS)[number];

export type Selection = { kind: "node"; id: number } | { kind: "obstacle"; index: number } | { kind: "interferer"; index: number } | null;

/** "node:7", "obstacle:2", "interferer:0" */
export function selectionOf(thing: string | null): Selection {
  const [kind, at] = (thing ?? "").split(":");
  if (kind === "node") return { kind, id: Number(at) };
  if (kind === "obstacle" || kind === "interferer") return { kind, index: Number(at) };
  return null;
}
export const thingOf = (selection: Selection): string | null =>
  selection && (selection.kind === "node" ? `node:${selection.id}` : `${selection.kind}:${selection.index}`);

/** The tool in hand and what is selected. */
export function useStudio() {
  const [tool, setTool] = useState<Tool>("select");
  const [selection, setSelection] = useState<Selection>(null);
  const select = useCallback((next: Selection) => setSelection((before) => (thingOf(before) === thingOf(next) ? before : next)), []);
  return { tool, setTool, selection, select };
}
export type Studio = ReturnType<typeof useStudio>;
