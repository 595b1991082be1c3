/** Spans of time in messages; whole nanoseconds in. */
export const ms = (ns: number): string => (Math.abs(ns) < 1e5 && ns !== 0 ? `${(ns / 1e3).toFixed(0)} µs` : `${(ns / 1e6).toFixed(2)} ms`);

/** Rounded up: who enters this period gets a round that fits. */
export const msAtLeast = (ns: number): string => ms(Math.ceil(ns / 1e4) * 1e4);
