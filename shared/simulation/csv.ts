/** Runs as tables for other programs. */
import { createPlant } from "#shared/plants/registry.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "./result.ts";

const format = (digits: number) => (value: number) => (digits >= 17 ? String(value) : String(Number(value.toPrecision(digits))));

/** "angle_rad"; characters that do not belong into a column name become _. */
export const columnName = (name: string, unit: string): string =>
  [
    name.replace(":", "_"),
    unit
      .replaceAll("/", "_per_")
      .replaceAll("²", "2")
      .replace(/[^A-Za-z0-9_]+/g, "_"),
  ]
    .filter(Boolean)
    .join("_");

/** One row per grid point: t_s, then every signal in SI units. 17 digits give back the same doubles. */
export function seriesCsv(result: RunResult, digits: number, fromS = 0, untilS = Number.POSITIVE_INFINITY): string {
  const { t, columns, values } = result.series;
  const show = format(digits);
  const lines = [["t_s", ...columns.map(({ name, unit }) => columnName(name, unit))].join(",")];
  for (let i = 0; i < t.length; i++) {
    if (t[i] < fromS || t[i] > untilS) continue;
    lines.push([show(t[i]), ...values.map((series) => show(series[i]))].join(","));
  }
  return `${lines.join("\n")}\n`;
}

/** One row per round: deliveries, what was measured, the sensor's noise, the estimate and the command. */
export function roundsCsv(result: RunResult, scenario: Scenario, digits: number): string {
  const { rounds } = result;
  const plant = createPlant(scenario.loops[0].plant);
  const show = format(digits);
  const p = rounds.measured.length;
  const n = rounds.count > 0 ? rounds.estimate.length / rounds.count : 0;
  const { m } = plant;
  const header = [
    "round",
    "sample_at_s",
    "act_at_s",
    "measurement_delivered",
    "command_delivered",
    ...rounds.measured.map(({ name, unit }) => columnName(`measured_${name}`, unit)),
    ...rounds.measured.map(({ name, unit }) => columnName(`noise_${name}`, unit)),
    ...plant.states.slice(0, n).map(({ name, unit }) => columnName(`estimate_${name}`, unit)),
    ...plant.inputs.map(({ name, unit }) => columnName(`command_${name}`, unit)),
  ];
  const lines = [header.join(",")];
  for (let k = 0; k < rounds.count; k++) {
    const at = Math.round((k * rounds.periodS + rounds.sampleAtS) * 1e9) / 1e9;
    const row = (values: Float64Array, width: number) => Array.from(values.subarray(k * width, (k + 1) * width), show);
    lines.push(
      [
        k,
        at,
        Math.round((at + rounds.latencyS) * 1e9) / 1e9,
        rounds.measurementDelivered[k],
        rounds.commandDelivered[k],
        ...row(rounds.measurement, p),
        ...row(rounds.noise, p),
        ...row(rounds.estimate, n),
        ...row(rounds.command, m),
      ].join(","),
    );
  }
  return `${lines.join("\n")}\n`;
}
