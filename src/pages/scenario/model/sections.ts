import { isWithin } from "./json-path.ts";

/** Which section a setting belongs to: the first that owns a beginning of its path. */
export const OWNERS = {
  machine: ["loops[0].plant"],
  loop: ["loops[0].controller", "loops[0].sensor", "loops[0].actuator", "loops[0].timing"],
  reference: ["loops[0].references", "loops[0].feedforward"],
  losses: ["losses"],
  radio: ["radio", "floor", "loops[0].nodes"],
  round: ["round"],
  pushes: ["pushes", "changes"],
  limits: ["limits"],
  start: ["loops[0].start"],
  run: ["run"],
  about: ["name", "description", "format", "version", "loops"],
} as const;
export type SectionId = keyof typeof OWNERS;
export const SECTION_IDS = Object.keys(OWNERS) as SectionId[];

export const sectionOf = (path: string): SectionId => SECTION_IDS.find((id) => OWNERS[id].some((outer) => isWithin(path, outer))) ?? "about";
