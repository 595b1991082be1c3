/** Published models of path loss. Distances in m, three-dimensional, counted from 1 m on; frequencies in MHz; losses in dB. */
import { log10 } from "#shared/math/elementary.ts";
import type { PathLossModel } from "#shared/scenario/floor-schema.ts";

const LIGHT_M_PER_S = 299_792_458;

/** ITU-R P.525-4 (Friis): 20 log10(4 pi d f / c). */
function freeSpaceAt1m(frequencyMHz: number): number {
  return 20 * log10((4 * Math.PI * frequencyMHz * 1e6) / LIGHT_M_PER_S);
}

/** ITU-R P.1238-8, table 2 (2.4 GHz; commercial: 1.8 to 2 GHz) and table 5: distance power loss coefficient N, shadowing. */
const P1238_8 = {
  residential: { n: 28, sigmaDb: 8 },
  office: { n: 30, sigmaDb: 12 },
  commercial: { n: 22, sigmaDb: 10 },
} as const;

/** ITU-R P.1238-10, industrial, 0.625 to 70.28 GHz (coefficients from memory). */
const P1238_10 = {
  "industrial-los": { alpha: 2.34, beta: 24.26, gamma: 2.06, sigmaDb: 2.67 },
  "industrial-nlos": { alpha: 3.66, beta: 22.42, gamma: 2.34, sigmaDb: 9 },
} as const;

/** 3GPP TR 38.901, table 7.4.1-1: PL = a + b log10 d + c log10 f_GHz, and at least that of the cases in `atLeast`. */
const INDOOR_FACTORY = {
  LOS: { a: 31.84, b: 21.5, c: 19, sigmaDb: 4.3, atLeast: [] },
  SL: { a: 33, b: 25.5, c: 20, sigmaDb: 5.7, atLeast: ["LOS"] },
  DL: { a: 18.6, b: 35.7, c: 20, sigmaDb: 7.2, atLeast: ["LOS", "SL"] },
  SH: { a: 32.4, b: 23, c: 20, sigmaDb: 5.9, atLeast: ["LOS"] },
  DH: { a: 33.63, b: 21.9, c: 20, sigmaDb: 4, atLeast: ["LOS"] },
} as const;

/** Loss over a distance at one frequency; what does not depend on the distance is computed once. */
export function pathLoss(model: PathLossModel, frequencyMHz: number): (distanceM: number) => number {
  const decades = (distanceM: number) => log10(Math.max(1, distanceM));
  switch (model.type) {
    case "free-space": {
      const at1m = freeSpaceAt1m(frequencyMHz);
      return (d) => at1m + 20 * decades(d);
    }
    case "log-distance": {
      const at1m = model.lossAt1mDb ?? freeSpaceAt1m(frequencyMHz);
      return (d) => at1m + 10 * model.exponent * decades(d);
    }
    case "p1238-8": {
      const at1m = 20 * log10(frequencyMHz) - 28;
      const { n } = P1238_8[model.environment];
      return (d) => at1m + n * decades(d);
    }
    case "p1238-10": {
      const { alpha, beta, gamma } = P1238_10[model.environment];
      const at1m = beta + 10 * gamma * log10(frequencyMHz / 1000);
      return (d) => at1m + 10 * alpha * decades(d);
    }
    case "indoor-factory": {
      const own = INDOOR_FACTORY[model.clutter];
      const lines = [own, ...own.atLeast.map((name) => INDOOR_FACTORY[name])].map(({ a, b, c }) => ({
        at1m: a + c * log10(frequencyMHz / 1000),
        b,
      }));
      return (d) => {
        const x = decades(d);
        let most = 0;
        for (const { at1m, b } of lines) most = Math.max(most, at1m + b * x);
        return most;
      };
    }
  }
}

/** Standard deviation of shadowing that the model's source gives, dB; null: it gives none. A hint, used only when it is typed in. */
export function modelSigmaDb(model: PathLossModel): number | null {
  switch (model.type) {
    case "free-space":
    case "log-distance":
      return null;
    case "p1238-8":
      return P1238_8[model.environment].sigmaDb;
    case "p1238-10":
      return P1238_10[model.environment].sigmaDb;
    case "indoor-factory":
      return INDOOR_FACTORY[model.clutter].sigmaDb;
  }
}
