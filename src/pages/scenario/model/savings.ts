import type { Saving } from "#shared/network/savings.ts";
import { setAt } from "./json-path.ts";

/** The scenario with the saving taken; null when it cannot be taken by one setting. */
export const applySaving = (json: unknown, { edits }: Saving): unknown | null =>
  edits.length > 0 ? edits.reduce((changed, { path, value }) => setAt(changed, path, value), json) : null;
