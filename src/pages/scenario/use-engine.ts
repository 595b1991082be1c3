import { useEffect, useState } from "react";
import { createEngine, type EngineClient } from "#src/workers/pool.ts";

/** One worker for as long as the page is shown. */
export function useEngine(): EngineClient | null {
  const [engine, setEngine] = useState<EngineClient | null>(null);
  useEffect(() => {
    const made = createEngine();
    setEngine(made);
    return () => {
      made.dispose();
      setEngine(null);
    };
  }, []);
  return engine;
}
