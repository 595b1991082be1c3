/**
 * Where a draft outlives its page: the browser's local storage, one entry per scenario and person. Every tab writes the
 * same entry and hears of the others' writing; a tab that has missed one finds out before it writes.
 */
import { z } from "zod";

const typedSchema = z.strictObject({ text: z.string(), problem: z.string().nullable() });
const draftSchema = z.strictObject({ json: z.unknown(), typed: z.record(z.string(), typedSchema) });

export const storedDraftSchema = z.strictObject({
  /** What became of the draft: it goes on, it was saved as the revision `base`, or it was dropped. */
  state: z.enum(["open", "saved", "dropped"]),
  /** Number of the revision that the draft began from. */
  base: z.int().positive(),
  draft: draftSchema.nullable(),
  /** Milliseconds since 1970. */
  at: z.number(),
  /** Which tab wrote it, and its how many-th writing it was. */
  tab: z.string(),
  turn: z.int(),
});
export type StoredDraft = z.infer<typeof storedDraftSchema>;

export interface DraftStore {
  read(): StoredDraft | null;
  /** False when the browser refuses (storage full or switched off). */
  write(entry: StoredDraft): boolean;
  /** Called when another tab wrote. */
  listen(heard: (entry: StoredDraft | null) => void): () => void;
}

export const draftKey = (scenarioId: string, personId: string): string => `holdfast.draft.${scenarioId}.${personId}`;

function parse(text: string | null): StoredDraft | null {
  if (text === null) return null;
  try {
    const parsed = storedDraftSchema.safeParse(JSON.parse(text));
    return parsed.success ? parsed.data : null;
  } catch {
    return null;
  }
}

export function browserStore(key: string): DraftStore {
  return {
    read() {
      try {
        return parse(localStorage.getItem(key));
      } catch {
        return null;
      }
    },
    write(entry) {
      try {
        localStorage.setItem(key, JSON.stringify(entry));
        return true;
      } catch {
        return false;
      }
    },
    listen(heard) {
      const onStorage = (event: StorageEvent) => {
        if (event.key === key) heard(parse(event.newValue));
      };
      window.addEventListener("storage", onStorage);
      return () => window.removeEventListener("storage", onStorage);
    },
  };
}

/** A version that gave way to somebody else's, kept until it is thrown away. */
export interface DraftCopy {
  json: unknown;
  base: number;
  at: number;
}
const copySchema = z.strictObject({ json: z.unknown(), base: z.int().positive(), at: z.number() });
const copyKey = (scenarioId: string, personId: string): string => `holdfast.copy.${scenarioId}.${personId}`;

export function readCopy(scenarioId: string, personId: string): DraftCopy | null {
  try {
    const parsed = copySchema.safeParse(JSON.parse(localStorage.getItem(copyKey(scenarioId, personId)) ?? "null"));
    return parsed.success ? parsed.data : null;
  } catch {
    return null;
  }
}

export function keepCopy(scenarioId: string, personId: string, copy: DraftCopy | null): boolean {
  try {
    if (copy) localStorage.setItem(copyKey(scenarioId, personId), JSON.stringify(copy));
    else localStorage.removeItem(copyKey(scenarioId, personId));
    return true;
  } catch {
    return false;
  }
}

/** Two entries of the same writing. */
export const sameWriting = (a: StoredDraft | null, b: StoredDraft | null): boolean =>
  a === null || b === null ? a === b : a.tab === b.tab && a.turn === b.turn;
