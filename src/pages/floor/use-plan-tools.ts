/** What a press, a drag and a key on the plan do with the tool in hand. Drags show at once and are put into the draft a few times a second. */
import { type KeyboardEvent, useCallback, useEffect, useMemo, useRef, useState } from "react";
import type { Floor, Obstacle } from "#shared/scenario/floor-schema.ts";
import { type Spot, snapped } from "#src/components/plan/plan-view.ts";
import type { Drag, Hand, Press } from "#src/components/plan/use-plan-hand.ts";
import { useToast } from "#src/components/ui/toast.tsx";
import { useForm } from "#src/pages/scenario/setup/form.tsx";
import {
  addInterferer,
  addNode,
  addObstacle,
  addWayPoint,
  floorOf,
  freeNumber,
  NODES,
  newBlock,
  newInterferer,
  newNode,
  newWall,
  placeInterferer,
  placeNode,
  removeInterferer,
  removeNode,
  removeObstacle,
  shapeObstacle,
  shifted,
  usesOf,
} from "./model/floor-edits.ts";
import { type Studio, selectionOf } from "./use-studio.ts";

/** Something that follows the pointer and is not in the draft yet. */
export type Preview =
  | { kind: "node" | "interferer"; key: number; spot: Spot }
  | { kind: "obstacle"; index: number; obstacle: Obstacle }
  | { kind: "way-point"; node: number; index: number; spot: Spot }
  | { kind: "picture"; spot: Spot }
  | { kind: "line"; from: Spot; until: Spot; as: "wall" | "block" | "measure" };

const COMMIT_MS = 120;
/** Larger floors follow when the pointer is let go: their links take longer than a hand waits. */
const LIVE_NODES = 40;
const LIVE_OBSTACLES = 80;
/** Lines this close to straight become straight. */
const STRAIGHT = 0.06;
const NEAR_M = 0.1;

function straightened(from: Spot, until: Spot): Spot {
  const dx = Math.abs(until.xM - from.xM);
  const dy = Math.abs(until.yM - from.yM);
  if (dy < dx * STRAIGHT) return { ...until, yM: from.yM };
  if (dx < dy * STRAIGHT) return { ...until, xM: from.xM };
  return until;
}

const apart = (a: Spot, b: Spot): number => Math.hypot(a.xM - b.xM, a.yM - b.yM);

export interface PictureTool {
  /** Two points of the picture are asked for. */
  scaling: boolean;
  onPoint: (spot: Spot) => void;
}

