import { describe, expect, it } from "vitest";
import { columnName, roundsCsv, seriesCsv } from "#shared/simulation/csv.ts";
import { limitLabel, verdictSentence } from "#shared/simulation/verdict-text.ts";
import { column, ran, scalar, template } from "../helpers/scenarios.ts";

/** x = e^-t from 1, no input: every figure has a closed form. */
const decay = (limits: object[]) =>
  ran(
    scalar((s) => {
      s.limits = limits as never;
    }),
  );

describe("a limit", () => {
  it("on an excursion tells how much of it is used, and when", () => {
    const [verdict] = decay([{ type: "within", signal: "x1", lo: -2, hi: 2 }]).limits;
    expect(verdict).toMatchObject({ state: "holds", value: 1, used: 0.5, atS: 0, crossedAtS: null });
  });

  it("counts what is used from rest, not from the middle of lopsided bounds", () => {
    const [verdict] = decay([{ type: "within", signal: "x1", lo: -0.1, hi: 4 }]).limits;
    expect(verdict).toMatchObject({ value: 1, used: 0.25 });
  });

  it("is near above 90 % and crossed above 100 %", () => {
    const states = decay([
      { type: "within", signal: "x1", lo: -1.05, hi: 1.05 },
      { type: "within", signal: "x1", lo: null, hi: 0.9 },
      { type: "within", signal: "x1", lo: 0.5, hi: null },
    ]).limits;
    expect(states.map(({ state }) => state)).toEqual(["near", "crosses", "crosses"]);
    expect(states[1].crossedAtS).toBe(0);
    // e^-t falls below 0.5 at 0.693 s: the first grid point outside is 0.7 s.
    expect(states[2].crossedAtS).toBe(0.7);
  });

  it("looks only at its window", () => {
    const [verdict] = decay([{ type: "within", signal: "x1", lo: -0.5, hi: 0.5, fromS: 1 }]).limits;
    expect(verdict.state).toBe("holds");
    expect(verdict.value).toBeCloseTo(Math.exp(-1), 8);
  });

  it("on settling counts from its beginning to the last time outside the band", () => {
    const [verdict] = decay([{ type: "settle", signal: "x1", band: 0.2, withinS: 2, afterS: 0 }]).limits;
    // e^-t = 0.2 at 1.609 s; the last grid point outside is 1.6 s.
    expect(verdict).toMatchObject({ state: "holds", settlingS: 1.6 });
    expect(verdict.used).toBeCloseTo(0.8, 12);
  });

  it("on settling is crossed when the signal is outside as the next disturbance comes, however early that is", () => {
    const result = ran(
      scalar((s) => {
        s.loops[0].references = [{ signal: "x1", profile: { type: "steps", points: [{ atS: 0.5, value: 0 }] } }];
        s.limits = [{ type: "settle", signal: "x1", band: 0.2, withinS: 2, afterS: 0 }];
      }),
    );
    expect(result.limits[0]).toMatchObject({ state: "crosses", value: 0.5, settlingS: null });
  });

  it("tells which bound was crossed first, even when the other one is crossed further", () => {
    const result = ran(
      scalar((s) => {
        s.loops[0].feedforward = [{ signal: "u1", profile: { type: "steps", points: [{ atS: 0, value: -8 }] } }];
        s.limits = [{ type: "within", signal: "x1", lo: -0.1, hi: 0.9 }];
      }),
    );
    expect(result.limits[0]).toMatchObject({ crossedAtS: 0, crossedBound: "hi" });
    expect(result.limits[0].value).toBeLessThan(-7);
  });

  it("on RMS is the root of the mean square", () => {
    const result = decay([{ type: "rms", signal: "x1", below: 1 }]);
    const x = column(result, "x1");
    const square = x.reduce((sum, value) => sum + value * value, 0) / x.length;
    expect(result.limits[0].value).toBeCloseTo(Math.sqrt(square), 14);
  });

  it("uses the error against the reference where it says so", () => {
    const result = ran(
      scalar((s) => {
        s.loops[0].references = [{ signal: "x1", profile: { type: "steps", points: [{ atS: 0, value: 1 }] } }];
        s.limits = [{ type: "within", signal: "x1", of: "error", lo: -1, hi: 0.5 }];
      }),
    );
    expect(result.limits[0].value).toBeCloseTo(Math.exp(-8) - 1, 6);
  });

  it("is not decided when there is none", () => {
    expect(decay([]).verdict).toBe("not-decided");
  });
});

