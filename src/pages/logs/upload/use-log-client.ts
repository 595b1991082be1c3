import { useEffect, useState } from "react";
import { createLogClient, type LogClient } from "#src/workers/log-client.ts";

/** One worker for as long as the page is shown. */
export function useLogClient(): LogClient | null {
  const [client, setClient] = useState<LogClient | null>(null);
  useEffect(() => {
    const made = createLogClient();
    setClient(made);
    return () => {
      made.dispose();
      setClient(null);
    };
  }, []);
  return client;
}
