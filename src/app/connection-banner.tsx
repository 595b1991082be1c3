import { useEffect, useSyncExternalStore } from "react";
import { connection } from "#src/api/connection.ts";
import { useToast } from "#src/components/ui/toast.tsx";

const WORDS = {
  "server-down": "The server cannot be reached.",
  "database-down": "The database does not answer.",
};

export function ConnectionBanner() {
  const state = useSyncExternalStore(connection.subscribe, () => connection.state);
  const toast = useToast();
  useEffect(() => connection.onRecovery(() => toast({ text: "Connected again." })), [toast]);
  return (
    <div role="alert" className="sticky top-0 z-15">
      {state !== "up" && (
        <div className="banner noprint">
          <div>
            <b className="strong">{WORDS[state]}</b>
            <span>It is tried again every few seconds. What you typed stays in this page.</span>
          </div>
        </div>
      )}
    </div>
  );
}
