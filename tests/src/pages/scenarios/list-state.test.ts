import { describe, expect, it } from "vitest";
import { activeFilters, readListState, withoutFilters, writeListState } from "#src/pages/scenarios/list-state.ts";
import { clearWords, nothingFound, whatElse } from "#src/pages/scenarios/words.ts";

const read = (text: string) => readListState(new URLSearchParams(text));

describe("the table's state in the address", () => {
  it("says nothing about what is as usual", () => {
    expect(writeListState(read("")).toString()).toBe("");
  });
  it("comes back as it was written", () => {
    const text = "search=rig+1&plant=overhead-crane&verdict=crosses&changed=week&archived=all&sort=name&direction=ascending&page=3";
    expect(writeListState(read(text)).toString()).toBe(text);
  });
  it("ignores a parameter that makes no sense and keeps the others", () => {
    const { plant, page, verdict } = read("plant=rocket&page=minus&verdict=near");
    expect([plant, page, verdict]).toEqual([undefined, 1, "near"]);
  });
  it("counts what narrows the table, not its order or the archive", () => {
    expect(activeFilters(read("plant=state-space&sort=name&archived=only&search=x"))).toEqual(["search", "plant"]);
    expect(activeFilters(withoutFilters(read("plant=state-space&search=x&changed=day")))).toEqual([]);
  });
});

describe("the words of an empty table", () => {
  it("name what was looked for", () => {
    expect(nothingFound(read("plant=overhead-crane&verdict=does-not-fit"), undefined)).toBe("No overhead crane whose round does not fit");
    expect(nothingFound(read("search=rig&owner=33333333-3333-4333-8333-333333333333"), "T. Saltby")).toBe(
      "No scenario named like “rig” of T. Saltby",
    );
  });
  it("say what there is instead", () => {
    expect(whatElse(read("plant=overhead-crane&verdict=near"), 11)).toBe("Eleven scenarios have other plants or other verdicts.");
    expect(whatElse(read("search=x"), 1)).toBe("One scenario has other names.");
  });
  it("offer to clear as many filters as there are", () => {
    expect([1, 2, 3].map(clearWords)).toEqual(["Clear the filter", "Clear both filters", "Clear all 3 filters"]);
  });
});
