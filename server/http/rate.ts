/** So many in a window of time, counted per person: what one person sends cannot fill the server. */
import { HttpError } from "./errors.ts";
import type { Member } from "./team-routes.ts";

const WINDOW_MS = 15 * 60 * 1000;

export function limitPerPerson(what: string, limit: number, now: () => number = Date.now) {
  const windows = new Map<string, { until: number; count: number }>();
  return ({ user }: Member): void => {
    const at = now();
    for (const [id, { until }] of windows) if (until <= at) windows.delete(id);
    const window = windows.get(user.id) ?? { until: at + WINDOW_MS, count: 0 };
    if (window.count >= limit) {
      const retryAfterS = Math.ceil((window.until - at) / 1000);
      const minutes = Math.ceil(retryAfterS / 60);
      const wait = `Try again in ${minutes} ${minutes === 1 ? "minute" : "minutes"}.`;
      throw new HttpError("too-many-attempts", `You sent ${window.count} ${what}; ${limit} are taken in 15 minutes. ${wait}`, { retryAfterS });
    }
    window.count++;
    windows.set(user.id, window);
  };
}
