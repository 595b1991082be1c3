import { memo, useCallback, useEffect, useMemo, useRef, useState } from "react";
import { useParams, useSearchParams } from "react-router-dom";
import { apiPaths } from "#shared/api/paths.ts";
import type { Advice } from "#shared/network/advice.ts";
import { channelBand, channelsInUse } from "#shared/network/channels.ts";
import { NO_SLOT, received } from "#shared/network/flood.ts";
import { prepareFloor } from "#shared/network/prepare.ts";
import type { RoundTiming } from "#shared/network/round.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import { pathText } from "#shared/scenario/parse.ts";
import { roundsOf } from "#shared/scenario/rounds.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { useTeam } from "#src/app/session.tsx";
import { RoundRibbon } from "#src/components/drawings/round-ribbon.tsx";
import { SlotTable } from "#src/components/drawings/slot-table.tsx";
import { type NodeState, STATE_WORDS } from "#src/components/plan/marks.tsx";
import type { PlanHandle } from "#src/components/plan/plan.tsx";
import type { Spot } from "#src/components/plan/plan-view.ts";
import type { PlotCursor } from "#src/components/plots/plot-cursor.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Section } from "#src/components/ui/section.tsx";
import { Tell } from "#src/components/ui/tell.tsx";
import { useToast } from "#src/components/ui/toast.tsx";
import { counted, fixed } from "#src/lib/format.ts";
import type { Bench } from "#src/pages/scenario/bench/use-bench.ts";
import { describeLosses } from "#src/pages/scenario/model/describe.ts";
import { getAt, parsePath, setAt } from "#src/pages/scenario/model/json-path.ts";
import { PlacementsDialog } from "#src/pages/scenario/placements/placements-dialog.tsx";
import { revealField } from "#src/pages/scenario/reveal.ts";
import { useForm } from "#src/pages/scenario/setup/form.tsx";
import type { EngineClient } from "#src/workers/pool.ts";
import { EmptyFloor } from "./empty-floor.tsx";
import { areaPath, contoursOf } from "./model/contour-paths.ts";
import { floodShown, reachedBy, shortName, statesAt } from "./model/flood-view.ts";
import { floorOf, letFloodsDecide } from "./model/floor-edits.ts";
import { rolesOf, roleText } from "./model/floor-names.ts";
import { type RunShares, runShares } from "./model/run-shares.ts";
import { FloodPanel } from "./panels/flood-panel.tsx";
import { AllLinks, LinksPanel } from "./panels/links-panel.tsx";
import { ModelPanel } from "./panels/model-panel.tsx";
import { NodePanel } from "./panels/node-panel.tsx";
import { OverviewPanel } from "./panels/overview-panel.tsx";
import { PicturePanel } from "./panels/picture-panel.tsx";
import { RolesPanel } from "./panels/roles-panel.tsx";
import { InterfererPanel, ObstaclePanel } from "./panels/thing-panels.tsx";
import { ToolPanel } from "./panels/tool-panel.tsx";
import { PlanPane, planLabel } from "./plan-pane.tsx";
import { SurveySheet } from "./survey-sheet.tsx";
import { ToolsBar } from "./tools-bar.tsx";
import { useFloorWork } from "./use-floor-work.ts";
import { usePictureFile } from "./use-picture.ts";
import { usePlanTools } from "./use-plan-tools.ts";
import { useRound } from "./use-round.ts";
import { useStudio } from "./use-studio.ts";
import { useSurvey } from "./use-survey.ts";
import { WaveStrip } from "./wave-strip.tsx";
import "./floor.css";

export interface FloorViewProps {
  bench: Bench;
  /** Of the round that is being edited; null when its shape is wrong. */
  timing: RoundTiming | null;
  engine: EngineClient | null;
  /** Another seed than the scenario's own. */
  seed: number | null;
  /** Of the bench's plots. */
  cursor: PlotCursor | null;
  onSeed: (seed: number | null) => void;
  /** A setting of the floor that was asked for from elsewhere. */
  shown: { path: string } | null;
  onReveal: (path: string) => void;
  mayUpload: boolean;
}

/** The floor of a scenario: the same draft as the bench, as a plan. */
export function FloorView(props: FloorViewProps) {
  const { draft } = useForm();
  const floor = floorOf(draft.json);
  const [laidOut, setLaidOut] = useState(false);
  return floor ? <FloorStudio {...props} floor={floor} fresh={laidOut} /> : <EmptyFloor onLaidOut={() => setLaidOut(true)} />;
}

