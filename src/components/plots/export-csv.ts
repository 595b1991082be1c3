/** Series and rounds of a run as CSV: SI units, ten significant digits, one header row. */
import type { RunResult } from "#shared/simulation/result.ts";
import type { View } from "./plot-cursor.ts";

const number = (value: number): string => (Number.isFinite(value) ? String(Number(value.toPrecision(10))) : "");
/** "angle_rad", "velocity_m/s", "reference:position_m"; quoted where it has to be. */
function header(name: string, unit: string): string {
  const text = unit === "" ? name : `${name}_${unit.replaceAll(" ", "")}`;
  return /[",\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

/** `view` keeps the points from its beginning to its end, both included. */
export function seriesCsv({ series }: RunResult, view?: View): string {
  const rows = [["t_s", ...series.columns.map(({ name, unit }) => header(name, unit))].join(",")];
  series.t.forEach((t, i) => {
    if (view && (t < view.fromS || t > view.untilS)) return;
    rows.push([number(t), ...series.values.map((values) => number(values[i] as number))].join(","));
  });
  return `${rows.join("\n")}\n`;
}

/** One row per round: instants, what was delivered (1) or lost (0), measurement, noise, estimate, command. */
export function roundsCsv({ rounds, series }: RunResult): string {
  const states = series.columns.filter(({ kind }) => kind === "state");
  const inputs = series.columns.filter(({ kind }) => kind === "input");
  const groups = [
    { values: rounds.measurement, columns: rounds.measured, prefix: "measured:" },
    { values: rounds.noise, columns: rounds.measured, prefix: "noise:" },
    { values: rounds.estimate, columns: rounds.estimate.length > 0 ? states : [], prefix: "estimate:" },
    { values: rounds.command, columns: inputs, prefix: "command:" },
  ];
  const rows = [
    [
      "round",
      "sampled_s",
      "acts_s",
      "measurement_delivered",
      "command_delivered",
      ...groups.flatMap(({ columns, prefix }) => columns.map(({ name, unit }) => header(prefix + name, unit))),
    ].join(","),
  ];
  for (let k = 0; k < rounds.count; k++) {
    const sampled = k * rounds.periodS + rounds.sampleAtS;
    const cells = groups.flatMap(({ values, columns }) => columns.map((_, i) => number(values[k * columns.length + i] as number)));
    rows.push(
      [
        k,
        number(sampled),
        number(sampled + rounds.latencyS),
        rounds.hasMeasurementSlot ? rounds.measurementDelivered[k] : "",
        rounds.hasCommandSlot ? rounds.commandDelivered[k] : "",
        ...cells,
      ].join(","),
    );
  }
  return `${rows.join("\n")}\n`;
}
