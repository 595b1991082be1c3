/** Marks on a plan, drawn in pixels so that they keep their size. */
import { type KeyboardEvent, memo } from "react";
import { measureWith, pageFace } from "#src/components/plots/measure.ts";
import { HIDDEN } from "./hidden.ts";
import { type LabelAsk, type LabelPlace, placeLabels } from "./label-places.ts";
import { type Glyph, GlyphShape, InterfererShape, NodeShape, type NodeState } from "./marks.tsx";
import type { PlanScene } from "./plan.tsx";
import type { Spot } from "./plan-view.ts";

export interface MarkedNode extends Spot {
  id: number;
  /** Under the mark: "Controller". */
  name: string;
  /** Said by screen readers: all that the mark shows. */
  words: string;
  state: NodeState;
  /** Ringed: it receives less than it should. */
  weak?: boolean;
  /** What runs on it, in a row beside the mark. */
  glyphs?: readonly Glyph[];
  /** Named even where names are close together. */
  important?: boolean;
}

export interface MarkedInterferer extends Spot {
  index: number;
  name: string;
  words: string;
}

interface NodeMarksProps {
  scene: PlanScene;
  nodes: readonly MarkedNode[];
  interferers: readonly MarkedInterferer[];
  selectedNode: number | null;
  selectedInterferer: number | null;
  /** Further words on the plan that keep their places: of walls, way-points. */
  notes: readonly { key: string; at: Spot; text: string; quiet?: boolean }[];
  /** "node:7", "interferer:0" */
  onKey: (thing: string, event: KeyboardEvent) => void;
  onFocus: (thing: string) => void;
}

const CLEAR = 11;
const inside = ({ frame }: PlanScene, { x, y }: { x: number; y: number }, air: number) =>
  x > frame.left - air && x < frame.left + frame.width + air && y > frame.top - air && y < frame.top + frame.height + air;

export function Marks(props: NodeMarksProps) {
  const { scene, nodes, interferers, selectedNode, selectedInterferer, notes } = props;
  const measure = measureWith(pageFace());
  const { frame } = scene;
  const nodeSpots = nodes.map((node) => scene.at(node));
  const interfererSpots = interferers.map((one) => scene.at(one));
  const noteSpots = notes.map(({ at }) => scene.at(at));
  const marks = [...nodeSpots.map((at) => ({ at, half: CLEAR })), ...interfererSpots.map((at) => ({ at, half: CLEAR }))];
  // The names that matter most find their places first.
  const order = nodes.map((_, i) => i).sort((a, b) => Number(nodes[b].important ?? false) - Number(nodes[a].important ?? false));
  const asked: (LabelAsk | null)[] = [
    ...order.map((i) =>
      nodes[i].name && inside(scene, nodeSpots[i], 0) ? { at: nodeSpots[i], width: measure(nodes[i].name, "axis") * 1.08, clear: CLEAR } : null,
    ),
    ...interferers.map(({ name }, i) =>
      inside(scene, interfererSpots[i], 0) ? { at: interfererSpots[i], width: measure(name, "axis") * 1.08, clear: 13 } : null,
    ),
    ...notes.map(({ text }, i) => (inside(scene, noteSpots[i], 0) ? { at: noteSpots[i], width: measure(text, "axis"), clear: 0 } : null)),
  ];
  const bounds = { left: frame.left + 2, right: frame.left + frame.width - 2, top: frame.top + 2, bottom: frame.top + frame.height - 2 };
  const places = placeLabels(asked, marks, bounds);
  const nodeLabel = new Map(order.map((i, k) => [i, places[k]]));
  return (
    <>
      <g {...HIDDEN}>
        {notes.map(({ key, text, quiet }, i) => {
          const place = places[nodes.length + interferers.length + i];
          return (
            place && (
              <text
                key={key}
                x={noteSpots[i].x + place.dx}
                y={noteSpots[i].y + place.dy}
                textAnchor={place.anchor}
                className={`${quiet ? "axm" : "ax"} halo2`}
              >
                {text}
              </text>
            )
          );
        })}
      </g>
      <g>
        {interferers.map((one, i) => {
          const place = places[nodes.length + i];
          return (
            <Mark
              key={one.index}
              thing={`interferer:${one.index}`}
              words={one.words}
              selected={one.index === selectedInterferer}
              x={interfererSpots[i].x}
              y={interfererSpots[i].y}
              onKey={props.onKey}
              onFocus={props.onFocus}
              {...labelOf(place, one.name)}
            />
          );
        })}
      </g>
      <g>
        {nodes.map((node, i) => {
          const place = nodeLabel.get(i);
          return (
            <Mark
              key={node.id}
              thing={`node:${node.id}`}
              words={node.words}
              selected={node.id === selectedNode}
              x={nodeSpots[i].x}
              y={nodeSpots[i].y}
              onKey={props.onKey}
              onFocus={props.onFocus}
              {...labelOf(place, node.name, node.state === "lost" ? 16 : 0)}
              state={node.state}
              weak={node.weak}
              number={node.id}
              glyphs={node.glyphs?.join(" ")}
            />
          );
        })}
      </g>
    </>
  );
}

