import { describe, expect, it } from "vitest";
import { columnMappingSchema } from "#shared/reception/types.ts";
import { blankColumns, columnsOf, mappingOf, withRole } from "#src/pages/logs/model/columns.ts";
import { columnsKey, rememberedMapping, rememberMapping } from "#src/pages/logs/model/remembered.ts";

const NAMES = ["seq", "time", "from", "to", "from", "ok"];
const mapping = columnMappingSchema.parse({
  number: { column: "seq", kind: "sequence", wrapsAt: 256 },
  time: { column: "time", unit: "ms" },
  source: 3,
  receiver: "to",
  received: "ok",
});

describe("the roles of columns", () => {
  it("give the mapping back that they were made of", () => {
    const columns = columnsOf(mapping, NAMES, 6);
    expect(columns.roles).toEqual(["sequence", "time", "source", "receiver", "unused", "received"]);
    expect(mappingOf(columns, NAMES)).toEqual({ ok: true, mapping });
  });
  it("name a column by its place where two have the same name, or none has one", () => {
    const columns = withRole(columnsOf(mapping, NAMES, 6), 4, "rssi");
    expect(mappingOf(columns, NAMES)).toMatchObject({ mapping: { source: 3, rssi: 5 } });
    expect(mappingOf({ ...columns, header: false }, null)).toMatchObject({ mapping: { number: { column: 1 }, receiver: 4 } });
  });
  it("belong to one column each: the one that had it gives it up, and a packet number excludes a round", () => {
    const columns = columnsOf(mapping, NAMES, 6);
    expect(withRole(columns, 5, "time").roles).toEqual(["sequence", "unused", "source", "receiver", "unused", "time"]);
    expect(withRole(columns, 5, "round").roles).toEqual(["unused", "time", "source", "receiver", "unused", "round"]);
    expect(withRole(columns, 0, "unused").roles[4]).toBe("unused");
  });
  it("say what is missing when nothing tells what was lost", () => {
    const outcome = mappingOf(blankColumns({ delimiter: ",", decimal: ".", header: true, width: 2 }), ["a", "b"]);
    expect(outcome).toMatchObject({ ok: false, problem: { at: "roles" } });
    expect(outcome.ok ? "" : outcome.problem.message).toMatch(/packet number nor a received column/);
  });
});

describe("the mapping of last time", () => {
  it("comes back for the same columns and person, and for no other", () => {
    const key = columnsKey(NAMES, 6);
    rememberMapping("fennick", key, mapping);
    expect(rememberedMapping("fennick", key)).toEqual(mapping);
    expect(rememberedMapping("moorling", key)).toBeNull();
    expect(rememberedMapping("fennick", columnsKey(["seq", "time"], 2))).toBeNull();
    expect(columnsKey(null, 2)).not.toBe(columnsKey(null, 3));
  });
  it("counts as none when what the browser kept is of another shape", () => {
    localStorage.setItem("holdfast.log-columns.saltby", '[{"columns":"a","mapping":{"delimiter":"?"}}]');
    expect(rememberedMapping("saltby", "a")).toBeNull();
  });
});
