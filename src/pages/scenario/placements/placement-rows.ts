/** The figures that tell placements apart, each with its difference against the present one. */
import { energyBound } from "#shared/network/energy.ts";
import { roundsOf } from "#shared/scenario/rounds.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { VERDICT_WORDS } from "#shared/simulation/verdict-text.ts";
import { occupiedS } from "#src/components/drawings/slot-facts.ts";
import { chargeText, nodesOf } from "#src/components/drawings/spent.ts";
import type { MarkState } from "#src/components/ui/mark.tsx";
import { fixed, percentText, quantityText, shownUnit, significant, withUnit } from "#src/lib/format.ts";
import type { VariantRuns } from "./use-variant-runs.ts";
import type { Placement, Variant } from "./variants.ts";

export interface Cell {
  text: string;
  /** Against the present placement: "+1.20 ms"; null where there is nothing to compare, or no difference. */
  difference: string | null;
  mark?: MarkState;
}
export interface Row {
  label: string;
  /** What it stands for, where the label needs it. */
  note?: string;
  cells: Record<Placement, Cell>;
}

interface Figure {
  label: string;
  note?: string;
  /** null: not known (yet), or without meaning. */
  value: (variant: Variant, result: RunResult | null) => number | null;
  text: (value: number) => string;
  /** A size that differences are told in, without a sign. */
  amount?: (value: number) => string;
  /** In place of a value that has no meaning. */
  none?: (variant: Variant) => string | null;
}

const MINUS = "\u2212";
const ms = (seconds: number): string => withUnit(fixed(seconds * 1000, 2), "ms");
/** Smaller differences are the last digits of what is shown, and tell nothing. */
const TOLD = 5e-4;
const signed = (value: number, text: string): string => `${value > 0 ? "+" : MINUS}${text}`;

/** Largest distance from zero, or from its reference where the limit counts the error. */
function firstSignal(variant: Variant): { name: string; unit: string; label: string } | null {
  const limit = variant.scenario?.limits.find((one) => one.type !== "saturation");
  return limit && "signal" in limit ? { name: limit.signal, unit: "", label: limit.signal } : null;
}

function signalFigures(variant: Variant, result: RunResult | null) {
  const wanted = firstSignal(variant)?.name ?? result?.series.columns[0]?.name;
  return result?.figures.signals.find(({ name }) => name === wanted) ?? null;
}

function figuresFor(signalLabel: string, unit: string, floods: boolean): Figure[] {
  const quantity = (value: number) => quantityText(value, unit, 3);
  const amount = (value: number) => withUnit(significant(Math.abs(value) * shownUnit(unit).factor, 2), shownUnit(unit).unit);
  const delivered = (message: "measurement" | "command"): Figure => ({
    label: message === "measurement" ? "Measurement delivered" : "Command delivered",
    value: (_, result) => {
      const figures = result?.figures.messages.find((one) => one.message === message);
      return figures && figures.sent > 0 ? 1 - figures.lost / figures.sent : null;
    },
    text: (value) => percentText(value, value > 0.99 && value < 1 ? 2 : 1),
    amount: (value) => `${fixed(Math.abs(value) * 100, Math.abs(value) < 0.01 ? 2 : 1)} points`,
    none: (variant) => (variant.placement === (message === "measurement" ? "sensor" : "actuator") ? "no radio" : null),
  });
  const charge = (variant: Variant, result: RunResult | null): number | null => {
    const nodes = result ? nodesOf(result) : [];
    if (variant.scenario && nodes.length > 0) return Math.max(...nodes.map(({ chargeC }) => chargeC)) / roundsOf(variant.scenario);
    return variant.timing ? energyBound(variant.scenario ?? (variant.json as Parameters<typeof energyBound>[0]), variant.timing).chargeC : null;
  };
  return [
    { label: "Slots", value: ({ timing }) => timing?.slots.length ?? null, text: String, amount: (value) => String(Math.abs(value)) },
    { label: "Slots’ time", value: ({ timing }) => (timing ? occupiedS(timing) : null), text: ms },
    { label: "Shortest period", value: ({ timing }) => timing?.shortestPeriodS ?? null, text: ms },
    { label: "Reserve", value: ({ timing }) => timing?.reserveS ?? null, text: (value) => (value < 0 ? `${ms(-value)} missing` : ms(value)) },
    { label: "Latency", value: ({ timing }) => timing?.loops[0].latencyS ?? null, text: ms },
    {
      label: "Charge a round",
      note: floods ? "of the busiest node" : "of any node, at most",
      value: charge,
      text: chargeText,
      amount: (value) => chargeText(Math.abs(value)),
    },
    delivered("measurement"),
    delivered("command"),
    {
      label: `${signalLabel}, largest`,
      value: (variant, result) => {
        const figures = signalFigures(variant, result);
        return figures && Math.max(Math.abs(figures.min), Math.abs(figures.max));
      },
      text: quantity,
      amount,
    },
    { label: `${signalLabel}, RMS`, value: (variant, result) => signalFigures(variant, result)?.rms ?? null, text: quantity, amount },
  ];
}

const resultOf = (runs: VariantRuns, placement: Placement): RunResult | null => {
  const run = runs[placement];
  return run?.state === "done" ? run.result : null;
};

/** Rows of the comparison, in the order of the round's way to the machine. */
export function placementRows(variants: readonly Variant[], runs: VariantRuns): Row[] {
  const present = variants.find((variant) => variant.present) ?? variants[0];
  const results = variants.map(({ placement }) => resultOf(runs, placement));
  const any = variants.map((variant, i) => signalFigures(variant, results[i] ?? null)).find((one) => one !== null);
  const label = results.find((one) => one !== null)?.series.columns.find(({ name }) => name === any?.name)?.label ?? "Signal";
  const floods = results.some((result) => result !== null && nodesOf(result).length > 0);
  const rows = figuresFor(label, any?.unit ?? "", floods).map((figure): Row => {
    const reference = present ? figure.value(present, resultOf(runs, present.placement)) : null;
    const cells = variants.map((variant): [Placement, Cell] => {
      const none = figure.none?.(variant);
      if (none) return [variant.placement, { text: none, difference: null }];
      const value = figure.value(variant, resultOf(runs, variant.placement));
      if (value === null) return [variant.placement, { text: runs[variant.placement]?.state === "waits" ? "…" : "–", difference: null }];
      const apart = reference === null || variant.present ? 0 : value - reference;
      const same = Math.abs(apart) <= TOLD * Math.abs(reference ?? 0);
      const text = (figure.amount ?? ((size: number) => ms(Math.abs(size))))(apart);
      return [variant.placement, { text: figure.text(value), difference: same ? null : signed(apart, text) }];
    });
    return { label: figure.label, note: figure.note, cells: Object.fromEntries(cells) as Row["cells"] };
  });
  const verdicts = variants.map((variant): [Placement, Cell] => {
    const result = resultOf(runs, variant.placement);
    if (result) return [variant.placement, { text: VERDICT_WORDS[result.verdict], difference: null, mark: result.verdict }];
    if (variant.timing && !variant.timing.fits) return [variant.placement, { text: "Does not fit", difference: null, mark: "does-not-fit" }];
    return [variant.placement, { text: variant.scenario ? "…" : "Does not run", difference: null, mark: "not-decided" }];
  });
  return [...rows, { label: "Verdict", cells: Object.fromEntries(verdicts) as Row["cells"] }];
}