/** A node that needs the message should have this share of it. */
const LEAST_RECEIVED = 0.999;
const ALL_RECEIVED = 0.9995;

function FloorStudio({
  bench,
  timing: edited,
  engine,
  seed: otherSeed,
  cursor,
  shown,
  onReveal,
  mayUpload,
  floor,
  fresh,
}: FloorViewProps & { floor: Floor; fresh: boolean }) {
  const { draft, edit, issues, readOnly } = useForm();
  const { json } = draft;
  const scenario = json as Scenario;
  const team = useTeam();
  const toast = useToast();
  const { scenarioId = "" } = useParams();
  const [search] = useSearchParams();
  const studio = useStudio();
  const { selection, select, tool, setTool } = studio;
  const plan = useRef<PlanHandle>(null);
  const [whole, setWhole] = useState(true);

  // ---- the round and its floods
  const seed = otherSeed ?? scenario.run.seed;
  const lastTiming = useRef(edited);
  if (edited) lastTiming.current = edited;
  const timing = edited ?? lastTiming.current;
  const periodS = timing?.periodS ?? 0.02;
  const prepared = useMemo(() => prepareFloor(json), [json]);
  const rounds = prepared.ok ? roundsOf(prepared.scenario) : 1;
  const { round, setRound } = useRound(cursor, timing, rounds, bench.run?.result.durationS ?? null);
  const [slotId, setSlotId] = useState(search.get("slot"));
  const slotIndex = Math.max(0, indexOfSlot(timing, slotId));
  const slot = timing?.slots[slotIndex] ?? null;
  const atS = round * periodS;
  const { links, floods, contours: water } = useFloorWork(engine, prepared, json, seed, atS, slot?.id ?? null);
  const record = floods.value;
  const usable = record && timing && record.slots === timing.slots.length ? record : null;
  const flood = useMemo(
    () => (usable && slot && round < usable.rounds ? floodShown(usable, slot, slotIndex, round) : null),
    [usable, slot, slotIndex, round],
  );
  const idle = flood !== null && flood.first.length > 0 && flood.first[0] === NO_SLOT;
  const [chosenStep, setChosenStep] = useState<number | null>(null);
  const [playing, setPlaying] = useState(false);
  const steps = slot?.steps ?? 1;
  const telling = useMemo(() => (flood ? tellingStep(flood.first, steps) : steps), [flood, steps]);
  const step = Math.min(Math.max(1, chosenStep ?? telling), steps);
  const { relay, transmissions } = scenario.round;
  const states = useMemo(() => {
    if (!flood || idle) return null;
    const at = statesAt(flood, { relay, transmissions }, step);
    const byNode = new Map(flood.nodes.map((id, i) => [id, at[i]]));
    return floor.nodes.map(({ id }): NodeState => byNode.get(id) ?? "plain");
  }, [flood, idle, relay, transmissions, step, floor.nodes]);
  const reached = useMemo(() => (flood ? reachedBy(flood) : []), [flood]);
  const shares = useMemo(() => (usable && timing ? runShares(usable, timing.slots) : null), [usable, timing]);

  // An address may name a round.
  const asked = search.get("round");
  // biome-ignore lint/correctness/useExhaustiveDependencies: once for each address
  useEffect(() => {
    const wanted = Number(asked);
    if (asked !== null && Number.isInteger(wanted) && wanted >= 0) setRound(wanted);
  }, [asked, cursor === null]);

  // ---- the plan
  const roles = useMemo(() => rolesOf(json), [json]);
  const contours = useMemo(
    () => (water.value && !idle ? contoursOf(water.value, { widthM: floor.widthM, depthM: floor.depthM }, floor.nodes) : null),
    [water.value, idle, floor.widthM, floor.depthM, floor.nodes],
  );
  const fouled = useMemo(
    () => (water.value?.fouled && water.value.fouled.rings.length > 0 ? [{ index: 0, path: areaPath(water.value.fouled.rings) }] : []),
    [water.value],
  );
  const url = floor.picture ? apiPaths.picture(team.id, floor.picture.id) : null;
  const { file, missing } = usePictureFile(url);
  const picture = floor.picture &&
    file && {
      url: file.url,
      xM: floor.picture.xM,
      yM: floor.picture.yM,
      widthM: file.widthPx * floor.picture.metresPerPixel,
      depthM: file.heightPx * floor.picture.metresPerPixel,
      opacity: floor.picture.opacity,
    };
  const [scaling, setScaling] = useState<readonly Spot[] | null>(null);
  const defaults = useMemo(() => interferenceBand(scenario), [scenario]);
  const tools = usePlanTools(
    floor,
    studio,
    { scaling: tool === "picture" && scaling !== null && scaling.length < 2, onPoint: (spot) => setScaling((before) => [...(before ?? []), spot]) },
    defaults,
  );

  // ---- the survey
  const surveyed = useSurvey(engine, prepared.ok ? prepared.scenario : null, seed, scenarioId);
  const [onPlan, setOnPlan] = useState(true);
  const marks = useMemo(() => {
    const { survey, stale } = surveyed;
    const of = survey?.slots.find(({ id }) => id === slot?.id);
    if (!of || stale || !onPlan) return null;
    // Where nothing is lost the plan says nothing.
    const lossy = of.nodes.filter(({ ratio }) => ratio < ALL_RECEIVED);
    return new Map(
      lossy.map(({ node, ratio, needed }) => [
        node,
        { text: `${fixed(ratio * 100, ratio > 0.99 ? 2 : 1)}\u2009%`, weak: needed ? ratio < LEAST_RECEIVED : ratio < 0.5 },
      ]),
    );
  }, [surveyed, slot?.id, onPlan]);

  const selectNode = useCallback(
    (id: number) => {
      select({ kind: "node", id });
      const node = floor.nodes.find((one) => one.id === id);
      if (node) plan.current?.show(node);
    },
    [select, floor.nodes],
  );

  // ---- what was asked for from elsewhere
  const [modelOpen, setModelOpen] = useState(0);
  // biome-ignore lint/correctness/useExhaustiveDependencies: once for each request
  useEffect(() => {
    if (!shown) return;
    const [, list, index] = parsePath(shown.path);
    if (list === "nodes" && typeof index === "number") {
      const id = getAt(json, ["floor", "nodes", index, "id"]);
      if (typeof id === "number") select({ kind: "node", id });
    } else if (list === "obstacles" && typeof index === "number") select({ kind: "obstacle", index });
    else if (list === "interferers" && typeof index === "number") select({ kind: "interferer", index });
    else if (list === "picture") setTool("picture");
    else {
      select(null);
      if (list === "links") setModelOpen((count) => count + 1);
    }
    revealField(shown.path);
  }, [shown]);

  const nodeIndex = selection?.kind === "node" ? floor.nodes.findIndex(({ id }) => id === selection.id) : -1;
  const node = floor.nodes[nodeIndex];
  const obstacleChosen = selection?.kind === "obstacle" && selection.index < floor.obstacles.length ? selection.index : -1;
  const interfererChosen = selection?.kind === "interferer" && selection.index < floor.interferers.length ? selection.index : -1;
  const nothing = !node && obstacleChosen < 0 && interfererChosen < 0;
  const rolesBad = !prepared.ok && prepared.issues.some(({ path }) => /^(loops|round)/.test(path));
  const impossible = prepared.ok ? null : (prepared.issues[0]?.message ?? "Put the marked fields right first.");
  const stateSum = (id: number): string => {
    const i = flood ? flood.nodes.indexOf(id) : -1;
    if (!flood || idle || i < 0) return "";
    const first = flood.first[i];
    if (first === 0) return STATE_WORDS.starts;
    return received(first)
      ? `first received in step ${first}`
      : states && STATE_WORDS[states[floor.nodes.findIndex((one) => one.id === id)]] === STATE_WORDS.off
        ? STATE_WORDS.off
        : "lost in this round";
  };
  const floodWords =
    slot && flood && !idle
      ? `flood of slot ${slotIndex + 1}, step ${step} of ${steps}, ${reached[step - 1] ?? 0} of ${flood.nodes.length} nodes have it`
      : null;

  const latest = useRef(json);
  latest.current = json;
  const apply = useCallback(
    (advice: Advice) => {
      const next = advice.edits.reduce<unknown>((changed, { path, value }) => setAt(changed, path, value), latest.current);
      edit({ kind: "put", json: next, forget: advice.edits.map(({ path }) => path) });
      toast({
        text: `Set: ${advice.edits
          .map(({ path, value }) => `${pathText(path)} = ${JSON.stringify(value)}`)
          .join(", ")
          .slice(0, 120)}. Undo takes it back; survey again to see what it brings.`,
      });
    },
    [edit, toast],
  );

  const { takeAway } = tools;
  const goToRound = useCallback(
    (next: number) => {
      setChosenStep(null);
      setRound(next, slot?.floodStartS ?? 0);
    },
    [setRound, slot],
  );
  // While something is dragged on the plan, nothing of this changes.
  // biome-ignore lint/correctness/useExhaustiveDependencies: what is left out follows from what is named
  const side = useMemo(
    () => (
      <section className="fl-side" aria-label="Side panel">
        {rolesBad && <RolesPanel bad defaultOpen />}
        {tool === "picture" ? (
          <PicturePanel floor={floor} mayUpload={mayUpload} missing={missing} scaling={scaling} onScaling={setScaling} />
        ) : (
          <ToolPanel floor={floor} studio={studio} defaults={defaults} />
        )}
        {node && (
          <>
            <NodePanel
              key={`node ${node.id}`}
              floor={floor}
              index={nodeIndex}
              sum={[roleText(roles.get(node.id)), stateSum(node.id)].filter(Boolean).join(" · ")}
              radioDbm={scenario.radio.txPowerDbm}
              studio={studio}
              onRemove={() => takeAway(`node:${node.id}`)}
            />
            <LinksPanel floor={floor} node={node} links={links.value} missing={links.busy ? null : impossible} onNode={selectNode} />
          </>
        )}
        {obstacleChosen >= 0 && (
          <ObstaclePanel
            key={`obstacle ${obstacleChosen}`}
            floor={floor}
            index={obstacleChosen}
            studio={studio}
            onRemove={() => takeAway(`obstacle:${obstacleChosen}`)}
          />
        )}
        {interfererChosen >= 0 && (
          <InterfererPanel
            key={`interferer ${interfererChosen}`}
            floor={floor}
            index={interfererChosen}
            studio={studio}
            onRemove={() => takeAway(`interferer:${interfererChosen}`)}
          />
        )}
        {flood && slot && timing && usable && !idle && (
          <FloodPanel
            floor={floor}
            record={usable}
            slot={slot}
            slotIndex={slotIndex}
            flood={flood}
            round={round}
            timing={timing}
            seed={seed}
            onRound={goToRound}
          />
        )}
        {nothing && <OverviewPanel floor={floor} roles={roles} studio={studio} />}
        {nothing && !rolesBad && <RolesPanel bad={false} defaultOpen={fresh} />}
        {nothing && <ModelPanel key={`model ${modelOpen}`} floor={floor} defaultOpen={modelOpen > 0} />}
      </section>
    ),
    [
      floor,
      json,
      studio.tool,
      selection,
      roles,
      links,
      flood,
      usable,
      states,
      slot,
      round,
      seed,
      scaling,
      missing,
      mayUpload,
      rolesBad,
      impossible,
      modelOpen,
      fresh,
      defaults,
      goToRound,
      readOnly,
    ],
  );

  return (
    <div className="fl">
      {issues.length > 0 && (
        <Tell>
          <span>
            {issues[0].rule} {issues[0].more}
            {issues.length > 1 && ` And ${counted(issues.length - 1, "other field")} to put right.`}
          </span>
          <Button small onClick={() => onReveal(issues[0].path)}>
            Show it
          </Button>
        </Tell>
      )}
      {scenario.losses.process.type !== "flood" && (
        <Tell calm>
          <span>
            What is lost comes from elsewhere at present: {describeLosses(json)}. The floods below are drawn with the run’s seed and decide nothing.
          </span>
          {!readOnly && (
            <Button small impossible={impossible} onClick={() => edit(letFloodsDecide(json))}>
              Let floods decide
            </Button>
          )}
        </Tell>
      )}
      {!prepared.ok && issues.length === 0 && (
        <Tell calm>
          <span>Floods cannot be drawn yet. {prepared.issues[0]?.message}</span>
        </Tell>
      )}
      <div className="fl-lay">
        <section aria-label="Plan" className="fl-plan">
          <ToolsBar tool={tool} onTool={setTool} readOnly={readOnly} plan={plan} whole={whole} />
          <div className="sheet doc">
            <PlanPane
              floor={floor}
              studio={studio}
              tools={tools}
              roles={roles}
              links={links.value}
              states={states}
              contours={contours}
              fouled={fouled}
              step={step}
              atS={atS}
              surveyed={marks}
              picture={picture || null}
              scalingPoints={tool === "picture" ? (scaling ?? []) : []}
              label={planLabel(floor, floodWords)}
              readOnly={readOnly}
              plan={plan}
              onWhole={setWhole}
            />
            {slot && timing && prepared.ok && (
              <WaveStrip
                slots={timing.slots}
                slot={slot}
                title={`from ${slot.from === null ? "nobody yet" : shortName(floor, slot.from)}`}
                contoured={contours !== null}
                reached={flood ? reached : null}
                nodes={flood?.nodes.length ?? floor.nodes.length}
                step={step}
                playing={playing}
                idle={idle}
                busy={floods.busy}
                broken={floods.broken}
                onStep={setChosenStep}
                onPlay={setPlaying}
                onSlot={setSlotId}
              />
            )}
          </div>
        </section>
        {side}
      </div>
      {timing && timing.slots.length > 0 && (
        <RoundSheet
          timing={timing}
          floor={floor}
          shares={shares}
          rounds={rounds}
          slotId={slot?.id ?? null}
          onSlot={setSlotId}
          name={scenario.name}
          seed={otherSeed}
        />
      )}
      <Survey
        control={surveyed}
        floor={floor}
        roles={roles}
        slotId={slot?.id ?? ""}
        impossible={impossible}
        readOnly={readOnly}
        onPlan={onPlan}
        onOnPlan={setOnPlan}
        onNode={selectNode}
        onApply={apply}
      />
      {links.value && floor.nodes.length > 1 && (
        <div className="fl-below">
          <Section
            title="All links"
            sum={`${links.value.filter(({ prr }) => prr >= 0.9).length} of ${links.value.length} received by 90\u2009% and more`}
          >
            <Links floor={floor} links={links.value} fileStem={scenario.name} />
          </Section>
        </div>
      )}
    </div>
  );
}

