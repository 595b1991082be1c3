/** Adding, copying, removing and moving entries of lists, as edits of a draft. What was typed in an entry moves with it. */
import type { Edit, Moved } from "./draft.ts";
import { getAt, type Path, setAt } from "./json-path.ts";

type Change = { json: unknown; moved: Moved };

const listAt = (json: unknown, path: Path): unknown[] => {
  const list = getAt(json, path);
  return Array.isArray(list) ? list : [];
};

export function inserted(json: unknown, path: Path, index: number, value: unknown): Change {
  return { json: setAt(json, path, listAt(json, path).toSpliced(index, 0, value)), moved: { list: path, to: (at) => (at >= index ? at + 1 : at) } };
}

export function removed(json: unknown, path: Path, index: number): Change {
  const to = (at: number) => (at === index ? null : at > index ? at - 1 : at);
  return { json: setAt(json, path, listAt(json, path).toSpliced(index, 1)), moved: { list: path, to } };
}

export function moved(json: unknown, path: Path, from: number, target: number): Change {
  const list = listAt(json, path);
  const next = list.toSpliced(from, 1).toSpliced(target, 0, list[from]);
  const to = (at: number) => {
    if (at === from) return target;
    if (from < target) return at > from && at <= target ? at - 1 : at;
    return at >= target && at < from ? at + 1 : at;
  };
  return { json: setAt(json, path, next), moved: { list: path, to } };
}

const put = (...changes: Change[]): Edit => ({ kind: "put", json: (changes.at(-1) as Change).json, moved: changes.map((change) => change.moved) });

export const append = (json: unknown, path: Path, value: unknown): Edit => put(inserted(json, path, listAt(json, path).length, value));
export const remove = (json: unknown, path: Path, index: number): Edit => put(removed(json, path, index));
export const duplicate = (json: unknown, path: Path, index: number, copyOf: (entry: unknown) => unknown = (entry) => entry): Edit =>
  put(inserted(json, path, index + 1, copyOf(listAt(json, path)[index])));
export const move = (json: unknown, path: Path, from: number, target: number): Edit => put(moved(json, path, from, target));

/** Sensor signals are the order of the message; the filter's noise figures and given noise columns go along with them. */
const SIGNALS = ["loops", 0, "sensor", "signals"] as const;
const FILTER_NOISE = ["loops", 0, "controller", "estimator", "measurementNoise"] as const;
const GIVEN_NOISE = ["loops", 0, "sensor", "noise", "values"] as const;

function inStep(
  json: unknown,
  change: (json: unknown, path: Path) => Change,
  column: (row: unknown[]) => unknown[],
  noise: (json: unknown) => Change,
): Edit {
  const changes = [change(json, SIGNALS)];
  const after = () => (changes.at(-1) as Change).json;
  if (Array.isArray(getAt(json, FILTER_NOISE))) changes.push(noise(after()));
  const rows = getAt(after(), GIVEN_NOISE);
  const edit = put(...changes);
  if (!Array.isArray(rows) || edit.kind !== "put") return edit;
  const values = rows.map((row) => (Array.isArray(row) ? column(row) : row));
  return { ...edit, json: setAt(edit.json, GIVEN_NOISE, values), forget: [GIVEN_NOISE] };
}

export function addSensorSignal(json: unknown, signal: string, assumedNoise: number): Edit {
  const count = listAt(json, SIGNALS).length;
  return inStep(
    json,
    (at, path) => inserted(at, path, count, { signal, noiseStd: 0, encoding: null }),
    (row) => [...row, 0],
    (at) => inserted(at, FILTER_NOISE, count, assumedNoise),
  );
}

export const removeSensorSignal = (json: unknown, index: number): Edit =>
  inStep(
    json,
    (at, path) => removed(at, path, index),
    (row) => row.toSpliced(index, 1),
    (at) => removed(at, FILTER_NOISE, index),
  );

export const moveSensorSignal = (json: unknown, from: number, target: number): Edit =>
  inStep(
    json,
    (at, path) => moved(at, path, from, target),
    (row) => row.toSpliced(from, 1).toSpliced(target, 0, row[from]),
    (at) => moved(at, FILTER_NOISE, from, target),
  );
