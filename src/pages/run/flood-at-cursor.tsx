import { useId, useMemo, useRef, useState } from "react";
import { Link } from "react-router-dom";
import "./flood-at-cursor.css";
import type { FloodRecord } from "#shared/network/floods.ts";
import { placeAt, wayOf } from "#shared/network/geometry.ts";
import { occurs, type RoundTiming, type Slot } from "#shared/network/round.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { Hall, HallOutline, ObstacleLayer, PlanTextures } from "#src/components/plan/ground.tsx";
import { InterfererShape, NodeShape, type NodeState, STATE_WORDS } from "#src/components/plan/marks.tsx";
import { type PlanFrame, type Spot, toPoint, wholeView } from "#src/components/plan/plan-view.ts";
import "#src/components/plan/plan.css";
import { useWidth } from "#src/components/plots/measure.ts";
import { useCursorValue } from "#src/components/plots/plot-cursor.ts";
import { niceStep } from "#src/components/plots/units.ts";
import { PickField } from "#src/components/ui/choice.tsx";
import { Mark } from "#src/components/ui/mark.tsx";
import { Loading } from "#src/components/ui/states.tsx";
import { counted, significant, withUnit } from "#src/lib/format.ts";
import { floodSentences, floodShown, reachedBy, statesAt } from "#src/pages/floor/model/flood-view.ts";
import { type RunShares, runShares } from "#src/pages/floor/model/run-shares.ts";
import { useWork, type Work } from "#src/pages/floor/use-floor-work.ts";
import type { EngineClient } from "#src/workers/pool.ts";

interface FloodAtCursorProps {
  scenario: Scenario;
  timing: RoundTiming;
  floods: RunFloods;
  /** Address of the floor page at this round and slot; null: it would show other floods. */
  floorAt: ((round: number, slotId: string) => string) | null;
}

/** Do floods decide what this scenario delivers? */
export const floodsDecide = ({ floor, losses }: Scenario): boolean => floor !== null && losses.process.type === "flood";

export interface RunFloods {
  work: Work<FloodRecord>;
  /** What they come to over the run; null before they are drawn. */
  shares: RunShares | null;
}

/** Every flood of a run, drawn anew in the worker; engine null: none is drawn. */
export function useRunFloods(
  engine: Pick<EngineClient, "floods"> | null,
  run: { scenario: Scenario; timing: RoundTiming; seed: number } | null,
): RunFloods {
  const wanted = engine && run && floodsDecide(run.scenario) ? run : null;
  const work = useWork(engine && wanted ? () => engine.floods(wanted.scenario, wanted.seed) : null, [engine, wanted], wanted?.scenario);
  const { value, of } = work;
  const shares = useMemo(
    () => (value && wanted && of === wanted.scenario && value.slots === wanted.timing.slots.length ? runShares(value, wanted.timing.slots) : null),
    [value, of, wanted],
  );
  return useMemo(() => ({ work, shares }), [work, shares]);
}

/** The flood of a slot in the round under the cursor of the plots, on a small plan. */
export function FloodAtCursor({ scenario, timing, floods, floorAt }: FloodAtCursorProps) {
  const { value: record, busy, broken } = floods.work;
  const [slotId, setSlotId] = useState<string | null>(null);
  const own = timing.slots.find(({ message }) => message === "measurement") ?? timing.slots[0];
  const chosen = timing.slots.find(({ id }) => id === slotId) ?? own;
  const index = chosen ? timing.slots.indexOf(chosen) : -1;
  const round = useCursorValue(({ timeS }) => Math.max(0, Math.floor(timeS / timing.periodS + 1e-6)));
  const { floor } = scenario;
  if (!floor || !chosen) return null;
  const usable = record && record.slots === timing.slots.length && record.nodes.length === floor.nodes.length ? record : null;
  const several = timing.loops.length > 1;
  const wordOf = (slot: Slot) =>
    [
      slot.label,
      ...(slot.copy > 1 ? ["second slot"] : []),
      ...(several ? timing.loops.filter(({ loop }) => loop === slot.loop).map(({ name }) => name) : []),
    ].join(", ");
  return (
    <section className="flood-at" aria-label="Flood at the cursor" aria-busy={busy || undefined}>
      <PickField
        label="Flood"
        options={timing.slots.map((slot, i) => ({ value: slot.id, word: `${i + 1} ${wordOf(slot)}` }))}
        value={chosen.id}
        onChoose={setSlotId}
      />
      {usable ? (
        <Shown {...{ scenario, floor, record: usable, slot: chosen, index, timing }} round={Math.min(round, usable.rounds - 1)} floorAt={floorAt} />
      ) : broken ? (
        <p className="note second">The engine stopped; the flood is not drawn.</p>
      ) : (
        <Loading what="The floods are drawn" />
      )}
    </section>
  );
}

