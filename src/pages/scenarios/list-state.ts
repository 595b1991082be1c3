/** Filters, order and page of the table live in the address, so that a link shows the same and "back" goes back. */
import { useCallback, useMemo } from "react";
import { useSearchParams } from "react-router-dom";
import { type ScenarioListQuery, scenarioListQuery } from "#shared/api/scenarios.ts";

const DEFAULTS = scenarioListQuery.parse({});
const KEYS = Object.keys(scenarioListQuery.shape) as (keyof ScenarioListQuery)[];
export const FILTERS = ["search", "plant", "verdict", "owner", "changed"] as const;

/** Each parameter by itself: one that makes no sense counts as absent and spoils no other. */
export function readListState(search: URLSearchParams): ScenarioListQuery {
  const given = KEYS.flatMap((key) => {
    const text = search.get(key);
    if (text === null) return [];
    const parsed = scenarioListQuery.shape[key].safeParse(text);
    return parsed.success ? [[key, parsed.data]] : [];
  });
  return { ...DEFAULTS, ...Object.fromEntries(given) };
}

export function writeListState(query: ScenarioListQuery): URLSearchParams {
  const search = new URLSearchParams();
  for (const key of KEYS) {
    const value = query[key];
    if (value !== undefined && value !== "" && value !== DEFAULTS[key]) search.set(key, String(value));
  }
  return search;
}

export const activeFilters = (query: ScenarioListQuery): (typeof FILTERS)[number][] =>
  FILTERS.filter((key) => query[key] !== undefined && query[key] !== DEFAULTS[key]);

export const withoutFilters = (query: ScenarioListQuery): ScenarioListQuery => ({
  ...query,
  search: "",
  plant: undefined,
  verdict: undefined,
  owner: undefined,
  changed: "any",
  page: 1,
});

export type ChangeList = (change: Partial<ScenarioListQuery>, replace?: boolean) => void;

export function useListState(): [ScenarioListQuery, ChangeList] {
  const [search, setSearch] = useSearchParams();
  const query = useMemo(() => readListState(search), [search]);
  const change = useCallback<ChangeList>(
    (next, replace = false) => {
      // Any change but of the page itself begins at the first page.
      setSearch((before) => writeListState({ ...readListState(before), page: 1, ...next }), { replace, preventScrollReset: true });
    },
    [setSearch],
  );
  return [query, change];
}
