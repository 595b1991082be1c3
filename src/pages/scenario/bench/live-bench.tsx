import { memo, type ReactNode, useMemo } from "react";
import type { RoundTiming } from "#shared/network/round.ts";
import { verdictSentence } from "#shared/simulation/verdict-text.ts";
import { RoundRibbon } from "#src/components/drawings/round-ribbon.tsx";
import { RunBench } from "#src/components/drawings/run-bench.tsx";
import type { PlotCursor } from "#src/components/plots/plot-cursor.ts";
import { Button, ButtonPair, IconButton } from "#src/components/ui/button.tsx";
import { Mark, VerdictLine } from "#src/components/ui/mark.tsx";
import { Empty, Loading } from "#src/components/ui/states.tsx";
import { counted, msText, significant, withUnit } from "#src/lib/format.ts";
import { FloodAtCursor, floodsDecide, useRunFloods } from "#src/pages/run/flood-at-cursor.tsx";
import type { EngineProgress } from "#src/workers/contract.ts";
import type { EngineClient } from "#src/workers/pool.ts";
import { clockText } from "../clock.ts";
import type { FieldIssue } from "../model/judge.ts";
import type { Bench, BenchRun } from "./use-bench.ts";

interface LiveBenchProps {
  bench: Bench;
  /** Of the round that is being edited, also when it does not fit. */
  timing: RoundTiming | null;
  issues: readonly FieldIssue[];
  /** Was the last good value of the only bad field: "with plan at 6 steps". */
  lastGood: string | null;
  seed: number | null;
  /** For the flood under the cursor; without it none is drawn. */
  engine?: EngineClient | null;
  /** Address of the floor at a round and slot. */
  floorAt?: (round: number, slotId: string) => string;
  /** Shared with the floor; without it the plots have their own. */
  cursor?: PlotCursor | null;
  onSeed: (seed: number | null) => void;
  onFirstIssue: () => void;
  /** Beside the seed: keeping the run. */
  actions: ReactNode;
}

/** Drawn again when there is another run, not at each key. */
const Pictures = memo(RunBench);

const LARGEST_SEED = 4_294_967_295;

/** Verdict, limits, machine, plots, tapes and round of what is being edited. */
export function LiveBench({ bench, timing, issues, lastGood, seed, engine, floorAt, cursor, onSeed, onFirstIssue, actions }: LiveBenchProps) {
  const { run, progress, broken, cancelled } = bench;
  const stale = issues.length > 0;
  const floods = useRunFloods(
    engine ?? null,
    useMemo(() => run && { ...run, seed: run.result.seed }, [run]),
  );
  // The same element for as long as the run is: the pictures are not drawn again at each key.
  const flood = useMemo(
    () =>
      run && floodsDecide(run.scenario) ? (
        <FloodAtCursor scenario={run.scenario} timing={run.timing} floods={floods} floorAt={floorAt ?? null} />
      ) : null,
    [run, floods, floorAt],
  );
  return (
    <section className="bench sheet doc" aria-label="Live bench" aria-busy={progress !== null}>
      <div className="pad">
        <Head {...{ bench, timing, issues, lastGood, stale, onFirstIssue }} />
        <div className="bench-acts">
          <ButtonPair label="Seed">
            <SeedStep icon="left" label="The seed before" run={run} step={-1} onSeed={onSeed} />
            <SeedStep icon="right" label="Another seed" run={run} step={1} onSeed={onSeed} />
          </ButtonPair>
          <span className="small second">another seed</span>
          {seed !== null && run && run.scenario.run.seed !== run.result.seed && (
            <Button small kind="bare" onClick={() => onSeed(null)}>
              Back to seed {run.scenario.run.seed}
            </Button>
          )}
          {(broken || cancelled) && (
            <Button small onClick={bench.again}>
              Run it
            </Button>
          )}
          <span className="ml-auto">{actions}</span>
        </div>
        {run ? (
          <Pictures
            scenario={run.scenario}
            timing={run.timing}
            result={run.result}
            stale={stale}
            cursor={cursor ?? undefined}
            beside={flood}
            reached={floods.shares}
          />
        ) : stale ? (
          <>
            <Empty title="No result yet" text="The bench runs as soon as every marked field is put right." />
            {timing && (
              <section className="bench-round-only" aria-label="Round">
                <div className="hrow">
                  <h2>Round</h2>
                </div>
                <RoundRibbon timing={timing} />
              </section>
            )}
          </>
        ) : broken || cancelled ? (
          <Empty title={broken ? "The engine stopped" : "The run was stopped"} text={broken ? "Nothing that you entered is lost." : undefined}>
            <Button onClick={bench.again}>Run it again</Button>
          </Empty>
        ) : (
          <Loading what="The first run is computed" />
        )}
      </div>
    </section>
  );
}

