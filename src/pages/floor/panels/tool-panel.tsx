/** Each tool as a form: what a press on the plan does can be typed instead. */
import { type FormEvent, useState } from "react";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Field, type Problem } from "#src/components/ui/field.tsx";
import { Section } from "#src/components/ui/section.tsx";
import { significant } from "#src/lib/format.ts";
import { siUnit, toStored } from "#src/pages/scenario/model/screen-unit.ts";
import { useForm } from "#src/pages/scenario/setup/form.tsx";
import { addInterferer, addNode, addObstacle, addWayPoint, freeNumber, newBlock, newInterferer, newNode, newWall } from "../model/floor-edits.ts";
import type { Studio, Tool } from "../use-studio.ts";

const METRES = siUnit("m");

interface Asked {
  key: string;
  label: string;
  symbol?: string;
  most: number;
  first: number;
}

const WORDS: Record<Exclude<Tool, "select" | "picture">, { title: string; how: string; act: string }> = {
  node: { title: "Add nodes", how: "Press on the plan where a node stands, or type its place.", act: "Add the node" },
  wall: {
    title: "Draw walls",
    how: "Drag from one end to the other, press both ends one after the other, or type them. A link that crosses the wall loses its dB once.",
    act: "Add the wall",
  },
  block: { title: "Draw blocks", how: "Racks, machines, lift shafts: drag from corner to corner, or type them.", act: "Add the block" },
  interferer: {
    title: "Place interferers",
    how: "Press where it stands, or type its place; band, power and when it sends are asked next.",
    act: "Add the interferer",
  },
  way: {
    title: "Draw a way",
    how: "Choose the node that moves, then press along its way; times follow at walking pace and can be typed.",
    act: "Add the way-point",
  },
  measure: { title: "Measure", how: "Drag a line, or press both ends: its length and what it crosses stand beside it.", act: "" },
};

interface ToolPanelProps {
  floor: Floor;
  studio: Studio;
  defaults: { centreMHz: number; bandwidthMHz: number };
}

export function ToolPanel({ floor, studio, defaults }: ToolPanelProps) {
  const { tool, selection, select } = studio;
  const { draft, edit } = useForm();
  if (tool === "select" || tool === "picture") return null;
  const { title, how, act } = WORDS[tool];
  const middle = { x: Number((floor.widthM / 2).toFixed(1)), y: Number((floor.depthM / 2).toFixed(1)) };
  const place: Asked[] = [
    { key: "x", label: "Across", symbol: "x", most: floor.widthM, first: middle.x },
    { key: "y", label: "Down", symbol: "y", most: floor.depthM, first: middle.y },
  ];
  const ends: Asked[] = [
    { key: "ax", label: "From, across", most: floor.widthM, first: 0 },
    { key: "ay", label: "From, down", most: floor.depthM, first: middle.y },
    { key: "bx", label: "To, across", most: floor.widthM, first: middle.x },
    { key: "by", label: "To, down", most: floor.depthM, first: middle.y },
  ];
  const asked = tool === "measure" ? [] : tool === "wall" || tool === "block" ? ends : place;
  const { json } = draft;
  const moving = selection?.kind === "node" ? floor.nodes.findIndex(({ id }) => id === selection.id) : -1;
  const impossible =
    tool === "node" && freeNumber(floor) === null
      ? "A floor has at most 120 nodes."
      : (tool === "wall" || tool === "block") && floor.obstacles.length >= 500
        ? "At most 500 walls and blocks."
        : tool === "interferer" && floor.interferers.length >= 50
          ? "At most 50 interferers."
          : tool === "way" && moving < 0
            ? "Choose the node that moves first."
            : null;
  const add = (v: Record<string, number>) => {
    if (tool === "node") {
      const id = freeNumber(floor);
      if (id === null) return;
      edit(addNode(json, newNode(id, v.x, v.y)));
      select({ kind: "node", id });
    } else if (tool === "wall" || tool === "block") {
      edit(addObstacle(json, tool === "wall" ? newWall(v.ax, v.ay, v.bx, v.by) : newBlock(v.ax, v.ay, v.bx, v.by)));
      select({ kind: "obstacle", index: floor.obstacles.length });
    } else if (tool === "interferer") {
      edit(addInterferer(json, newInterferer(v.x, v.y, defaults.centreMHz, defaults.bandwidthMHz)));
      select({ kind: "interferer", index: floor.interferers.length });
    } else if (tool === "way") edit(addWayPoint(json, moving, { xM: v.x, yM: v.y }));
  };
  return (
    <Section
      key={tool}
      title={title}
      sum={tool === "way" && moving >= 0 ? `of node ${floor.nodes[moving].id}` : "Escape leaves the tool"}
      defaultOpen
    >
      <p className="note second pb-1">{how}</p>
      {asked.length > 0 && <PlaceForm key={tool} asked={asked} act={act} impossible={impossible} onAdd={add} />}
    </Section>
  );
}

function PlaceForm({
  asked,
  act,
  impossible,
  onAdd,
}: {
  asked: readonly Asked[];
  act: string;
  impossible: string | null;
  onAdd: (values: Record<string, number>) => void;
}) {
  const [texts, setTexts] = useState<Record<string, string>>(() => Object.fromEntries(asked.map(({ key, first }) => [key, String(first)])));
  const [tried, setTried] = useState(false);
  const numberOf = ({ key }: Asked) => toStored(texts[key], METRES);
  const problemOf = (one: Asked): Problem | null => {
    const value = numberOf(one);
    if (value === null)
      return {
        title: texts[one.key].trim() === "" ? `${one.label} is empty.` : `“${texts[one.key].trim()}” is no number.`,
        text: `Enter 0 to ${significant(one.most, 4)} m.`,
      };
    return value < 0 || value > one.most
      ? { title: `${one.label} is ${significant(value, 6)} m: 0 to ${significant(one.most, 4)} m is permitted.` }
      : null;
  };
  const problems = asked.map(problemOf);
  const submit = (event: FormEvent) => {
    event.preventDefault();
    if (impossible) return;
    setTried(true);
    if (problems.some(Boolean)) return;
    onAdd(Object.fromEntries(asked.map((one) => [one.key, numberOf(one) ?? 0])));
  };
  return (
    <form className="nf" onSubmit={submit} noValidate>
      {asked.map((one, i) => (
        <Field
          key={one.key}
          label={one.label}
          symbol={one.symbol}
          unit="m"
          range={`0 to ${significant(one.most, 4)}`}
          value={texts[one.key]}
          onText={(text) => setTexts((before) => ({ ...before, [one.key]: text }))}
          problem={tried || texts[one.key] !== String(one.first) ? problems[i] : null}
        />
      ))}
      <div className="fl-acts">
        <Button small type="submit" impossible={impossible}>
          {act}
        </Button>
      </div>
    </form>
  );
}
