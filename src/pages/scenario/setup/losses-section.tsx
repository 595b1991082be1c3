import { msText, percentText, significant } from "#src/lib/format.ts";
import { OUTAGE_MESSAGES, PROCESS, STREAMS, THEN } from "../model/choices.ts";
import { channelFacts, describeLosses, describeOutage } from "../model/describe.ts";
import { getAt, type Path } from "../model/json-path.ts";
import { EntryList } from "./entry-list.tsx";
import { ChoiceAt, NumberAt, PickAt } from "./fields.tsx";
import { useForm } from "./form.tsx";
import { FloodPart, ReplayPart, UseLog } from "./received-part.tsx";
import { SequenceAt } from "./sequence-field.tsx";
import { SetupSection } from "./setup-section.tsx";

const PROCESS_PATH = ["losses", "process"] as const;
const OUTAGES = ["losses", "outages"] as const;

export function LossesSection() {
  const { json } = useForm().draft;
  const type = getAt(json, [...PROCESS_PATH, "type"]);
  const drawn = type === "bernoulli" || type === "gilbert-elliott";
  return (
    <SetupSection id="losses" title="Losses" sum={describeLosses(json)}>
      <PickAt path={PROCESS_PATH} options={PROCESS} form />
      {type === "bernoulli" && (
        <>
          <NumberAt path={[...PROCESS_PATH, "measurement"]} />
          <NumberAt path={[...PROCESS_PATH, "command"]} />
        </>
      )}
      {type === "gilbert-elliott" && (
        <>
          <Channel title="Measurement" path={[...PROCESS_PATH, "measurement"]} />
          <Channel title="Command" path={[...PROCESS_PATH, "command"]} />
        </>
      )}
      {type === "gilbert-elliott-shared" && <Channel title="The channel of both" path={[...PROCESS_PATH, "channel"]} />}
      {type === "given" && (
        <>
          <SequenceAt path={[...PROCESS_PATH, "measurement"]} label="Measurement, round by round" kind="bits" />
          <SequenceAt path={[...PROCESS_PATH, "command"]} label="Command, round by round" kind="bits" />
          <PickAt path={[...PROCESS_PATH, "then"]} options={THEN} />
        </>
      )}
      {type === "flood" && <FloodPart />}
      {type === "replay" && <ReplayPart />}
      <UseLog />
      {drawn && <ChoiceAt path={["losses", "streams"]} options={STREAMS} />}
      <p className="sub3">Outages</p>
      <EntryList
        path={OUTAGES}
        noun="outage"
        none="None: the process alone decides."
        say={(i) => describeOutage(json, i)}
        first={() => ({ fromS: 2, untilS: 2.2, messages: ["measurement", "command"], lossProbability: 1 })}
        copies
        most={200}
      >
        {(_, path) => (
          <>
            <NumberAt path={[...path, "fromS"]} />
            <NumberAt path={[...path, "untilS"]} />
            <OutageMessages path={[...path, "messages"]} />
            <NumberAt path={[...path, "lossProbability"]} />
          </>
        )}
      </EntryList>
    </SetupSection>
  );
}

function OutageMessages({ path }: { path: Path }) {
  const { draft, edit } = useForm();
  const messages = getAt(draft.json, path) as string[] | undefined;
  const value = messages?.length === 1 ? messages[0] : "both";
  return (
    <ChoiceAt
      path={path}
      options={OUTAGE_MESSAGES}
      value={value}
      onChoose={(next) => edit({ kind: "set", path, value: next === "both" ? ["measurement", "command"] : [next] })}
    />
  );
}

/** A channel that is good or bad by turns, and what that comes to. */
function Channel({ title, path }: { title: string; path: Path }) {
  const { json } = useForm().draft;
  const facts = channelFacts(getAt(json, path));
  const periodS = Number(getAt(json, ["round", "periodS"]));
  return (
    <>
      <p className="sub3">{title}</p>
      <NumberAt path={[...path, "goodToBad"]} />
      <NumberAt path={[...path, "badToGood"]} />
      <NumberAt path={[...path, "lossInGood"]} />
      <NumberAt path={[...path, "lossInBad"]} />
      <p className="note second pb-1">
        {facts === null
          ? "The channel stays in the state in which it starts."
          : Number.isFinite(facts.meanBadRounds)
            ? `Loses ${percentText(facts.lossRatio)} of the messages; bad for ${significant(facts.meanBadRounds)} rounds (${msText(facts.meanBadRounds * periodS)}) on average.`
            : "The channel never becomes good again."}
      </p>
    </>
  );
}
