/** For parts of the picture that say nothing to the ear: what they show is told elsewhere. */
export const HIDDEN = { "aria-hidden": true } as const;