interface ShownProps extends Pick<FloodAtCursorProps, "scenario" | "timing" | "floorAt"> {
  floor: Floor;
  record: FloodRecord;
  slot: Slot;
  index: number;
  round: number;
}

function Shown({ scenario, timing, floor, record, slot, index, round, floorAt }: ShownProps) {
  const flood = useMemo(() => floodShown(record, slot, index, round), [record, slot, index, round]);
  const states = useMemo(() => statesAt(flood, scenario.round, slot.steps), [flood, scenario.round, slot.steps]);
  const link = floorAt && <Link to={floorAt(round, slot.id)}>Step by step</Link>;
  if (!occurs(slot, round))
    return (
      <p className="note second">
        Round {round}: this slot does not occur. {link}
      </p>
    );
  const reached = reachedBy(flood).at(-1) ?? 0;
  return (
    <>
      <SmallPlan
        floor={floor}
        states={states}
        atS={round * timing.periodS}
        label={`Plan of the floor, round ${round}: ${reached} of ${flood.nodes.length} nodes have the message. ${lostWords(floor, states)}`}
      />
      <p className="note">
        Round {round}: <b>{reached}</b> of {flood.nodes.length} nodes have it. {link}
      </p>
      {floodSentences(flood, floor)
        .filter(({ mark }) => mark !== "not-decided")
        .map(({ mark, text }) => (
          <p key={text} className="note flood-said">
            <Mark state={mark} size={13} quiet /> <span>{text}</span>
          </p>
        ))}
    </>
  );
}

function lostWords(floor: Floor, states: readonly NodeState[]): string {
  const lost = floor.nodes.filter((_, i) => states[i] === "lost").map(({ id }) => id);
  return lost.length > 0 ? `${counted(lost.length, "node")} ${STATE_WORDS.lost}: ${lost.join(", ")}.` : "";
}

interface SmallPlanProps {
  floor: Floor;
  states: readonly NodeState[];
  atS: number;
  label: string;
}

const MOST_HEIGHT = 260;

/** To look at only: walls, nodes and what became of them. */
function SmallPlan({ floor, states, atS, label }: SmallPlanProps) {
  const host = useRef<HTMLDivElement>(null);
  const prefix = useId().replaceAll(":", "");
  const width = Math.max(180, useWidth(host) || 272);
  const size = { widthM: floor.widthM, depthM: floor.depthM };
  const height = Math.round(Math.min(MOST_HEIGHT, Math.max(80, ((width - 4) * size.depthM) / size.widthM)));
  const frame: PlanFrame = { left: 2, top: 2, width: width - 4, height };
  const view = wholeView(frame, size);
  const spots = spotsAt(floor, atS);
  const at = (spot: Spot) => toPoint(view, frame, spot);
  const bar = niceStep(60 / view.scale);
  const r = floor.nodes.length > 30 ? 4 : 6.5;
  return (
    <div ref={host}>
      <svg width={width} height={height + 22} viewBox={`0 0 ${width} ${height + 22}`} role="img" aria-label={label} className="flood-plan">
        <g
          transform={`translate(${frame.left - view.xM * view.scale} ${frame.top - view.yM * view.scale}) scale(${view.scale})`}
          className="pl-ground"
        >
          <PlanTextures scale={view.scale} prefix={prefix} />
          <Hall size={size} />
          <ObstacleLayer obstacles={floor.obstacles} selected={null} prefix={prefix} />
          <HallOutline size={size} />
        </g>
        {floor.interferers.map((one, i) => {
          const { x, y } = at(one);
          return (
            // biome-ignore lint/suspicious/noArrayIndexKey: interferers have no other name
            <g key={i} transform={`translate(${x.toFixed(1)} ${y.toFixed(1)}) scale(0.6)`}>
              <InterfererShape />
            </g>
          );
        })}
        {floor.nodes.map(({ id }, i) => {
          const { x, y } = at(spots[i] ?? { xM: 0, yM: 0 });
          return (
            <g key={id} transform={`translate(${x.toFixed(1)} ${y.toFixed(1)})`}>
              <title>{`Node ${id}, ${STATE_WORDS[states[i] ?? "plain"]}`}</title>
              <NodeShape state={states[i] ?? "plain"} r={r} />
            </g>
          );
        })}
        <rect x={frame.left} y={height + 10} width={bar * view.scale} height="5" className="neat" />
        <rect x={frame.left} y={height + 10} width={(bar * view.scale) / 2} height="5" className="neatf" />
        <text x={frame.left + bar * view.scale + 7} y={height + 17} className="ax">
          {withUnit(significant(bar, 3), "m")}
        </text>
      </svg>
    </div>
  );
}

function spotsAt(floor: Floor, atS: number): Spot[] {
  const out = new Float64Array(3);
  return floor.nodes.map((node) => {
    placeAt(wayOf(node), atS, out);
    return { xM: out[0] ?? 0, yM: out[1] ?? 0 };
  });
}
