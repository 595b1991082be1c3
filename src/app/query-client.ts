import { QueryClient } from "@tanstack/react-query";
import { isApiError } from "#src/api/client.ts";
import { connection } from "#src/api/connection.ts";

/** What the server said stands; only a mistake on its side is worth one more try. An outage is waited for, see below. */
const retry = (failures: number, error: unknown) => failures < 1 && (isApiError(error, "internal") || !isApiError(error));

export function createQueryClient(): QueryClient {
  const client = new QueryClient({
    defaultOptions: {
      // "always": the server may be on this very machine, which needs no network.
      queries: { networkMode: "always", retry, retryDelay: 800, staleTime: 10_000 },
      mutations: { networkMode: "always", retry: false },
    },
  });
  connection.onRecovery(() => void client.refetchQueries({ type: "active", stale: true }));
  return client;
}