describe("the verdict in words", () => {
  it("names the decisive limit", () => {
    const scenario = template(0);
    const { word, sentence } = verdictSentence(scenario, ran(scenario));
    expect(word).toBe("Holds");
    expect(sentence).toMatch(/^All five limits kept; the \w+.* uses \d+.%? ?.* of its limit\.$/u);
  });

  it("tells what was crossed first, and when", () => {
    const scenario = template(0);
    scenario.limits = [{ type: "within", signal: "angle", of: "signal", lo: -0.02, hi: 0.02, fromS: 0, untilS: null }];
    expect(verdictSentence(scenario, ran(scenario)).sentence).toMatch(/^The angle passes −?1\.15° at \d\.\d\d.+s\.$/u);
  });

  it("calls no settling time what only lasted until the run ended or something new began", () => {
    // e^-t leaves the band of 0.1 at 2.3 s.
    const told = (durationS: number, stepsAt: number[] = []) => {
      const scenario = scalar((s) => {
        s.run = { durationS, seed: 1 };
        if (stepsAt.length > 0)
          s.loops[0].references = [{ signal: "x1", profile: { type: "steps", points: stepsAt.map((atS) => ({ atS, value: 0 })) } }];
        s.limits = [{ type: "settle", signal: "x1", band: 0.1, withinS: 1, afterS: 0 }];
      });
      return verdictSentence(scenario, ran(scenario)).sentence.replaceAll(/[\u2009\u2060]/g, "");
    };
    expect(told(8)).toBe("x1 needs 2.30s to settle, 1.00s allowed.");
    expect(told(2)).toBe("x1 has not settled after 2.00s, 1.00s allowed.");
    expect(told(8, [1.5])).toBe("x1 has not settled after 1.50s, 1.00s allowed.");
  });

  it("labels limits in the units that people read", () => {
    const scenario = template(0);
    expect(scenario.limits.map((limit) => limitLabel(limit, scenario).replaceAll(/[\u2009\u2060]/g, ""))).toEqual([
      "Angle within ±12°",
      "Position within ±0.3m",
      "Position settles in 1.8s to ±30mm",
      "Angle RMS below 3°",
      "Saturated below 2%",
    ]);
  });
});

describe("tables for other programs", () => {
  it("give back the very numbers", () => {
    const result = ran(template(0));
    const [header, ...rows] = seriesCsv(result).trim().split("\n");
    expect(header).toBe("t_s,position_m,angle_rad,velocity_m_per_s,angularVelocity_rad_per_s,force_N,reference_position_m");
    expect(rows.length).toBe(result.series.t.length);
    const last = (rows.at(-1) ?? "").split(",").map(Number);
    expect(last[2]).toBe(column(result, "angle").at(-1));
  });

  it("have one row a round, with what was delivered", () => {
    const scenario = template(1);
    const result = ran(scenario);
    const rows = roundsCsv(result, scenario).trim().split("\n");
    expect(rows.length).toBe(result.rounds.count + 1);
    const lost = rows.slice(1).filter((row) => row.split(",")[3] === "0").length;
    expect(lost).toBe(result.figures.messages[0].lost);
  });

  it("can be cut to a part of the time", () => {
    const rows = seriesCsv(ran(template(0)), { fromS: 0.5, untilS: 0.6 })
      .trim()
      .split("\n");
    expect([rows[1], rows.at(-1)].map((row) => Number(row?.split(",")[0]))).toEqual([0.5, 0.6]);
  });

  it("leave the delivery of a message that does not exist empty", () => {
    const scenario = template(0);
    scenario.loops[0].controller.placement = "sensor";
    expect(roundsCsv(ran(scenario), scenario).split("\n")[1]?.split(",")[3]).toBe("");
  });

  it("name columns without characters that programs trip over", () => {
    expect(columnName("reference:angle", "rad/s")).toBe("reference_angle_rad_per_s");
    expect(columnName("x1", "")).toBe("x1");
  });
});