type Anchor = LabelPlace["anchor"];

/** Flat, so that a mark that did not change is not drawn again. `beside`: room for a number that stands outside its mark. */
const labelOf = (place: LabelPlace | null | undefined, text: string, beside = 0) =>
  place ? { text, dx: place.anchor === "start" ? place.dx + beside : place.dx, dy: place.dy, anchor: place.anchor } : {};

interface MarkProps {
  thing: string;
  words: string;
  selected: boolean;
  x: number;
  y: number;
  onKey: (thing: string, event: KeyboardEvent) => void;
  onFocus: (thing: string) => void;
  text?: string;
  dx?: number;
  dy?: number;
  anchor?: Anchor;
  /** Of a node; an interferer has none. */
  state?: NodeState;
  weak?: boolean;
  number?: number;
  /** Names with spaces between: a text, so that the same stays the same. */
  glyphs?: string;
}

const GLYPH_PX = 11;

const Mark = memo(function Mark({ thing, words, selected, x, y, onKey, onFocus, text, dx, dy, anchor, state, weak, number, glyphs }: MarkProps) {
  return (
    <>
      {/* biome-ignore lint/a11y/useSemanticElements: a mark of an SVG picture cannot be a button element */}
      <g
        role="button"
        tabIndex={0}
        aria-label={words}
        aria-pressed={selected}
        data-thing={thing}
        className="pl-node"
        transform={`translate(${x.toFixed(1)} ${y.toFixed(1)})`}
        onKeyDown={(event) => onKey(thing, event)}
        onFocus={() => onFocus(thing)}
      >
        <circle r="16" className="pl-tap" />
        {selected && <circle r="17" className="pl-sel" />}
        <circle r="15" className="pl-hover" />
        <circle r={selected ? 21 : 17} className="pl-focus" />
        {weak && <circle r="14" className="pl-weak" />}
        {state ? <NodeShape state={state} label={number} /> : <InterfererShape />}
        {glyphs && <Glyphs names={glyphs.split(" ") as Glyph[]} />}
      </g>
      {text && (
        <text x={x + (dx ?? 0)} y={y + (dy ?? 0)} textAnchor={anchor} className="pl-name halo2" {...HIDDEN}>
          {text}
        </text>
      )}
    </>
  );
});

function Glyphs({ names }: { names: readonly Glyph[] }) {
  return (
    <g transform="translate(13 -12)">
      <rect x="-6" y="-6.5" width={names.length * GLYPH_PX + 1} height="13" rx="6" className="pl-gback" />
      {names.map((glyph, i) => (
        <g key={glyph} transform={`translate(${i * GLYPH_PX} 0)`}>
          <GlyphShape glyph={glyph} />
        </g>
      ))}
    </g>
  );
}