/** What lies below the plan is drawn again when it changes, not while something is dragged. */
const Survey = memo(SurveySheet);
const Links = memo(AllLinks);

interface RoundSheetProps {
  timing: RoundTiming;
  floor: Floor;
  shares: RunShares | null;
  rounds: number;
  slotId: string | null;
  onSlot: (id: string) => void;
  name: string;
  /** Another seed than the scenario's own. */
  seed: number | null;
}

const RoundSheet = memo(function RoundSheet({ timing, floor, shares, rounds, slotId, onSlot, name, seed }: RoundSheetProps) {
  const [comparing, setComparing] = useState(false);
  return (
    <section className="sheet doc fl-below" aria-label="Round">
      <div className="pad">
        <div className="hrow">
          <h2>Round</h2>
          <span className="rt">
            Choose a slot to see its flood on the plan{" "}
            <Button small onClick={() => setComparing(true)}>
              Compare placements
            </Button>
          </span>
          {comparing && <PlacementsDialog seed={seed} onClose={() => setComparing(false)} />}
        </div>
        <RoundRibbon timing={timing} reachedShare={shares?.reached} selected={slotId} onSelect={onSlot} tabled />
        <SlotTable
          timing={timing}
          floor={floor}
          delivered={shares?.delivered}
          deliveredOver={
            shares
              ? `in the ${shares.rounds === rounds ? "" : "first "}${shares.rounds} rounds planned for this run; outages of the losses come on top`
              : undefined
          }
          selected={slotId}
          onSelect={onSlot}
          fileStem={name}
        />
      </div>
    </section>
  );
});

/** The asked slot, else the first measurement, else the first of all. */
function indexOfSlot(timing: RoundTiming | null, id: string | null): number {
  if (!timing) return 0;
  const asked = timing.slots.findIndex((slot) => slot.id === id);
  if (asked >= 0) return asked;
  return timing.slots.findIndex(({ message }) => message === "measurement");
}

/** Where a still picture tells most: the step in which more nodes receive than in any other after the first. */
function tellingStep(first: Uint8Array, steps: number): number {
  const counts = new Array<number>(steps + 1).fill(0);
  for (const at of first) if (received(at) && at > 0 && at <= steps) counts[at]++;
  let best = 0;
  for (let s = 2; s <= steps; s++) if (counts[s] > (best > 0 ? counts[best] : 0)) best = s;
  return best > 0 ? best : counts[1] > 0 ? 1 : steps;
}

/** A new interferer begins in the middle of the channel in use, where it is felt. */
function interferenceBand({ radio }: Scenario): { centreMHz: number; bandwidthMHz: number } {
  try {
    return { centreMHz: channelBand(radio.phy, channelsInUse(radio)[0]).centreMHz, bandwidthMHz: 20 };
  } catch {
    return { centreMHz: 2440, bandwidthMHz: 20 };
  }
}
