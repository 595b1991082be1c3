import { useCallback, useEffect, useState } from "react";
import type { RunDetail } from "#shared/api/runs.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { ENGINE_VERSION } from "#shared/simulation/version.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Mark } from "#src/components/ui/mark.tsx";
import type { EngineClient } from "#src/workers/pool.ts";

type Check = { state: "idle" | "computing" | "broken" } | { state: "done"; digest: string | null };

/** Of runs up to this many rounds the check is made unasked: it costs a few milliseconds. */
const UNASKED_ROUNDS = 5000;

/** Does this browser compute the same run, bit for bit? */
export function DigestCheck({ run, scenario, engine }: { run: RunDetail; scenario: Scenario; engine: () => EngineClient }) {
  const [check, setCheck] = useState<Check>({ state: "idle" });
  const compute = useCallback(() => {
    setCheck({ state: "computing" });
    Promise.resolve()
      .then(() => engine().digest(scenario, run.seed))
      .then((digest) => setCheck({ state: "done", digest }))
      .catch(() => setCheck({ state: "broken" }));
  }, [engine, scenario, run.seed]);
  const short = run.durationS / scenario.round.periodS <= UNASKED_ROUNDS;
  // biome-ignore lint/correctness/useExhaustiveDependencies: once for the run that is shown
  useEffect(() => {
    if (short) compute();
  }, []);
  return (
    <section className="run-part" aria-labelledby="run-digest">
      <div className="hrow">
        <h2 id="run-digest">Same bits</h2>
        <span className="rt">SHA-256 over series and rounds</span>
      </div>
      <p className="digest">{run.digest}</p>
      <div className="digest-row" aria-live="polite">
        <DigestVerdict check={check} run={run} />
        {check.state !== "computing" && (
          <Button small onClick={compute}>
            {check.state === "idle" ? "Compute it in this browser" : "Compute it again"}
          </Button>
        )}
      </div>
    </section>
  );
}

function DigestVerdict({ check, run }: { check: Check; run: RunDetail }) {
  switch (check.state) {
    case "idle":
      return <span>The server computed this run. This browser can compute it again and compare.</span>;
    case "computing":
      return <span>This browser computes the run again …</span>;
    case "broken":
      return <span>This browser’s engine stopped; nothing was compared.</span>;
    case "done":
      if (check.digest === null) return <span>This page’s engine (version {ENGINE_VERSION}) does not run this revision; nothing was compared.</span>;
      if (check.digest === run.digest) {
        return (
          <span>
            <Mark state="holds" size={13} quiet /> <b>Equal.</b> This browser computed the same run, bit for bit.
          </span>
        );
      }
      return (
        <span>
          <Mark state="crosses" size={13} quiet /> <b>Not equal.</b>{" "}
          {run.engine === ENGINE_VERSION
            ? "This browser computed other numbers with the same engine. Please report it."
            : `The run was computed by engine ${run.engine}, this page has engine ${ENGINE_VERSION}.`}
        </span>
      );
  }
}
