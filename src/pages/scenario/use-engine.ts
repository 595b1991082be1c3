import { useEffect, useState } from "react";
import { createEngine, type EngineClient } from "#src/workers/pool.ts";

/** One worker for as long as the page is shown. */
export function useEngine(): EngineClient | null {
  const [engine, setEngine] = useState<EngineClient | null>(null);
  useEffect(() => {
    const made = createEngine();
    let gone = false;
    // Asked for nothing first: the time of the first run is then that of the run, not that of loading the worker.
    const ready = () => {
      if (!gone) setEngine(made);
    };
    made.run(null, null).then(ready, ready);
    return () => {
      gone = true;
      made.dispose();
      setEngine(null);
    };
  }, []);
  return engine;
}
