import { modelSigmaDb } from "#shared/network/path-loss.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Section } from "#src/components/ui/section.tsx";
import { significant, withUnit } from "#src/lib/format.ts";
import { ChoiceAt, NumberAt, PickAt, SwitchAt } from "#src/pages/scenario/setup/fields.tsx";
import { useForm } from "#src/pages/scenario/setup/form.tsx";
import { CLUTTER, P1238_8, P1238_10, PATH_LOSS } from "../model/floor-names.ts";
import { MatrixField } from "./matrix-field.tsx";

const LINKS = ["floor", "links"] as const;
const LOSS = [...LINKS, "pathLoss"] as const;
const FADING = [...LINKS, "fading"] as const;

const KIND = [
  { value: "budget", word: "computed", hint: "From places, walls and radio: for as long as there is no floor to measure" },
  { value: "matrix", word: "measured", hint: "Reception ratios of every pair, typed or pasted" },
];
const COHERENCE = [
  { value: "speed", word: "speed" },
  { value: "time", word: "a time" },
];

/** How links are computed, or the ratios that stand in for it. */
export function ModelPanel({ floor, defaultOpen = false }: { floor: Floor; defaultOpen?: boolean }) {
  const { edit, readOnly } = useForm();
  const { links } = floor;
  const sum = links.type === "matrix" ? "measured ratios" : (PATH_LOSS.find(({ value }) => value === links.pathLoss.type)?.word ?? "");
  const sigma = links.type === "budget" ? modelSigmaDb(links.pathLoss) : null;
  const offered = links.type === "budget" && sigma !== null && sigma !== links.shadowing.sigmaDb;
  return (
    <Section title="Link model" sum={sum} defaultOpen={defaultOpen}>
      <div className="nf">
        <ChoiceAt path={LINKS} options={KIND} form />
        {links.type === "matrix" ? (
          <MatrixField floor={floor} />
        ) : (
          <>
            <PickAt path={LOSS} options={PATH_LOSS} form />
            {links.pathLoss.type === "log-distance" && (
              <>
                <NumberAt path={[...LOSS, "exponent"]} hint="2 in the open, 2.5 to 3.5 in halls, 4 and more through clutter." />
                <NumberAt path={[...LOSS, "lossAt1mDb"]} empty="40.2" hint="Empty: that of free space." />
              </>
            )}
            {links.pathLoss.type === "p1238-10" && <ChoiceAt path={[...LOSS, "environment"]} label="Sight" options={P1238_10} />}
            {links.pathLoss.type === "p1238-8" && <ChoiceAt path={[...LOSS, "environment"]} label="Building" options={P1238_8} />}
            {links.pathLoss.type === "indoor-factory" && <PickAt path={[...LOSS, "clutter"]} label="Clutter" options={CLUTTER} />}
            <NumberAt
              path={[...LINKS, "shadowing", "sigmaDb"]}
              hint={links.shadowing.sigmaDb > 0 ? "Normal in dB, one value for each pair of nodes." : undefined}
            />
            {offered && sigma !== null && (
              <p className="note second fl-offer">
                The source of this model gives {withUnit(significant(sigma, 3), "dB")}.{" "}
                {!readOnly && (
                  <Button small kind="bare" onClick={() => edit({ kind: "set", path: [...LINKS, "shadowing", "sigmaDb"], value: sigma })}>
                    Take it
                  </Button>
                )}
              </p>
            )}
            {links.shadowing.sigmaDb > 0 && (
              <>
                <NumberAt path={[...LINKS, "shadowing", "correlationM"]} hint="Along the way of a node that moves." />
                <NumberAt path={[...LINKS, "shadowing", "seed"]} hint="Another seed is another hall; in one hall every run is the same." />
              </>
            )}
            <SwitchAt path={FADING} off="none" on="Rician" first={() => ({ kDb: 6, coherence: { type: "speed", leastMPerS: 0.5 } })} />
            {links.fading && (
              <>
                <NumberAt path={[...FADING, "kDb"]} hint="Drawn for every pair and channel, constant over a slot." />
                <ChoiceAt path={[...FADING, "coherence"]} options={COHERENCE} form />
                {links.fading.coherence.type === "speed" ? (
                  <NumberAt
                    path={[...FADING, "coherence", "leastMPerS"]}
                    hint="People and trucks that pass; a node that moves faster counts by itself."
                  />
                ) : (
                  <NumberAt path={[...FADING, "coherence", "coherenceS"]} />
                )}
              </>
            )}
            <NumberAt path={[...LINKS, "noiseFigureDb"]} />
            <NumberAt path={[...LINKS, "captureDb"]} hint="A sender this much above the others is received as if alone." />
            <NumberAt path={[...LINKS, "concurrencyPenaltyDb"]} hint="Otherwise the sum of all counts, less this." />
          </>
        )}
      </div>
    </Section>
  );
}
