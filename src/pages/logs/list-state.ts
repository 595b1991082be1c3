/** Search, order and page of the table live in the address, so that a link shows the same and "back" goes back. */
import { useCallback, useMemo } from "react";
import { useSearchParams } from "react-router-dom";
import { type LogListQuery, logListQuery } from "#shared/api/logs.ts";

const DEFAULTS = logListQuery.parse({});
const KEYS = Object.keys(logListQuery.shape) as (keyof LogListQuery)[];

/** Each parameter by itself: one that makes no sense counts as absent and spoils no other. */
export function readLogList(search: URLSearchParams): LogListQuery {
  const given = KEYS.flatMap((key) => {
    const text = search.get(key);
    if (text === null) return [];
    const parsed = logListQuery.shape[key].safeParse(text);
    return parsed.success ? [[key, parsed.data]] : [];
  });
  return { ...DEFAULTS, ...Object.fromEntries(given) };
}

function write(query: LogListQuery): URLSearchParams {
  const search = new URLSearchParams();
  for (const key of KEYS) if (query[key] !== "" && query[key] !== DEFAULTS[key]) search.set(key, String(query[key]));
  return search;
}

export type ChangeLogList = (change: Partial<LogListQuery>, replace?: boolean) => void;

export function useLogListState(): [LogListQuery, ChangeLogList] {
  const [search, setSearch] = useSearchParams();
  const query = useMemo(() => readLogList(search), [search]);
  const change = useCallback<ChangeLogList>(
    (next, replace = false) => {
      // Any change but of the page itself begins at the first page.
      setSearch((before) => write({ ...readLogList(before), page: 1, ...next }), { replace, preventScrollReset: true });
    },
    [setSearch],
  );
  return [query, change];
}
