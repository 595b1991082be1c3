import { z } from "zod";

export const personSchema = z.strictObject({ id: z.uuid(), name: z.string() });

const MAX_PAGE = 1_000_000;

/** Query parameters of every list; pages count from 1. */
export const pageQuery = {
  page: z.coerce.number().int().min(1).max(MAX_PAGE).default(1),
  pageSize: z.coerce.number().int().min(1).max(100).default(10),
};

export const pageOf = <Item extends z.ZodType>(item: Item) => ({
  items: z.array(item),
  /** Items that match the filters, on all pages. */
  total: z.int().nonnegative(),
  page: z.int().positive(),
  pageSize: z.int().positive(),
});

/** "not-decided": no limits, or no run yet. "does-not-fit": the round is longer than its period. */
export const VERDICTS = ["holds", "near", "crosses", "not-decided", "does-not-fit"] as const;
export const verdictStateSchema = z.enum(VERDICTS);

/** One word and one sentence, as on every screen. */
export const verdictSchema = z.strictObject({ state: verdictStateSchema, word: z.string(), sentence: z.string() });
export type VerdictLine = z.infer<typeof verdictSchema>;

/** Messages of a run: ratio = 1 - lost / sent, null when none were sent. */
export const deliverySchema = z.strictObject({
  sent: z.int().nonnegative(),
  lost: z.int().nonnegative(),
  ratio: z.number().min(0).max(1).nullable(),
});
export type Delivery = z.infer<typeof deliverySchema>;

/** What a revision's author says about it. */
export const noteSchema = z.string().trim().max(500).default("");

/** A scenario that names a reception log or shows a picture, and the saved revisions in which it does. */
export const useSchema = z.strictObject({ id: z.uuid(), name: z.string(), archived: z.boolean(), revisions: z.array(z.int().positive()).min(1) });
export type Use = z.infer<typeof useSchema>;
