import { describe, expect, it } from "vitest";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { fieldSpec, rangeText } from "#src/pages/scenario/model/field-spec.ts";
import { bitsText, readBits, readNumber, readNumbers, readRows } from "#src/pages/scenario/model/typed-values.ts";

const json = TEMPLATES[0].scenario;
const crane = TEMPLATES[1].scenario;

describe("words and ranges of a field", () => {
  it("takes range and unit from the scenario's schema", () => {
    const mass = fieldSpec(json, ["loops", 0, "plant", "cartMassKg"]);
    expect(mass).toMatchObject({ label: "Cart mass", symbol: "M", unit: { text: "kg" } });
    expect(rangeText(mass)).toBe("0.01 to 1e5");
    expect(rangeText(fieldSpec(json, ["losses", "process", "measurement"]))).toBe("0 to 100");
    expect(rangeText(fieldSpec(json, ["round", "periodS"]))).toBe("1 to 10000");
  });

  it("speaks of trolley, load and rope when the machine rests hanging", () => {
    expect(fieldSpec(crane, ["loops", 0, "plant", "cartMassKg"]).label).toBe("Trolley mass");
    expect(fieldSpec(crane, ["loops", 0, "plant", "rodMassKg"]).label).toBe("Load mass");
    expect(fieldSpec(crane, ["loops", 0, "plant", "rodLengthM"]).label).toBe("Rope, trolley to load");
  });

  it("gives a value the unit of the signal that it belongs to", () => {
    expect(fieldSpec(json, ["limits", 0, "hi"]).unit.text).toBe("°");
    expect(fieldSpec(json, ["limits", 1, "hi"]).unit.text).toBe("m");
    expect(fieldSpec(json, ["loops", 0, "controller", "law", "stateWeights", 1]).unit.text).toBe("1/rad²");
    expect(fieldSpec(json, ["loops", 0, "controller", "law", "stateWeights", 2]).unit.text).toBe("s²/m²");
    expect(fieldSpec(json, ["pushes", 0, "size"]).unit.text).toBe("N\u2009s");
    const loaded = { ...crane, changes: [{ atS: 1, parameter: "rodMassKg", value: 90 }] };
    expect(fieldSpec(loaded, ["changes", 0, "value"])).toMatchObject({ unit: { text: "kg" }, meta: { min: 0.001 } });
  });
});

describe("typed values", () => {
  const spec = fieldSpec(json, ["loops", 0, "plant", "halfTrackM"]);
  it("takes an empty field for nothing where nothing is meant, and for a mistake elsewhere", () => {
    expect(readNumber("", spec, true)).toEqual({ ok: true, value: null });
    expect(readNumber(" ", spec, false)).toMatchObject({ ok: false });
  });

  it("reads given deliveries as people write them, and says where another character stands", () => {
    expect(readBits("11 0,1\n1;0")).toEqual({ ok: true, value: [1, 1, 0, 1, 1, 0] });
    const bad = readBits("110\n12");
    expect(bad).toMatchObject({ ok: false, problem: expect.stringContaining("line 2, after 4 rounds") });
  });

  it("writes deliveries in groups that read back as they were", () => {
    const bits = Array.from({ length: 123 }, (_, i) => (i % 7 === 0 ? 0 : 1));
    expect(readBits(bitsText(bits))).toEqual({ ok: true, value: bits });
  });

  it("reads numbers in the unit of the field, and rows with one number a signal", () => {
    expect(readNumbers("1 -2;3", fieldSpec(json, ["pushes", 0, "size"]))).toEqual({ ok: true, value: [1, -2, 3] });
    const noise = fieldSpec(json, ["loops", 0, "sensor", "noise", "values"]);
    expect(readRows("1 2\n\n3 4", noise, 2)).toEqual({
      ok: true,
      value: [
        [1, 2],
        [3, 4],
      ],
    });
    expect(readRows("1 2\n3", noise, 2)).toMatchObject({ ok: false, problem: expect.stringContaining("Line 2 has 1 number") });
  });
});
