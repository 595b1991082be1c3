/** The words of the filters, and the sentence that says what was not found. */
import { PLANT_LABELS, type ScenarioListQuery } from "#shared/api/scenarios.ts";
import { countedInWords, listed } from "#src/lib/format.ts";
import { activeFilters } from "./list-state.ts";

export const VERDICT_WORDS: Record<NonNullable<ScenarioListQuery["verdict"]>, string> = {
  holds: "holds",
  near: "near a limit",
  crosses: "crosses a limit",
  "not-decided": "not decided",
  "does-not-fit": "does not fit",
};
export const CHANGED_WORDS: Record<ScenarioListQuery["changed"], string> = {
  any: "any time",
  day: "in 24 hours",
  week: "in 7 days",
  month: "in 30 days",
};
export const ARCHIVED_WORDS: Record<ScenarioListQuery["archived"], string> = { hidden: "hidden", only: "only these", all: "shown too" };

const THAT: Record<NonNullable<ScenarioListQuery["verdict"]>, string> = {
  holds: "that holds",
  near: "that is near a limit",
  crosses: "that crosses a limit",
  "not-decided": "that is not decided",
  "does-not-fit": "whose round does not fit",
};

/** "No overhead crane of T. Saltby whose round does not fit" */
export function nothingFound(query: ScenarioListQuery, ownerName: string | undefined): string {
  const plant = query.plant && PLANT_LABELS[query.plant];
  return [
    query.archived === "only" ? "No archived" : "No",
    plant ? plant.charAt(0).toLowerCase() + plant.slice(1) : "scenario",
    query.search && `named like “${query.search}”`,
    query.owner && `of ${ownerName ?? "this owner"}`,
    query.verdict && THAT[query.verdict],
    query.changed !== "any" && `changed ${CHANGED_WORDS[query.changed]}`,
  ]
    .filter(Boolean)
    .join(" ");
}

const OTHERNESS = { search: "other names", plant: "other plants", verdict: "other verdicts", owner: "other owners", changed: "older changes" };

/** "Eleven scenarios have other plants or other verdicts." */
export function whatElse(query: ScenarioListQuery, total: number): string {
  const words = activeFilters(query).map((filter) => OTHERNESS[filter]);
  return `${countedInWords(total, "scenario")} ${total === 1 ? "has" : "have"} ${listed(words, "or")}.`;
}

export function clearWords(count: number): string {
  if (count === 1) return "Clear the filter";
  return count === 2 ? "Clear both filters" : `Clear all ${count} filters`;
}
