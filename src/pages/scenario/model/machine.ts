/** What the form needs to know of the machine in a draft, also while one of its numbers is bad. */
import type { Plant, Signal } from "#shared/plants/plant.ts";
import { createPlant } from "#shared/plants/registry.ts";
import type { PlantSpec } from "#shared/plants/schema.ts";
import { getAt } from "./json-path.ts";

const known = new WeakMap<object, Plant | null>();

/** The draft's plant, or null when its description is too broken to say even what its signals are. */
export function plantOf(json: unknown): Plant | null {
  const spec = getAt(json, ["loops", 0, "plant"]);
  if (spec === null || typeof spec !== "object") return null;
  let plant = known.get(spec);
  if (plant === undefined) {
    try {
      plant = createPlant(spec as PlantSpec) ?? null;
    } catch {
      plant = null;
    }
    known.set(spec, plant);
  }
  return plant;
}

export const isHanging = (json: unknown): boolean => getAt(json, ["loops", 0, "plant", "rest"]) === "hanging";

const find = (signals: readonly Signal[] | undefined, name: unknown): Signal | undefined => signals?.find((signal) => signal.name === name);

export const stateAt = (json: unknown, index: number): Signal | undefined => plantOf(json)?.states[index];
export const inputAt = (json: unknown, index: number): Signal | undefined => plantOf(json)?.inputs[index];
export const outputNamed = (json: unknown, name: unknown): Signal | undefined => find(plantOf(json)?.outputs, name);
export const channelNamed = (json: unknown, name: unknown): Signal | undefined => find(plantOf(json)?.channels, name);
/** Of a limit or a reference: a state, an output or an input. */
export const signalNamed = (json: unknown, name: unknown): Signal | undefined => outputNamed(json, name) ?? find(plantOf(json)?.inputs, name);