function SeedStep({
  icon,
  label,
  run,
  step,
  onSeed,
}: {
  icon: "left" | "right";
  label: string;
  run: BenchRun | null;
  step: 1 | -1;
  onSeed: (seed: number) => void;
}) {
  const next = (run?.result.seed ?? 0) + step;
  const possible = run !== null && next >= 0 && next <= LARGEST_SEED;
  return (
    <IconButton
      small
      icon={icon}
      iconSize={14}
      label={possible ? `${label}: ${next}` : label}
      impossible={possible ? null : "There is none."}
      onClick={() => onSeed(next)}
    />
  );
}

type HeadProps = Pick<LiveBenchProps, "bench" | "timing" | "issues" | "lastGood" | "onFirstIssue"> & { stale: boolean };

function Head({ bench, timing, issues, lastGood, stale, onFirstIssue }: HeadProps) {
  const { run, progress, cancelled, broken } = bench;
  const basis = run && (
    <span>
      seed {run.result.seed} · {withUnit(significant(run.result.durationS, 4), "s")} long
    </span>
  );
  if (stale) {
    const unfit = timing !== null && !timing.fits;
    return (
      <div className="verdict">
        <Mark state={unfit ? "does-not-fit" : "not-decided"} size={20} quiet />
        <p className="say" role="status">
          <StaleWords run={run} lastGood={lastGood} missingS={unfit ? -timing.reserveS : null} />{" "}
          <button type="button" className="link bench-first" onClick={onFirstIssue}>
            {countOf(issues.length)} in the set-up {issues.length === 1 ? "has" : "have"} to be put right first.
          </button>
        </p>
        {run && (
          <div className="meta">
            {basis}
            <span>{clockText(run.at)}</span>
          </div>
        )}
      </div>
    );
  }
  if (progress) {
    return (
      <VerdictLine
        state="not-decided"
        word="Running."
        sentence={run ? "What is shown below is the run before." : "A long run takes its time; it can be stopped."}
        meta={<Progress progress={progress} onStop={bench.cancel} />}
      />
    );
  }
  if (!run) return null;
  if (cancelled || broken) {
    return (
      <VerdictLine
        state="not-decided"
        word={broken ? "The engine stopped." : "Stopped."}
        sentence="What is shown below is the run before."
        meta={basis}
      />
    );
  }
  const { word, sentence } = verdictSentence(run.scenario, run.result);
  return (
    <VerdictLine
      state={run.result.verdict}
      word={word}
      sentence={sentence}
      meta={
        <>
          {basis}
          <span title="From asking the engine to its answer">run in {elapsedText(run.elapsedMs)}</span>
        </>
      }
    />
  );
}

function Progress({ progress: { round, rounds }, onStop }: { progress: EngineProgress; onStop: () => void }) {
  return (
    <div className="bench-progress" role="status">
      <span className="num">
        round {round} of {rounds}
      </span>
      <progress max={rounds} value={round} aria-label="Progress of the run" />
      <Button small onClick={onStop}>
        Stop
      </Button>
    </div>
  );
}

function StaleWords({ run, lastGood, missingS }: { run: BenchRun | null; lastGood: string | null; missingS: number | null }) {
  if (missingS !== null) {
    return (
      <>
        <b>Does not fit.</b> The round is {msText(missingS)} longer than its period{run ? "; below is the last good result." : "."}
      </>
    );
  }
  if (!run) return <b>Not decided.</b>;
  return lastGood ? (
    <>
      <b>Last good result,</b> {lastGood}.
    </>
  ) : (
    <b>Last good result.</b>
  );
}

const elapsedText = (ms: number): string => (ms < 1000 ? withUnit(significant(ms, 2), "ms") : withUnit(significant(ms / 1000, 2), "s"));
const countOf = (count: number): string => (count === 1 ? "One field" : counted(count, "field"));
