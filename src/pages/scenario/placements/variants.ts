/** The scenario with its controller placed otherwise, everything else as it is, so far as that is possible. */
import type { RoundTiming } from "#shared/network/round.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { getAt, type Path, setAt } from "../model/json-path.ts";
import { type FieldIssue, judge } from "../model/judge.ts";

export const PLACEMENTS = ["sensor", "apart", "actuator"] as const;
export type Placement = (typeof PLACEMENTS)[number];

export interface Variant {
  placement: Placement;
  present: boolean;
  json: unknown;
  /** What had to be changed along with the placement, and why. */
  notes: string[];
  /** Also where the round does not fit; null when the scenario's shape is wrong. */
  timing: RoundTiming | null;
  /** null: it cannot run, for these reasons. */
  scenario: Scenario | null;
  issues: FieldIssue[];
}

const CONTROLLER = ["loops", 0, "controller"] as const;
const ACT_AFTER: Path = ["loops", 0, "timing", "actAfterSampleS"];

export function variantOf(json: unknown, placement: Placement): Variant {
  const present = getAt(json, [...CONTROLLER, "placement"]) === placement;
  const notes: string[] = [];
  let changed = setAt(json, [...CONTROLLER, "placement"], placement);
  if (!present && placement !== "apart" && getAt(json, [...CONTROLLER, "acknowledgement"]) === "reported") {
    changed = setAt(changed, [...CONTROLLER, "acknowledgement"], "none");
    notes.push(
      placement === "sensor"
        ? "Commands are not acknowledged here: there is no measurement message that could report them."
        : "Commands are not acknowledged here: a controller with the actuator knows what acts.",
    );
  }
  let judged = judge({ json: changed, typed: {} });
  const latency = "loops[0].timing.actAfterSampleS";
  if (!present && getAt(json, ACT_AFTER) !== null && judged.issues.some(({ path }) => path === latency)) {
    changed = setAt(changed, ACT_AFTER, null);
    notes.push("The typed latency is not possible here: commands act at the round boundary.");
    judged = judge({ json: changed, typed: {} });
  }
  return { placement, present, json: changed, notes, ...judged };
}

/** The present placement among its alternatives, in the order of the message's way. */
export const variantsOf = (json: unknown): Variant[] => PLACEMENTS.map((placement) => variantOf(json, placement));
