import { Link, useParams } from "react-router-dom";
import { utilisationHint } from "#shared/network/energy.ts";
import { RADIO_FIGURES } from "#shared/network/radio-figures.ts";
import type { RoundTiming } from "#shared/network/round.ts";
import type { Radio } from "#shared/scenario/round-schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { paths } from "#src/app/paths.ts";
import { PickField } from "#src/components/ui/choice.tsx";
import { HOPPING, PHY } from "../model/choices.ts";
import { floorText } from "../model/floor-words.ts";
import { getAt, setAt } from "../model/json-path.ts";
import { boundOf, boundText, describeChannels, describeFloorRadio, describeNodes, describePower, describeReception } from "../model/round-words.ts";
import { ChannelPart } from "./channel-part.tsx";
import { NumberAt, PickAt, TextAt } from "./fields.tsx";
import { useForm } from "./form.tsx";
import { floorOf, LoopNodes } from "./node-fields.tsx";
import { Part } from "./part.tsx";
import { ReceptionPart } from "./reception-part.tsx";
import { SetupSection } from "./setup-section.tsx";

const RADIO = ["radio"] as const;

/** Where the nodes stand, which part of the loop runs on which, and the radio that they carry. */
export function RadioSection({ timing }: { timing: RoundTiming | null }) {
  const { json } = useForm().draft;
  const radio = getAt(json, RADIO) as Radio;
  return (
    <SetupSection id="radio" title="Floor and radio" sum={describeFloorRadio(json as Scenario)}>
      <FloorLine />
      <Part title="Nodes of the loop" sum={describeNodes(json)} owns={["loops[0].nodes"]}>
        {floorOf(json) ? (
          <LoopNodes path={["loops", 0, "nodes"]} placement={getAt(json, ["loops", 0, "controller", "placement"])} />
        ) : (
          <p className="note second">Nodes stand on a floor; lay one out first.</p>
        )}
      </Part>
      <PhyPick />
      <NumberAt path={[...RADIO, "txPowerDbm"]} />
      <NumberAt path={[...RADIO, "headerBytes"]} />
      <NumberAt path={[...RADIO, "turnaroundS"]} empty="standard" />
      <Part title="Channels" sum={describeChannels(radio)} owns={["radio.channels"]}>
        <ChannelPart />
        <PickAt path={[...RADIO, "channels", "hopping"]} options={HOPPING} />
      </Part>
      <Part title="Reception" sum={describeReception(radio)} owns={["radio.reception"]}>
        <ReceptionPart timing={timing} />
      </Part>
      <Part title="Power and battery" sum={describePower(radio)} owns={["radio.power", "radio.battery"]}>
        <PowerPart timing={timing} />
      </Part>
    </SetupSection>
  );
}

function FloorLine() {
  const { json } = useForm().draft;
  const { teamId = "", scenarioId } = useParams();
  const floor = floorOf(json);
  return (
    <p className="su-floor">
      <span>{floor ? `${floor.name ? `${floor.name}, ` : ""}${floorText(floor)}` : "No floor: who hears whom is not computed."}</span>
      {scenarioId && <Link to={paths.scenarioFloor(teamId, scenarioId)}>{floor ? "Open the floor" : "Lay out a floor"}</Link>}
    </p>
  );
}

/** Channels are numbered otherwise by another standard: the new one starts with its own. */
function PhyPick() {
  const { draft, edit } = useForm();
  const choose = (next: string) => {
    const before = getAt(draft.json, ["radio", "phy"]);
    const path = ["radio", "channels", "list"];
    const other = (before === "ieee802154") !== (next === "ieee802154");
    const json = setAt(draft.json, ["radio", "phy"], next);
    edit({ kind: "put", json: other ? setAt(json, path, []) : json, forget: other ? [path] : [] });
  };
  return <PickAt path={["radio", "phy"]} options={PHY} onChoose={choose} />;
}

const OWN = "own";

/** Currents with their source, battery, and what that comes to. */
function PowerPart({ timing }: { timing: RoundTiming | null }) {
  const { draft, edit, readOnly } = useForm();
  const { json } = draft;
  const power = getAt(json, ["radio", "power"]) as Radio["power"];
  const known = RADIO_FIGURES.find((one) => (Object.keys(one) as (keyof typeof one)[]).every((key) => one[key] === power[key]));
  const choose = (device: string) => {
    const figures = RADIO_FIGURES.find((one) => one.device === device);
    const next = figures ?? { ...power, device: "", source: "" };
    edit({ kind: "put", json: setAt(json, ["radio", "power"], next), forget: [["radio", "power"]] });
  };
  const bound = boundOf(json, timing);
  const hint = bound && utilisationHint(bound.sendDutyCycle, Number(getAt(json, ["radio", "txPowerDbm"])));
  return (
    <>
      <PickField
        label="Figures of"
        options={[...RADIO_FIGURES.map(({ device }) => ({ value: device, word: device })), { value: OWN, word: "a radio of your own" }]}
        value={known?.device ?? OWN}
        onChoose={choose}
        disabled={readOnly}
      />
      <NumberAt path={["radio", "power", "txMa"]} />
      <NumberAt path={["radio", "power", "rxMa"]} />
      <NumberAt path={["radio", "power", "sleepUa"]} />
      <NumberAt path={["radio", "power", "supplyV"]} />
      {known ? (
        <p className="note second pb-1">Source: {known.source}.</p>
      ) : (
        <>
          <TextAt path={["radio", "power", "device"]} />
          <TextAt path={["radio", "power", "source"]} />
        </>
      )}
      <NumberAt path={["radio", "battery", "capacityMah"]} />
      <NumberAt path={["radio", "battery", "usableShare"]} />
      {bound && <p className="note second pb-1">Any node, wherever it stands: {lowerFirst(boundText(bound))} Radio alone.</p>}
      {hint && <p className="note second pb-1">{hint.text}</p>}
    </>
  );
}
const lowerFirst = (text: string) => text.charAt(0).toLowerCase() + text.slice(1);
