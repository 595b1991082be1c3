import { type KeyboardEvent, type RefObject, useCallback, useId, useMemo } from "react";
import { placeAt, wayOf } from "#shared/network/geometry.ts";
import type { LinkRow } from "#shared/network/link-table.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import {
  type Contour,
  type FoulGround,
  FoulLayer,
  FrontLayer,
  Hall,
  HallClip,
  HallOutline,
  interfererWords,
  LEAST_DRAWN,
  LinkLayer,
  ObstacleLayer,
  PictureLayer,
  type PictureUnder,
  PlanTextures,
  WaterLayer,
  WayLayer,
} from "#src/components/plan/ground.tsx";
import { type Glyph, type NodeState, STATE_WORDS } from "#src/components/plan/marks.tsx";
import { Plan, type PlanHandle, type PlanScene } from "#src/components/plan/plan.tsx";
import { type MarkedInterferer, type MarkedNode, Marks } from "#src/components/plan/plan-marks.tsx";
import type { Spot } from "#src/components/plan/plan-view.ts";
import { ScaleBar } from "#src/components/plan/scale-bar.tsx";
import { counted, fixed, significant, withUnit } from "#src/lib/format.ts";
import { useMedia } from "#src/lib/use-media.ts";
import { activityText } from "#src/pages/scenario/model/floor-words.ts";
import { type RoleAt, roleText } from "./model/floor-names.ts";
import { Overlays } from "./plan-overlays.tsx";
import type { Preview, usePlanTools } from "./use-plan-tools.ts";
import { type Studio, selectionOf } from "./use-studio.ts";

export interface PlanPaneProps {
  floor: Floor;
  studio: Studio;
  tools: ReturnType<typeof usePlanTools>;
  roles: ReadonlyMap<number, readonly RoleAt[]>;
  links: readonly LinkRow[] | null;
  /** By node, in the floor's order; null: no flood is shown. */
  states: readonly NodeState[] | null;
  contours: readonly Contour[] | null;
  fouled: readonly FoulGround[];
  step: number;
  /** Instant at which moving nodes are shown. */
  atS: number;
  /** By node number: what a survey says of it. */
  surveyed: ReadonlyMap<number, { text: string; weak: boolean }> | null;
  picture: PictureUnder | null;
  scalingPoints: readonly Spot[];
  label: string;
  readOnly: boolean;
  plan: RefObject<PlanHandle | null>;
  onWhole: (whole: boolean) => void;
}

const HELP =
  "Arrow keys move the view, plus and minus zoom, 0 shows the whole plan. Tab goes from node to node; arrow keys move the node that has the focus by 0.1 m, with Shift by 1 m, Delete removes it.";
const MOST_NOTES = 80;

