/** A chosen file on its way to the server: first rows, columns, what the whole file holds, packing and sending. */
import { useCallback, useEffect, useMemo, useRef, useState } from "react";
import type { ColumnMapping } from "#shared/reception/types.ts";
import type { LogClient } from "#src/workers/log-client.ts";
import type { LogPreview, LogReading } from "#src/workers/log-contract.ts";
import { blankColumns, type Columns, columnsOf, type MappingProblem, mappingOf } from "../model/columns.ts";
import { columnsKey, rememberedMapping, rememberMapping } from "../model/remembered.ts";

import { createProgress, type Progress } from "./progress.tsx";

/** Where the columns' roles come from. */
export type Origin = "guessed" | "as-last-time" | "own";

export type Reading =
  | { state: "waiting" }
  | { state: "reading"; progress: Progress }
  | { state: "done"; reading: LogReading; mapping: ColumnMapping }
  | { state: "cancelled" }
  | { state: "failed"; message: string };

export interface UploadControl {
  preview: LogPreview | null;
  failure: string | null;
  columns: Columns | null;
  origin: Origin;
  names: readonly string[] | null;
  problem: MappingProblem | null;
  reading: Reading;
  change(next: Columns): void;
  /** Back to what was guessed of the file. */
  guessAgain(): void;
  /** Another delimiter: the rows are split anew and guessed anew. */
  split(delimiter: Columns["delimiter"]): void;
  readAgain(): void;
  cancelReading(): void;
}

const guessed = (preview: LogPreview): Columns =>
  preview.guess ? columnsOf(preview.guess, namesOf(preview, preview.guess.header), preview.width) : blankColumns(preview);
const namesOf = (preview: LogPreview, header: boolean): readonly string[] | null => (header ? (preview.rows[0]?.cells ?? []) : null);

export function useUpload(client: LogClient | null, file: File, personId: string): UploadControl {
  const [preview, setPreview] = useState<LogPreview | null>(null);
  const [failure, setFailure] = useState<string | null>(null);
  const [columns, setColumns] = useState<Columns | null>(null);
  const [origin, setOrigin] = useState<Origin>("guessed");
  const [reading, setReading] = useState<Reading>({ state: "waiting" });
  const [turn, setTurn] = useState(0);
  const gone = useRef(false);

  const open = useCallback(
    async (split: ColumnMapping["delimiter"] | null) => {
      if (!client) return;
      const outcome = await client.preview(file, split).catch((error: Error) => ({ ok: false as const, message: error.message }));
      if (gone.current) return;
      if (!outcome.ok) {
        if ("message" in outcome) setFailure(outcome.message);
        return;
      }
      const next = outcome.preview;
      const names = namesOf(next, next.header);
      const last = split ? null : rememberedMapping(personId, columnsKey(names, next.width));
      setPreview(next);
      setFailure(null);
      setColumns(last ? columnsOf(last, names, next.width) : guessed(next));
      setOrigin(last ? "as-last-time" : "guessed");
    },
    [client, file, personId],
  );
  useEffect(() => {
    gone.current = false;
    void open(null);
    return () => {
      gone.current = true;
    };
  }, [open]);

  const names = useMemo(() => (preview && columns ? namesOf(preview, columns.header) : null), [preview, columns]);
  const outcome = useMemo(() => (preview && columns ? mappingOf(columns, names) : null), [preview, columns, names]);
  const mappingText = outcome?.ok ? JSON.stringify(outcome.mapping) : null;

  // Every change of the mapping reads the whole file anew.
  // biome-ignore lint/correctness/useExhaustiveDependencies: `turn` asks again for the same
  useEffect(() => {
    if (!client || mappingText === null) {
      setReading({ state: "waiting" });
      return;
    }
    const mapping = JSON.parse(mappingText) as ColumnMapping;
    let wanted = true;
    const show = (next: Reading) => wanted && setReading(next);
    const progress = createProgress(file.size);
    show({ state: "reading", progress });
    client.read(file, mapping, progress.tell).then(
      (read) => {
        if (read.ok) show({ state: "done", reading: read.reading, mapping });
        else if ("message" in read) show({ state: "failed", message: read.message });
        else show({ state: "cancelled" });
      },
      (error: Error) => show({ state: "failed", message: error.message }),
    );
    return () => {
      wanted = false;
      client.cancel();
    };
  }, [client, file, mappingText, turn]);

  const change = useCallback(
    (next: Columns) => {
      setColumns(next);
      setOrigin("own");
      if (!preview) return;
      const own = namesOf(preview, next.header);
      const mapped = mappingOf(next, own);
      if (mapped.ok) rememberMapping(personId, columnsKey(own, preview.width), mapped.mapping);
    },
    [preview, personId],
  );

  return {
    preview,
    failure,
    columns,
    origin,
    names,
    problem: outcome && !outcome.ok ? outcome.problem : null,
    reading,
    change,
    guessAgain: useCallback(() => {
      if (!preview) return;
      setColumns(guessed(preview));
      setOrigin("guessed");
    }, [preview]),
    split: useCallback((delimiter) => void open(delimiter), [open]),
    readAgain: useCallback(() => setTurn((before) => before + 1), []),
    cancelReading: useCallback(() => client?.cancel(), [client]),
  };
}
