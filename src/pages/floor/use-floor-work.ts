/** What the engine's worker computes of a floor while it is edited: links, floods of the run, contours. The newest edit wins. */
import { useEffect, useMemo, useRef, useState } from "react";
import type { FloodContours } from "#shared/network/contours.ts";
import type { FloodRecord } from "#shared/network/floods.ts";
import type { LinkRow } from "#shared/network/link-table.ts";
import { type PreparedFloor, prepareFloor } from "#shared/network/prepare.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { TaskOutcome } from "#src/workers/contract.ts";
import type { EngineClient } from "#src/workers/pool.ts";

export interface Work<T> {
  /** The last answer; it stays while a newer one is computed. */
  value: T | null;
  /** The scenario that it belongs to. */
  of: unknown;
  busy: boolean;
  /** The worker broke. */
  broken: boolean;
}

const CALM_MS = 90;

/** Asks again when `key` changes, after a moment's calm; answers that came too late are dropped. */
export function useWork<T>(ask: (() => Promise<TaskOutcome<T>>) | null, key: readonly unknown[], of: unknown): Work<T> {
  const [state, setState] = useState<Work<T>>({ value: null, of: null, busy: false, broken: false });
  const turn = useRef(0);
  const first = useRef(true);
  useEffect(() => {
    const mine = ++turn.current;
    if (!ask) return;
    setState((before) => ({ ...before, busy: true, broken: false }));
    const go = () => {
      ask().then(
        (outcome) => {
          if (turn.current !== mine) return;
          if (outcome.ok) setState({ value: outcome.value, of, busy: false, broken: false });
          else setState((before) => ({ ...before, busy: false }));
        },
        () => turn.current === mine && setState((before) => ({ ...before, busy: false, broken: true })),
      );
    };
    if (first.current) {
      first.current = false;
      go();
      return;
    }
    const timer = setTimeout(go, CALM_MS);
    return () => clearTimeout(timer);
    // biome-ignore lint/correctness/useExhaustiveDependencies: the key says when there is something new to ask
  }, key);
  return state;
}

/** With somebody in every part: links do not depend on who runs what, and are shown before that is said. */
function castAnyhow(json: unknown): unknown {
  const { floor, loops, round } = json as Scenario;
  const [a, b = a] = floor?.nodes.map(({ id }) => id) ?? [];
  if (a === undefined || !loops || !round) return json;
  const nodes = { sensor: a, controller: b, actuator: a };
  return {
    ...(json as Scenario),
    floor: { ...floor, beaconNode: null },
    loops: loops.map((loop) => ({ ...loop, nodes })),
    round: {
      ...round,
      otherLoops: (round.otherLoops ?? []).map((loop) => ({ ...loop, nodes })),
      messages: (round.messages ?? []).map((message) => ({ ...message, from: a, to: [] })),
    },
  };
}

export interface FloorWork {
  links: Work<LinkRow[]>;
  floods: Work<FloodRecord>;
  /** Water and shores of the slot's floods; null where links are given as ratios. */
  contours: Work<FloodContours | null>;
}

export function useFloorWork(
  engine: EngineClient | null,
  prepared: PreparedFloor,
  json: unknown,
  seed: number,
  atS: number,
  slotId: string | null,
): FloorWork {
  const scenario = prepared.ok ? prepared.scenario : null;
  const linked = useMemo(() => {
    if (scenario) return scenario;
    const anyhow = prepareFloor(castAnyhow(json));
    return anyhow.ok ? anyhow.scenario : null;
  }, [json, scenario]);
  const moves = linked?.floor?.nodes.some(({ wayPoints }) => wayPoints.length > 0) ?? false;
  const linksAt = moves || (linked?.floor?.interferers.some(({ fromS, untilS }) => fromS > 0 || untilS !== null) ?? false) ? atS : 0;
  const links = useWork(engine && linked ? () => engine.links(linked, linksAt) : null, [engine, linked, linksAt], linked);
  const floods = useWork(engine && scenario ? () => engine.floods(scenario, seed) : null, [engine, scenario, seed], scenario);
  const contours = useWork(
    engine && scenario && slotId ? () => engine.contours(scenario, slotId, { seed, atS: linksAt }) : null,
    [engine, scenario, slotId, seed, linksAt],
    scenario,
  );
  return { links, floods, contours };
}
