import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { roundsCsv, seriesCsv } from "#src/components/plots/export-csv.ts";
import { lightPalette } from "#src/components/plots/palette.ts";
import { madeRun } from "../../helpers/made-run.ts";

const rows = (csv: string) => csv.trimEnd().split("\n");

describe("a run as CSV", () => {
  const { result } = madeRun({ durationS: 1 });
  it("has time first and every column with its unit", () => {
    expect(rows(seriesCsv(result))[0]).toBe("t_s,position_m,angle_rad,velocity_m/s,angularVelocity_rad/s,force_N,reference:position_m");
  });
  it("holds every recorded point, with ten digits", () => {
    const lines = rows(seriesCsv(result));
    expect(lines).toHaveLength(result.series.t.length + 1);
    const [t, position] = (lines[200] ?? "").split(",").map(Number);
    expect(t).toBeCloseTo(result.series.t[199] as number, 9);
    expect(position).toBeCloseTo(result.series.values[0]?.[199] as number, 9);
  });
  it("can be cut to what is zoomed to", () => {
    const lines = rows(seriesCsv(result, { fromS: 0.5, untilS: 0.6 }));
    expect(Number(lines[1]?.split(",")[0])).toBeCloseTo(0.5, 9);
    expect(Number(lines.at(-1)?.split(",")[0])).toBeCloseTo(0.6, 9);
  });
  it("leaves a cell empty rather than write what is not a number", () => {
    const broken = { ...result, series: { ...result.series, values: [Float64Array.of(Number.NaN), ...result.series.values.slice(1)] } };
    expect(rows(seriesCsv(broken))[1]?.startsWith("0,,")).toBe(true);
  });
  it("tells of each round when it sampled and acted and what became of its messages", () => {
    const lines = rows(roundsCsv(result));
    expect(lines).toHaveLength(result.rounds.count + 1);
    expect(lines[0]?.split(",").slice(0, 5)).toEqual(["round", "sampled_s", "acts_s", "measurement_delivered", "command_delivered"]);
    const cells = lines[4]?.split(",");
    expect(cells?.slice(0, 5)).toEqual(["3", "0.075", "0.1", "0", "1"]);
    expect(cells).toHaveLength(lines[0]?.split(",").length ?? 0);
  });
  it("leaves the delivery of a message that does not exist empty", () => {
    const direct = { ...result, rounds: { ...result.rounds, hasMeasurementSlot: false } };
    expect(rows(roundsCsv(direct))[4]?.split(",")[3]).toBe("");
  });
});

describe("the colours of files", () => {
  it("are all in the tokens, and are the light ones", () => {
    const palette = lightPalette(readFileSync("src/styles/tokens.css", "utf8"));
    expect(palette.panel.toLowerCase()).toBe("#ffffff");
    expect(palette.ink.toLowerCase()).toBe("#12303a");
    expect(Object.values(palette).every((value) => value.length > 0)).toBe(true);
  });
});
