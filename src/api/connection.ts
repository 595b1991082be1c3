/** Can the server and its database be reached? Known from every request; while not, /api/health is asked until they can. */
import { apiPaths } from "#shared/api/paths.ts";
import { healthResponse } from "#shared/api/session.ts";

type Connection = "up" | "server-down" | "database-down";

const FIRST_WAIT_MS = 1000;
const LONGEST_WAIT_MS = 5000;

async function look(): Promise<Connection> {
  try {
    const response = await fetch(apiPaths.health(), { credentials: "same-origin", signal: AbortSignal.timeout(5000) });
    const health = healthResponse.safeParse(await response.json());
    if (!health.success) return "server-down";
    return health.data.database ? "up" : "database-down";
  } catch {
    return "server-down";
  }
}

function createConnection() {
  let state: Connection = "up";
  let looking = false;
  const listeners = new Set<() => void>();
  const recovered = new Set<() => void>();

  const become = (next: Connection) => {
    if (next === state) return;
    state = next;
    for (const listener of [...listeners]) listener();
    if (next === "up") for (const listener of [...recovered]) listener();
  };
  const watch = async () => {
    if (looking) return;
    looking = true;
    for (let wait = FIRST_WAIT_MS; state !== "up"; wait = Math.min(LONGEST_WAIT_MS, wait * 1.5)) {
      await new Promise((resolve) => setTimeout(resolve, wait));
      become(await look());
    }
    looking = false;
  };

  return {
    get state() {
      return state;
    },
    lost(what: "server" | "database") {
      become(what === "server" ? "server-down" : "database-down");
      void watch();
    },
    subscribe(listener: () => void) {
      listeners.add(listener);
      return () => void listeners.delete(listener);
    },
    /** Called when all can be reached again. */
    onRecovery(listener: () => void) {
      recovered.add(listener);
      return () => void recovered.delete(listener);
    },
  };
}

export const connection = createConnection();
