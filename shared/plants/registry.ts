import { Pendulum } from "./pendulum.ts";
import type { Plant } from "./plant.ts";
import type { PlantSpec } from "./schema.ts";
import { StateSpace } from "./state-space.ts";

/** A fresh plant for one run. */
export function createPlant(spec: PlantSpec): Plant {
  switch (spec.type) {
    case "pendulum-on-cart":
      return new Pendulum(spec);
    case "state-space":
      return new StateSpace(spec);
  }
}

/** What people call the machine. */
export function plantTitle(spec: PlantSpec): string {
  switch (spec.type) {
    case "pendulum-on-cart":
      return spec.rest === "upright" ? "Pendulum on cart" : "Overhead crane";
    case "state-space":
      return `State space, ${spec.a.length} ${spec.a.length === 1 ? "state" : "states"}`;
  }
}
