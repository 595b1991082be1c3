import { useEffect, useRef } from "react";
import { createEngine, type EngineClient } from "#src/workers/pool.ts";

/** The engine's worker, started when it is first asked for and stopped with the page. */
export function useRunEngine(): () => EngineClient {
  const engine = useRef<EngineClient | null>(null);
  useEffect(
    () => () => {
      engine.current?.dispose();
      engine.current = null;
    },
    [],
  );
  return () => {
    engine.current ??= createEngine();
    return engine.current;
  };
}
