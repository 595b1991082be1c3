import { useState } from "react";
import type { RoundTiming } from "#shared/network/round.ts";
import type { Saving } from "#shared/network/savings.ts";
import type { RoundSettings } from "#shared/scenario/round-schema.ts";
import { RoundRibbon, stairsNote } from "#src/components/drawings/round-ribbon.tsx";
import { Button } from "#src/components/ui/button.tsx";
import { counted, msText } from "#src/lib/format.ts";
import { BEACON_MISSED, PHY, RELAY, wordOf } from "../model/choices.ts";
import { getAt } from "../model/json-path.ts";
import { boundOf, boundText } from "../model/round-words.ts";
import { applySaving } from "../model/savings.ts";
import { PlacementsDialog } from "../placements/placements-dialog.tsx";
import { ChoiceAt, NumberAt, SwitchAt } from "./fields.tsx";
import { useForm } from "./form.tsx";
import { Part } from "./part.tsx";
import { SetupSection } from "./setup-section.tsx";
import { OtherLoops, OtherMessages } from "./sharers-part.tsx";

function sum(json: unknown, timing: RoundTiming | null): string {
  const period = msText(Number(getAt(json, ["round", "periodS"])), 5);
  if (!timing) return period;
  return [period, counted(timing.slots.length, "slot"), timing.fits ? "fits" : "does not fit"].join(" · ");
}

export function RoundSection({ timing }: { timing: RoundTiming | null }) {
  const { draft, edit } = useForm();
  const { json } = draft;
  const [comparing, setComparing] = useState(false);
  const beacon = getAt(json, ["round", "beacon"]) as RoundSettings["beacon"] | undefined;
  const bound = boundOf(json, timing);
  const listed = (key: "otherLoops" | "messages") => (getAt(json, ["round", key]) as unknown[] | undefined)?.length ?? 0;
  return (
    <SetupSection id="round" title="Round" sum={sum(json, timing)}>
      <NumberAt path={["round", "periodS"]} />
      {timing && (
        <div className="su-ribbon">
          <RoundRibbon timing={timing} />
          <p className="note muted">{stairsNote(undefined)}</p>
          {timing.fits && (
            <p className="note second">
              Reserve {msText(timing.reserveS)}; the shortest period is {msText(timing.shortestPeriodS, 5)}.
            </p>
          )}
          {bound && timing.fits && <p className="note second">{boundText(bound)}</p>}
        </div>
      )}
      {timing && !timing.fits && <Savings timing={timing} />}
      <Button small onClick={() => setComparing(true)}>
        Compare placements of the controller
      </Button>
      {comparing && <PlacementsDialog onClose={() => setComparing(false)} />}
      <NumberAt path={["round", "hops"]} />
      <NumberAt path={["round", "transmissions"]} />
      <ChoiceAt path={["round", "relay"]} options={RELAY} />
      <NumberAt path={["round", "slackSteps"]} />
      <NumberAt path={["round", "wakeUpS"]} />
      <NumberAt path={["round", "gapS"]} />
      <NumberAt path={["round", "clockPpm"]} />
      <SwitchAt path={["round", "beacon"]} off="none" on="opens the round" first={() => ({ payloadBytes: 4, needed: false })} />
      {beacon && (
        <>
          <NumberAt path={["round", "beacon", "payloadBytes"]} />
          <ChoiceAt
            path={["round", "beacon", "needed"]}
            options={BEACON_MISSED}
            value={beacon.needed ? "yes" : "no"}
            onChoose={(next) => edit({ kind: "set", path: ["round", "beacon", "needed"], value: next === "yes" })}
          />
        </>
      )}
      <Part title="Other loops in the round" sum={listed("otherLoops") === 0 ? "none" : String(listed("otherLoops"))} owns={["round.otherLoops"]}>
        <OtherLoops />
      </Part>
      <Part title="Other messages" sum={listed("messages") === 0 ? "none" : String(listed("messages"))} owns={["round.messages"]}>
        <OtherMessages />
      </Part>
    </SetupSection>
  );
}

/** What would make room, largest first; each can be taken with one press. */
function Savings({ timing }: { timing: RoundTiming }) {
  const { draft, edit, readOnly } = useForm();
  const missing = -timing.reserveS;
  return (
    <div className="su-save">
      <p className="sub3">What would make room ({msText(missing)} are missing)</p>
      <ul>
        {timing.savings.map((saving) => {
          const applied = applySaving(draft.json, saving);
          return (
            <li key={saving.text}>
              <span>
                {words(saving, draft.json)}
                <span className="second">
                  {" "}
                  {saving.change === "period" ? `adds ${msText(saving.savesS)}` : `saves ${msText(saving.savesS)}`}
                  {saving.savesS >= missing && saving.change !== "period" && ", enough"}
                </span>
              </span>
              {!readOnly && (
                <Button
                  small
                  impossible={applied ? null : "The header is empty already: encode a signal on fewer bits."}
                  onClick={() => applied && edit({ kind: "put", json: applied })}
                  aria-label={`Apply: ${words(saving, draft.json)}`}
                >
                  Apply
                </Button>
              )}
            </li>
          );
        })}
      </ul>
    </div>
  );
}

function words({ change, text }: Saving, json: unknown): string {
  const at = (path: string[]) => Number(getAt(json, path));
  switch (change) {
    case "transmissions":
      return `Transmissions ${at(["round", "transmissions"])} \u2192 ${at(["round", "transmissions"]) - 1}`;
    case "hops":
      return `Hops ${at(["round", "hops"])} \u2192 ${at(["round", "hops"]) - 1}`;
    case "bytes":
      return `Header ${at(["radio", "headerBytes"])} \u2192 ${Math.max(0, at(["radio", "headerBytes"]) - 1)} bytes`;
    case "phy":
      return wordOf(PHY, PHY.find(({ word }) => word === text)?.value ?? text);
    case "period":
      return `A longer period`;
    default:
      return `${text.charAt(0).toUpperCase()}${text.slice(1)}`;
  }
}