/** Floor, flood and selection as the plan draws them. */
export function PlanPane(props: PlanPaneProps) {
  const { floor, studio, tools, roles, links, states, contours, fouled, step, atS, surveyed, picture, scalingPoints, label, readOnly, plan } = props;
  const { selection, tool, select } = studio;
  const { preview } = tools;
  const prefix = `pl${useId().replace(/\W/g, "")}`;
  const phone = useMedia("(max-width: 719px)");
  const shown = useMemo(() => withPreview(floor, preview), [floor, preview]);
  const selectedNode = selection?.kind === "node" ? selection.id : null;

  const spots = useMemo(() => spotsAt(shown, atS), [shown, atS]);
  const nodes = useMemo(
    () =>
      shown.nodes.map((node, i): MarkedNode => {
        const role = roleText(roles.get(node.id));
        const state = states?.[i] ?? "plain";
        const survey = surveyed?.get(node.id);
        return {
          id: node.id,
          ...spots[i],
          name: survey && !node.name ? survey.text : survey ? `${node.name} ${survey.text}` : node.name,
          state,
          weak: survey?.weak,
          glyphs: glyphsOf(roles.get(node.id)),
          important: roles.has(node.id) || survey?.weak,
          words: [
            `Node ${node.id}${node.name ? ` ${node.name}` : ""}`,
            role,
            `${withUnit(fixed(spots[i].xM, 1), "m")} across`,
            `${withUnit(fixed(spots[i].yM, 1), "m")} down`,
            ...(STATE_WORDS[state] ? [STATE_WORDS[state]] : []),
            ...(survey ? [`received ${survey.text}`] : []),
          ].join(", "),
        };
      }),
    [shown, spots, roles, states, surveyed],
  );
  const interferers = useMemo(
    () =>
      shown.interferers.map((one, index): MarkedInterferer => {
        const text = `${interfererWords(one, index)}, ${activityText(one.activity)}`;
        return {
          index,
          xM: one.xM,
          yM: one.yM,
          name: text,
          words: `${text}, ${withUnit(fixed(one.xM, 1), "m")} across, ${withUnit(fixed(one.yM, 1), "m")} down`,
        };
      }),
    [shown],
  );
  const drawnLinks = useMemo(() => {
    if (selectedNode === null || !links) return [];
    const place = new Map(shown.nodes.map(({ id }, i) => [id, spots[i]]));
    const from = place.get(selectedNode);
    return links.flatMap(({ from: sender, to, prr }) => {
      const until = place.get(to);
      return sender === selectedNode && prr >= LEAST_DRAWN && from && until ? [{ to, prr, from, until }] : [];
    });
  }, [links, selectedNode, shown, spots]);

  const onFocus = useCallback(
    (thing: string) => {
      const chosen = selectionOf(thing);
      if (tool !== "picture") select(chosen);
      const at = chosen?.kind === "node" ? shown.nodes.find(({ id }) => id === chosen.id) : chosen ? shown.interferers[chosen.index] : null;
      // By keys one may come to what is out of sight.
      if (at && document.activeElement?.matches(":focus-visible")) plan.current?.show(at);
    },
    [select, shown, plan, tool],
  );
  const { onKey: toolKey } = tools;
  const onKey = useCallback((thing: string, event: KeyboardEvent) => toolKey(thing, event), [toolKey]);

  const size = { widthM: floor.widthM, depthM: floor.depthM };
  const selectedObstacle = selection?.kind === "obstacle" ? selection.index : null;
  const notes = (scene: PlanScene) => notesOf(shown, scene, selection?.kind === "obstacle" ? selection.index : null);
  return (
    <Plan
      ref={plan}
      size={size}
      label={label}
      help={readOnly ? HELP.replace(/; arrow keys.*/, ".") : HELP}
      mostHeightPx={phone ? Math.round(window.innerHeight * 0.58) : 620}
      hand={tools.hand}
      pointer={tool === "select" ? "select" : "draw"}
      onEscape={tools.escape}
      onView={props.onWhole}
      ground={(scene) => (
        <>
          <PlanTextures scale={scene.view.scale} prefix={prefix} />
          <Hall size={scene.size} />
          {picture && <PictureLayer picture={preview?.kind === "picture" ? { ...picture, ...preview.spot } : picture} />}
          <HallClip size={scene.size} prefix={prefix} />
          <g clipPath={`url(#${prefix}-hall)`}>
            {contours && tool !== "picture" && (
              <g className={picture ? "pl-shallow" : undefined}>
                <WaterLayer contours={contours} step={step} />
              </g>
            )}
            <FoulLayer fouled={fouled} prefix={prefix} />
            {contours && <FrontLayer contours={contours} step={step} />}
          </g>
          <ObstacleLayer obstacles={shown.obstacles} selected={selectedObstacle} prefix={prefix} />
          <HallOutline size={scene.size} />
          <WayLayer nodes={shown.nodes} selected={selectedNode} />
          <LinkLayer links={drawnLinks} />
        </>
      )}
      marks={(scene) => (
        <>
          <Overlays {...{ scene, floor: shown, tools, selection, readOnly, contours, step, scalingPoints }} />
          <Marks
            scene={scene}
            nodes={nodes}
            interferers={interferers}
            selectedNode={selectedNode}
            selectedInterferer={selection?.kind === "interferer" ? selection.index : null}
            notes={notes(scene)}
            onKey={onKey}
            onFocus={onFocus}
          />
          <ScaleBar scene={scene} />
        </>
      )}
    />
  );
}

