import { type RefObject, useState, useSyncExternalStore } from "react";
import type { RunDetail } from "#shared/api/runs.ts";
import type { SeriesRecord } from "#shared/api/series.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { roundsCsv, seriesCsv } from "#shared/simulation/csv.ts";
import { explicitScenario } from "#shared/simulation/explicit.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import type { PlotCursor } from "#src/components/plots/plot-cursor.ts";
import type { PlotStackHandle } from "#src/components/plots/plot-stack.tsx";
import { formatTime } from "#src/components/plots/units.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Menu, MenuItem, MenuRule } from "#src/components/ui/menu.tsx";
import { Tell } from "#src/components/ui/tell.tsx";
import { download } from "#src/lib/download.ts";
import { significant, withUnit } from "#src/lib/format.ts";
import type { EngineClient } from "#src/workers/pool.ts";
import { isWhole, runJson } from "./run-record.ts";
import { runFile, runName } from "./run-words.ts";

interface ExportMenuProps {
  run: RunDetail;
  scenario: Scenario;
  record: SeriesRecord;
  result: RunResult;
  cursor: PlotCursor;
  stack: RefObject<PlotStackHandle | null>;
  engine: () => EngineClient;
}

const CSV = "text/csv;charset=utf-8";

export function ExportMenu({ run, scenario, record, result, cursor, stack, engine }: ExportMenuProps) {
  const zoomed = useSyncExternalStore(cursor.subscribe, () => cursor.view.fromS > 0 || cursor.view.untilS < cursor.durationS);
  const [busy, setBusy] = useState(false);
  const [failure, setFailure] = useState<string | null>(null);
  const file = (what: string) => runFile(run.scenarioName, run.revision, run.seed, what);

  /** The whole run: as kept, or computed anew where the server keeps only a part. */
  const whole = async (): Promise<RunResult> => {
    if (isWhole(record)) return result;
    const outcome = await engine().run(scenario, run.seed);
    if (outcome.ok) return outcome.result;
    throw new Error("The run could not be computed anew.");
  };
  const make = (write: () => Promise<void>) => async () => {
    setBusy(true);
    setFailure(null);
    try {
      await write();
    } catch (cause) {
      setFailure(cause instanceof Error ? cause.message : String(cause));
    } finally {
      setBusy(false);
    }
  };

  const series = make(async () => download(file("series.csv"), seriesCsv(await whole()), CSV));
  const visible = make(async () => download(file("series-part.csv"), seriesCsv(await whole(), cursor.view), CSV));
  const rounds = make(async () => download(file("rounds.csv"), roundsCsv(await whole(), scenario), CSV));
  const json = make(async () => download(file("run.json"), runJson(scenario, await whole(), run.digest), "application/json"));
  const explicit = make(async () =>
    download(file("explicit.json"), `${JSON.stringify(explicitScenario(scenario, await whole()))}\n`, "application/json"),
  );
  const picture = make(async () => {
    if (!stack.current) throw new Error("The plots are not drawn yet.");
    const { fromS, untilS } = cursor.view;
    const part = fromS === 0 && untilS === cursor.durationS ? "" : ` · ${formatTime(fromS, 3)} to ${formatTime(untilS, 3)}`;
    const note = `${runName(run.revision, run.seed)} · ${run.verdict.word}${part} · engine ${run.engine}`;
    download(file("plots.png"), await stack.current.toPng(run.scenarioName, note), "image/png");
  });
  const length = withUnit(significant(run.durationS, 4), "s");
  return (
    <>
      <Menu
        trigger={
          <Button icon="export" busy={busy}>
            Export
          </Button>
        }
      >
        <MenuItem onSelect={series}>Series, all {length}, as CSV</MenuItem>
        {zoomed && <MenuItem onSelect={visible}>Series, what is zoomed to, as CSV</MenuItem>}
        <MenuItem onSelect={rounds}>One row per round, as CSV</MenuItem>
        <MenuItem onSelect={picture}>Plots as PNG</MenuItem>
        <MenuRule />
        <MenuItem onSelect={json}>Whole run as JSON</MenuItem>
        <MenuItem onSelect={explicit}>Scenario with its losses and noise written out, as JSON</MenuItem>
      </Menu>
      {failure && (
        <Tell>
          <span>No file was made. {failure}</span>
        </Tell>
      )}
    </>
  );
}
