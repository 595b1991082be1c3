import "./placements.css";
import { useMemo } from "react";
import { drawnUntilS } from "#src/components/drawings/ribbon-geometry.ts";
import { RoundRibbon } from "#src/components/drawings/round-ribbon.tsx";
import { Button } from "#src/components/ui/button.tsx";
import { Mark } from "#src/components/ui/mark.tsx";
import { Empty } from "#src/components/ui/states.tsx";
import { Scroller } from "#src/components/ui/table.tsx";
import { capital } from "#src/lib/format.ts";
import { PLACEMENT, wordOf } from "../model/choices.ts";
import { placementRows } from "./placement-rows.ts";
import { useVariantRuns } from "./use-variant-runs.ts";
import { type Placement, type Variant, variantsOf } from "./variants.ts";

export interface PlacementsViewProps {
  /** The scenario as it is edited. */
  json: unknown;
  /** Of the runs; null: the scenario's own. */
  seed: number | null;
  /** Takes a placement over, as one edit; left out: only to look at. */
  onUse?: (json: unknown, placement: Placement) => void;
}

const SAID: Record<Placement, string> = {
  sensor: "Only the command is sent.",
  apart: "Measurement and command are sent.",
  actuator: "Only the measurement is sent.",
};

/** The controller with the sensor, apart, and with the actuator: three rounds on one scale, and what each comes to. */
export function PlacementsView({ json, seed, onUse }: PlacementsViewProps) {
  const variants = useMemo(() => variantsOf(json), [json]);
  const runs = useVariantRuns(variants, seed);
  const rows = placementRows(variants, runs);
  if (variants.every(({ timing }) => timing === null))
    return <Empty title="Nothing to compare yet" text="Put the marked fields of the set-up right first; then each placement has a round." />;
  const untilS = Math.max(...variants.map(({ timing }) => (timing ? drawnUntilS(timing) : 0)));
  return (
    <div className="placements">
      {variants.map((variant) => (
        <Round key={variant.placement} variant={variant} untilS={untilS} onUse={onUse} />
      ))}
      <Scroller label="Figures of the three placements">
        <table className="t">
          <thead>
            <tr>
              <th scope="col">
                <span className="vh">Figure</span>
              </th>
              {variants.map(({ placement, present }) => (
                <th key={placement} scope="col" className="r">
                  {capital(wordOf(PLACEMENT, placement))}
                  {present && <span className="second">, present</span>}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {rows.map(({ label, note, cells }) => (
              <tr key={label}>
                <th scope="row">
                  {label}
                  {note && <span className="pl">{note}</span>}
                </th>
                {variants.map(({ placement, present }) => {
                  const { text, difference, mark } = cells[placement];
                  return (
                    <td key={placement} className={present ? "r on" : "r"}>
                      {mark && <Mark state={mark} size={13} quiet />} <span className={mark ? "strong" : undefined}>{text}</span>
                      {difference && <span className="pl">{difference}</span>}
                    </td>
                  );
                })}
              </tr>
            ))}
          </tbody>
        </table>
      </Scroller>
      <p className="note second">Same seed, machine and pushes in all three. The small figures are differences against the present placement.</p>
      {variants.map(({ placement, notes, issues, scenario }) => {
        const failed = runs[placement];
        const why = [
          ...notes,
          ...(scenario ? [] : issues.map(({ rule, more }) => `${rule} ${more}`)),
          ...(failed?.state === "failed" ? [failed.why] : []),
        ];
        return why.length === 0 ? null : (
          <p key={placement} className="note second">
            <b>{capital(wordOf(PLACEMENT, placement))}:</b> {why.join(" ")}
          </p>
        );
      })}
    </div>
  );
}

function Round({ variant, untilS, onUse }: { variant: Variant; untilS: number; onUse: PlacementsViewProps["onUse"] }) {
  const { placement, present, timing, json } = variant;
  const word = capital(wordOf(PLACEMENT, placement));
  return (
    <section aria-label={`Controller ${wordOf(PLACEMENT, placement)}`} className="placement">
      <div className="hrow">
        <h3>
          {word} <span className="second">{SAID[placement]}</span>
        </h3>
        <span className="rt">
          {present
            ? "present"
            : onUse && (
                <Button small onClick={() => onUse(json, placement)} aria-label={`Use this placement: ${wordOf(PLACEMENT, placement)}`}>
                  Use this placement
                </Button>
              )}
        </span>
      </div>
      {timing && <RoundRibbon timing={{ ...timing, loops: [timing.loops[0]] as typeof timing.loops }} untilS={untilS} />}
    </section>
  );
}
