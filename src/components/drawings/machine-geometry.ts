/** The pendulum on its cart, to scale: where things stand for a run, and where they are at an instant. Pixels and metres. */
import type { PendulumSpec } from "#shared/plants/schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { extremes, valueAt } from "#src/components/plots/series-points.ts";
import { niceStep } from "#src/components/plots/units.ts";

export interface Body {
  /** Distance from the pivot, m: a uniform body with the plant's inertia reaches from `fromM` to `toM`. */
  fromM: number;
  toM: number;
  massCentreM: number;
}

/** A uniform body of this mass, mass centre and inertia: I = m a²/3 for half its length a. */
export function bodyOf({ rodMassKg, rodLengthM, rodInertiaKgM2 }: PendulumSpec): Body {
  const half = Math.min(rodLengthM, Math.sqrt((3 * rodInertiaKgM2) / rodMassKg));
  return { fromM: rodLengthM - half, toM: rodLengthM + half, massCentreM: rodLengthM };
}

/** The machine with the changes that were made up to an instant. */
export function specAt(spec: PendulumSpec, changes: Scenario["changes"], timeS: number): PendulumSpec {
  const now = { ...spec };
  for (const { atS, parameter, value } of changes) {
    if (atS <= timeS && (parameter === "rodLengthM" || parameter === "rodMassKg" || parameter === "rodInertiaKgM2")) now[parameter] = value;
  }
  return now;
}

export const TRAIL = 12;

/** Time between two earlier positions: a part of the machine's own swing, so that a fast and a slow one both leave a trail. */
export function trailStepS({ rodLengthM, gravityMps2 }: PendulumSpec): number {
  return niceStep(0.24 * Math.sqrt(rodLengthM / Math.max(0.1, gravityMps2)));
}

export interface MachinePicture {
  width: number;
  height: number;
  hanging: boolean;
  pixelsPerM: number;
  /** The track is wider than the picture: the picture goes along with the cart. */
  follows: boolean;
  /** The rail is drawn from -halfM to halfM; with rock at its ends when they are the track's. */
  halfM: number;
  ends: boolean;
  pivotY: number;
  railY: number;
  labelY: number;
  /** Longest distance from the pivot, px. */
  reach: number;
  angleLimits: number[];
  positionLimits: number[];
}

const END = 16;
/** Between the tip of a rod and the edge of the picture. */
const AIR = 8;

/** How far the tip gets away from the middle of the rail, above and below the pivot, over the whole run, m. A picture that follows its cart counts from the cart. */
function tipsOf(result: RunResult, hanging: boolean, reachM: number, follows: boolean): { asideM: number; aboveM: number; belowM: number } {
  const of = (name: string) => result.series.values[result.series.columns.findIndex((column) => column.name === name)];
  const [position, angle] = [of("position"), of("angle")];
  const tips = { asideM: 0, aboveM: 0, belowM: 0 };
  if (!position || !angle) return tips;
  for (let i = 0; i < angle.length; i++) {
    const theta = (angle[i] ?? 0) + (hanging ? Math.PI : 0);
    const up = reachM * Math.cos(theta);
    if (!Number.isFinite(up)) continue;
    tips.asideM = Math.max(tips.asideM, Math.abs((follows ? 0 : (position[i] ?? 0)) + reachM * Math.sin(theta)));
    tips.aboveM = Math.max(tips.aboveM, up);
    tips.belowM = Math.max(tips.belowM, -up);
  }
  return tips;
}

export function machinePicture(spec: PendulumSpec, scenario: Scenario, result: RunResult, width: number): MachinePicture {
  const hanging = spec.rest === "hanging";
  const specs = [spec, ...scenario.changes.map(({ atS }) => specAt(spec, scenario.changes, atS))];
  const reachM = Math.max(...specs.map((one) => bodyOf(one).toM));
  const index = result.series.columns.findIndex(({ name }) => name === "position");
  const travelled = extremes(result.series.values[index] ?? []) ?? { min: 0, max: 0 };
  const visitedM = Math.max(Math.abs(travelled.min), Math.abs(travelled.max), reachM * 0.7) * 1.1;
  const halfM = Math.min(spec.halfTrackM ?? visitedM, reachM * 100);
  const narrow = width < 260;
  const longest = narrow ? 112 : 180;
  const rail = width - 2 * END;
  const tips = tipsOf(result, hanging, reachM, rail / (2 * halfM) < Math.min(60, longest) / reachM);
  const fitting = Math.min(rail / (2 * halfM), longest / reachM, (width / 2 - AIR) / Math.max(tips.asideM, 1e-9));
  const pixelsPerM = Math.max(fitting, Math.min(60, longest) / reachM);
  const reach = reachM * pixelsPerM;
  const limitsOf = (signal: string) =>
    scenario.limits.flatMap((limit) =>
      limit.type === "within" && limit.signal === signal && limit.of === "signal" ? [limit.lo, limit.hi].filter((edge) => edge !== null) : [],
    );
  const above = tips.aboveM * pixelsPerM + AIR;
  const below = tips.belowM * pixelsPerM + AIR;
  const pivotY = hanging ? Math.max(76, above) : reach + (narrow ? 16 : 41);
  return {
    width,
    height: pivotY + (hanging ? reach + 36 : Math.max(narrow ? 76 : 81, below)),
    hanging,
    pixelsPerM,
    follows: pixelsPerM > fitting * 1.0001,
    halfM,
    ends: spec.halfTrackM !== null && halfM === spec.halfTrackM,
    pivotY,
    railY: hanging ? pivotY - 30 : pivotY + 31,
    labelY: hanging ? pivotY - 38 : pivotY + 53,
    reach,
    angleLimits: limitsOf("angle"),
    positionLimits: limitsOf("position"),
  };
}

export interface Pose {
  x: number;
  /** From upright, rad. */
  theta: number;
}

/** Of the run at an instant; null where nothing was recorded. */
export function poseAt(result: RunResult, hanging: boolean, timeS: number): Pose | null {
  const { columns, values, t } = result.series;
  const of = (name: string) => values[columns.findIndex((column) => column.name === name)];
  const [position, angle] = [of("position"), of("angle")];
  if (!position || !angle || timeS < 0) return null;
  const x = valueAt(t, position, Math.min(timeS, result.endedAtS));
  const theta = valueAt(t, angle, Math.min(timeS, result.endedAtS)) + (hanging ? Math.PI : 0);
  return Number.isFinite(x) && Number.isFinite(theta) ? { x, theta } : null;
}

/** Where the middle of the rail stands: in the middle of the picture, or shifted so that the cart stays in sight. */
export function railShift({ width, pixelsPerM, halfM, follows }: MachinePicture, cartM: number): number {
  const furthest = follows ? Math.max(0, halfM * pixelsPerM + END - width / 2) : 0;
  return width / 2 - Math.max(-furthest, Math.min(furthest, cartM * pixelsPerM));
}

/** A point at `radius` pixels from the pivot, theta from upright. */
export const fromPivot = (pivotX: number, pivotY: number, theta: number, radius: number): [number, number] => [
  pivotX + radius * Math.sin(theta),
  pivotY - radius * Math.cos(theta),
];