export function usePlanTools(floor: Floor, studio: Studio, picture: PictureTool, defaults: { centreMHz: number; bandwidthMHz: number }) {
  const { draft, edit, endStep, readOnly } = useForm();
  const toast = useToast();
  const [preview, setPreview] = useState<Preview | null>(null);
  /** First end of a line that is drawn by two presses. */
  const [begun, setBegun] = useState<Spot | null>(null);
  const [measured, setMeasured] = useState<{ from: Spot; until: Spot } | null>(null);
  const now = useRef({ draft, floor, studio, readOnly, begun, picture, defaults });
  now.current = { draft, floor, studio, readOnly, begun, picture, defaults };
  const { tool } = studio;

  useEffect(() => {
    setBegun(null);
    setPreview(null);
    if (tool !== "measure") setMeasured(null);
  }, [tool]);

  const json = useCallback(() => now.current.draft.json, []);
  const size = useCallback(() => now.current.floor, []);

  /** A drag whose place goes into the draft as one step of undo. */
  const dragOf = useCallback(
    <T>(start: T, at: (spot: Spot) => T, show: (value: T) => Preview, commit: (value: T) => void): Drag => {
      let last = 0;
      let value = start;
      return {
        move(spot) {
          value = at(spot);
          setPreview(show(value));
          const time = performance.now();
          const { nodes, obstacles } = now.current.floor;
          if (time - last < COMMIT_MS || nodes.length > LIVE_NODES || obstacles.length > LIVE_OBSTACLES) return;
          last = time;
          commit(value);
        },
        end(_, moved) {
          if (moved) commit(value);
          setPreview(null);
          endStep();
        },
        cancel() {
          commit(start);
          setPreview(null);
          endStep();
        },
      };
    },
    [endStep],
  );

  const dragNode = useCallback(
    (id: number, spot: Spot): Drag | null => {
      const index = size().nodes.findIndex((node) => node.id === id);
      const node = size().nodes[index];
      if (!node) return null;
      const off = { x: node.xM - spot.xM, y: node.yM - spot.yM };
      return dragOf<Spot>(
        { xM: node.xM, yM: node.yM },
        (at) => snapped({ xM: at.xM + off.x, yM: at.yM + off.y }, size()),
        (at) => ({ kind: "node", key: id, spot: at }),
        (at) => edit(placeNode(json(), index, at, `drag node ${id}`)),
      );
    },
    [dragOf, edit, json, size],
  );

  const dragThing = useCallback(
    ({ thing, spot }: Press): Drag | null => {
      const [kind, a, b] = (thing ?? "").split(":");
      const { interferers, obstacles, nodes } = size();
      if (kind === "node") return dragNode(Number(a), spot);
      if (kind === "interferer") {
        const one = interferers[Number(a)];
        const off = { x: one.xM - spot.xM, y: one.yM - spot.yM };
        return dragOf<Spot>(
          { xM: one.xM, yM: one.yM },
          (at) => snapped({ xM: at.xM + off.x, yM: at.yM + off.y }, size()),
          (at) => ({ kind: "interferer", key: Number(a), spot: at }),
          (at) => edit(placeInterferer(json(), Number(a), at, `drag interferer ${a}`)),
        );
      }
      if (kind === "way") {
        const index = nodes.findIndex(({ id }) => id === Number(a));
        const point = nodes[index]?.wayPoints[Number(b)];
        if (!point) return null;
        return dragOf<Spot>(
          { xM: point.xM, yM: point.yM },
          (at) => snapped(at, size()),
          (at) => ({ kind: "way-point", node: Number(a), index: Number(b), spot: at }),
          (at) =>
            edit({ kind: "set", path: [...NODES, index, "wayPoints", Number(b)], value: { atS: point.atS, ...at }, step: `drag way ${a} ${b}` }),
        );
      }
      if (kind === "handle") {
        const index = Number(a);
        const start = obstacles[index];
        return dragOf<Obstacle>(
          start,
          (at) => reshaped(start, b, snapped(at, size())),
          (obstacle) => ({ kind: "obstacle", index, obstacle }),
          (obstacle) => edit(shapeObstacle(index, obstacle, `drag obstacle ${index}`)),
        );
      }
      if (kind === "obstacle") {
        const index = Number(a);
        const start = obstacles[index];
        const from = snapped(spot, size());
        return dragOf<Obstacle>(
          start,
          (at) => {
            const until = snapped(at, size());
            return shifted(start, until.xM - from.xM, until.yM - from.yM);
          },
          (obstacle) => ({ kind: "obstacle", index, obstacle }),
          (obstacle) => edit(shapeObstacle(index, obstacle, `drag obstacle ${index}`)),
        );
      }
      return null;
    },
    [dragNode, dragOf, edit, json, size],
  );

  const finishLine = useCallback(
    (as: "wall" | "block" | "measure", from: Spot, until: Spot) => {
      if (apart(from, until) < NEAR_M) return;
      if (as === "measure") return setMeasured({ from, until });
      const obstacle = as === "wall" ? newWall(from.xM, from.yM, until.xM, until.yM) : newBlock(from.xM, from.yM, until.xM, until.yM);
      edit(addObstacle(json(), obstacle));
      now.current.studio.select({ kind: "obstacle", index: size().obstacles.length });
    },
    [edit, json, size],
  );

  const lineDrag = useCallback(
    (as: "wall" | "block" | "measure", start: Spot): Drag => {
      const from = snapped(start, size());
      const until = (spot: Spot) => (as === "block" ? snapped(spot, size()) : straightened(from, snapped(spot, size())));
      return {
        move: (spot) => setPreview({ kind: "line", from, until: until(spot), as }),
        end(spot, moved) {
          setPreview(null);
          if (moved) finishLine(as, from, until(spot));
        },
        cancel: () => setPreview(null),
      };
    },
    [finishLine, size],
  );

  const hand: Hand = useMemo(
    () => ({
      press(press) {
        const { studio: here, readOnly: fixed, floor: present, picture: under } = now.current;
        const { tool: inHand, selection } = here;
        if (inHand === "wall" || inHand === "block" || inHand === "measure") return lineDrag(inHand, press.spot);
        if (inHand === "picture" && !under.scaling && present.picture && press.thing === "picture" && !fixed) {
          const start = present.picture;
          const off = { x: start.xM - press.spot.xM, y: start.yM - press.spot.yM };
          const on = (value: number) => Number(value.toFixed(2));
          return dragOf<Spot>(
            { xM: start.xM, yM: start.yM },
            (at) => ({ xM: on(at.xM + off.x), yM: on(at.yM + off.y) }),
            (spot) => ({ kind: "picture", spot }),
            (spot) => edit({ kind: "set", path: ["floor", "picture"], value: { ...start, ...spot }, step: "drag picture" }),
          );
        }
        // A finger looks; it moves nothing by accident.
        if (press.touch || fixed || (inHand !== "select" && inHand !== "way")) return null;
        const [kind, a] = (press.thing ?? "").split(":");
        if (inHand === "way" && kind !== "way") return null;
        if (kind === "obstacle" && !(selection?.kind === "obstacle" && selection.index === Number(a))) return null;
        return dragThing(press);
      },
      tap({ spot, thing }) {
        const { studio: here, begun: start, floor: present, picture: under, readOnly: fixed } = now.current;
        const place = snapped(spot, present);
        switch (here.tool) {
          case "node": {
            const id = freeNumber(present);
            if (id === null) return toast({ text: "A floor has at most 120 nodes." });
            edit(addNode(json(), newNode(id, place.xM, place.yM)));
            return here.select({ kind: "node", id });
          }
          case "interferer":
            edit(addInterferer(json(), newInterferer(place.xM, place.yM, now.current.defaults.centreMHz, now.current.defaults.bandwidthMHz)));
            return here.select({ kind: "interferer", index: present.interferers.length });
          case "wall":
          case "block":
          case "measure":
            if (!start) return setBegun(place);
            setBegun(null);
            setPreview(null);
            return finishLine(here.tool, start, here.tool === "block" ? place : straightened(start, place));
          case "picture":
            if (under.scaling) under.onPoint(spot);
            return;
          case "way": {
            const pressed = selectionOf(thing);
            if (pressed?.kind === "node") return here.select(pressed);
            if (here.selection?.kind !== "node") return toast({ text: "Choose the node that moves first: press on it." });
            const id = here.selection.id;
            const index = present.nodes.findIndex((node) => node.id === id);
            return index >= 0 ? edit(addWayPoint(json(), index, place)) : undefined;
          }
          default: {
            const [kind, a] = (thing ?? "").split(":");
            if (kind === "way") return here.select({ kind: "node", id: Number(a) });
            if (kind === "handle") return;
            if (kind === "picture" && !fixed) return here.select(null);
            return here.select(selectionOf(thing));
          }
        }
      },
      hover(spot) {
        const { begun: start, studio: here, floor: present } = now.current;
        if (!start || !spot) return;
        const { tool: inHand } = here;
        if (inHand !== "wall" && inHand !== "block" && inHand !== "measure") return;
        const until = snapped(spot, present);
        setPreview({ kind: "line", from: start, until: inHand === "block" ? until : straightened(start, until), as: inHand });
      },
    }),
    [lineDrag, dragThing, dragOf, finishLine, edit, toast, json],
  );

  const takeAway = useCallback(
    (thing: string) => {
      const chosen = selectionOf(thing);
      if (!chosen || now.current.readOnly) return;
      const here = json();
      if (chosen.kind === "node") {
        const index = size().nodes.findIndex(({ id }) => id === chosen.id);
        if (index < 0) return;
        const uses = usesOf(here, chosen.id);
        edit(removeNode(here, index));
        toast({
          text:
            uses.length > 0
              ? `Node ${chosen.id} is removed. It was ${uses.join(", ")}: say which node is now. Undo brings it back.`
              : `Node ${chosen.id} is removed; undo brings it back.`,
        });
      } else if (chosen.kind === "obstacle") edit(removeObstacle(here, chosen.index));
      else edit(removeInterferer(here, chosen.index));
      now.current.studio.select(null);
    },
    [edit, toast, json, size],
  );

  /** Keys on a mark: arrows move it by 0.1 m, with Shift by 1 m; Delete takes it away. */
  const onKey = useCallback(
    (thing: string, event: KeyboardEvent) => {
      if (event.ctrlKey || event.metaKey || event.altKey) return;
      const chosen = selectionOf(thing);
      if (!chosen) return;
      if (event.key === "Enter" || event.key === " ") {
        event.preventDefault();
        event.stopPropagation();
        now.current.studio.select(chosen);
        return;
      }
      if (now.current.readOnly) return;
      if (event.key === "Delete" || event.key === "Backspace") {
        event.preventDefault();
        event.stopPropagation();
        takeAway(thing);
        return;
      }
      const by = event.shiftKey ? 1 : 0.1;
      const dx = event.key === "ArrowLeft" ? -by : event.key === "ArrowRight" ? by : 0;
      const dy = event.key === "ArrowUp" ? -by : event.key === "ArrowDown" ? by : 0;
      if ((dx === 0 && dy === 0) || chosen.kind === "obstacle") return;
      event.preventDefault();
      event.stopPropagation();
      const present = floorOf(json()) ?? size();
      if (chosen.kind === "node") {
        const index = present.nodes.findIndex(({ id }) => id === chosen.id);
        const node = present.nodes[index];
        if (node) edit(placeNode(json(), index, snapped({ xM: node.xM + dx, yM: node.yM + dy }, present), `key node ${chosen.id}`));
      } else {
        const one = present.interferers[chosen.index];
        if (one)
          edit(placeInterferer(json(), chosen.index, snapped({ xM: one.xM + dx, yM: one.yM + dy }, present), `key interferer ${chosen.index}`));
      }
    },
    [edit, takeAway, json, size],
  );

  const leave = useCallback(() => {
    const { studio: here, begun: start } = now.current;
    setPreview(null);
    if (start) setBegun(null);
    else if (here.tool !== "select") here.setTool("select");
    else here.select(null);
    setMeasured(null);
  }, []);

  return { hand, preview, begun, measured, onKey, takeAway, escape: leave };
}

/** A wall with one end elsewhere, a block with one corner elsewhere. */
function reshaped(obstacle: Obstacle, corner: string, { xM, yM }: Spot): Obstacle {
  if (obstacle.type === "wall") {
    const other = corner === "from" ? { xM: obstacle.toXM, yM: obstacle.toYM } : { xM: obstacle.fromXM, yM: obstacle.fromYM };
    const at = straightened(other, { xM, yM });
    if (apart(at, other) < NEAR_M) return obstacle;
    return corner === "from" ? { ...obstacle, fromXM: at.xM, fromYM: at.yM } : { ...obstacle, toXM: at.xM, toYM: at.yM };
  }
  const right = obstacle.xM + obstacle.widthM;
  const bottom = obstacle.yM + obstacle.depthM;
  const fixedX = corner.includes("e") ? obstacle.xM : right;
  const fixedY = corner.includes("s") ? obstacle.yM : bottom;
  return { ...newBlock(fixedX, fixedY, xM, yM), name: obstacle.name, lossDb: obstacle.lossDb };
}
