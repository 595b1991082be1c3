/** What the forms of the floor's parts begin with when they are chosen for the first time. */
import { meanLinks } from "#shared/network/link-table.ts";
import { roundTiming } from "#shared/network/round.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import { getAt, type Path } from "./json-path.ts";

type First = (type: string, json: unknown, path: Path) => unknown;

const PATH_LOSS: Record<string, unknown> = {
  "free-space": {},
  "log-distance": { exponent: 3, lossAt1mDb: null },
  "p1238-8": { environment: "commercial" },
  "p1238-10": { environment: "industrial-nlos" },
  "indoor-factory": { clutter: "DL" },
};
const ACTIVITY: Record<string, unknown> = {
  always: {},
  periodic: { onS: 0.01, offS: 0.02, phaseS: 0 },
  random: { onShare: 0.3, meanOnS: 0.005 },
};
const COHERENCE: Record<string, unknown> = { speed: { leastMPerS: 0.5 }, time: { coherenceS: 0.05 } };

/** What the link budget gives for the round's longest payload, to go on from; nothing is received where it cannot be computed. */
function presentRatios(json: unknown): number[][] {
  const ids = ((getAt(json, ["floor", "nodes"]) as { id: number }[] | undefined) ?? []).map(({ id }) => id);
  const ratios = ids.map(() => ids.map(() => 0));
  const parsed = parseScenario(json);
  if (!parsed.ok) return ratios;
  const longest = roundTiming(parsed.value).slots.reduce((most, { payloadBytes }) => Math.max(most, payloadBytes), 0);
  for (const { from, to, prr } of meanLinks(parsed.value, 0, longest)) ratios[ids.indexOf(from)][ids.indexOf(to)] = Number(prr.toFixed(4));
  return ratios;
}

export const FLOOR_FIRST: Record<string, First> = {
  "floor.links.pathLoss": (type) => ({ type, ...(PATH_LOSS[type] as object) }),
  "floor.interferers[].activity": (type) => ({ type, ...(ACTIVITY[type] as object) }),
  "floor.links.fading.coherence": (type) => ({ type, ...(COHERENCE[type] as object) }),
  "floor.links": (type, json) => {
    if (type === "matrix") {
      return { type, prr: presentRatios(json) };
    }
    return {
      type: "budget",
      pathLoss: { type: "log-distance", exponent: 3, lossAt1mDb: null },
      shadowing: { sigmaDb: 0, correlationM: 10, seed: 1 },
      fading: null,
      noiseFigureDb: 6,
      captureDb: 3,
      concurrencyPenaltyDb: 3,
    };
  },
};