const ORDER: readonly Glyph[] = ["sensor", "controller", "actuator", "beacon"];
const glyphsOf = (roles: readonly RoleAt[] | undefined): Glyph[] | undefined =>
  roles && ORDER.filter((glyph) => roles.some(({ role }) => role === glyph));

/** The floor as it looks while something is dragged. */
function withPreview(floor: Floor, preview: Preview | null): Floor {
  if (!preview) return floor;
  if (preview.kind === "node") return { ...floor, nodes: floor.nodes.map((node) => (node.id === preview.key ? { ...node, ...preview.spot } : node)) };
  if (preview.kind === "interferer")
    return { ...floor, interferers: floor.interferers.map((one, i) => (i === preview.key ? { ...one, ...preview.spot } : one)) };
  if (preview.kind === "obstacle") return { ...floor, obstacles: floor.obstacles.map((one, i) => (i === preview.index ? preview.obstacle : one)) };
  if (preview.kind === "way-point")
    return {
      ...floor,
      nodes: floor.nodes.map((node) =>
        node.id === preview.node
          ? { ...node, wayPoints: node.wayPoints.map((point, i) => (i === preview.index ? { ...point, ...preview.spot } : point)) }
          : node,
      ),
    };
  return floor;
}

function spotsAt(floor: Floor, atS: number): Spot[] {
  const out = new Float64Array(3);
  return floor.nodes.map((node) => {
    if (node.wayPoints.length === 0) return { xM: node.xM, yM: node.yM };
    placeAt(wayOf(node), atS, out);
    return { xM: out[0], yM: out[1] };
  });
}

interface Note {
  key: string;
  at: Spot;
  text: string;
  quiet?: boolean;
}

/** Names and losses of walls and blocks, as long as they do not cover the plan; times of way-points. */
function notesOf(floor: Floor, { view }: PlanScene, selected: number | null): Note[] {
  const notes: Note[] = [];
  for (const { id, wayPoints } of floor.nodes)
    wayPoints.forEach((point, i) => {
      notes.push({ key: `way ${id} ${i}`, at: point, text: withUnit(significant(point.atS, 4), "s") });
    });
  floor.obstacles.forEach((obstacle, i) => {
    const across =
      obstacle.type === "wall"
        ? Math.hypot(obstacle.toXM - obstacle.fromXM, obstacle.toYM - obstacle.fromYM)
        : Math.max(obstacle.widthM, obstacle.depthM);
    if (i !== selected && (across * view.scale < 46 || notes.length > MOST_NOTES)) return;
    const at =
      obstacle.type === "wall"
        ? { xM: (obstacle.fromXM + obstacle.toXM) / 2, yM: (obstacle.fromYM + obstacle.toYM) / 2 }
        : { xM: obstacle.xM + obstacle.widthM / 2, yM: obstacle.yM + obstacle.depthM };
    const loss = withUnit(significant(obstacle.lossDb, 3), "dB");
    notes.push({ key: `obstacle ${i}`, at, text: obstacle.name ? `${obstacle.name}, ${loss}` : loss, quiet: true });
  });
  return notes;
}

export const planLabel = (floor: Floor, flood: string | null): string =>
  `Plan of ${floor.name || "the floor"}, ${withUnit(significant(floor.widthM, 4), "m")} across and ${withUnit(significant(floor.depthM, 4), "m")} down, ${counted(floor.nodes.length, "node")}${flood ? `; ${flood}` : ""}`;
