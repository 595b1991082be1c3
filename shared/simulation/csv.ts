/** Runs as tables for other programs: SI units, numbers with all their digits. */
import { createPlant } from "#shared/plants/registry.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "./result.ts";

const show = (value: number): string => (Number.isFinite(value) ? String(value) : "");

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

/** One row per grid point: t_s, then every signal. A view keeps the points from its beginning to its end, both included. */
export function seriesCsv(result: RunResult, view?: { fromS: number; untilS: number }): string {
  const { t, columns, values } = result.series;
  const lines = [["t_s", ...columns.map(({ name, unit }) => columnName(name, unit))].join(",")];
  for (let i = 0; i < t.length; i++) {
    if (view && (t[i] < view.fromS || t[i] > view.untilS)) continue;
    lines.push([show(t[i]), ...values.map((series) => show(series[i]))].join(","));
  }
  return `${lines.join("\n")}\n`;
}

/** One row per round: deliveries (empty where the placement needs no such message), what was measured, the sensor's noise, the estimate and the command. */
export function roundsCsv(result: RunResult, scenario: Scenario): string {
  const { rounds } = result;
  const plant = createPlant(scenario.loops[0].plant);
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
        rounds.hasMeasurementSlot ? rounds.measurementDelivered[k] : "",
        rounds.hasCommandSlot ? rounds.commandDelivered[k] : "",
        ...row(rounds.measurement, p),
        ...row(rounds.noise, p),
        ...row(rounds.estimate, n),
        ...row(rounds.command, m),
      ].join(","),
    );
  }
  return `${lines.join("\n")}\n`;
}
