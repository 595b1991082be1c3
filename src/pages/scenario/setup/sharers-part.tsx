import type { OtherLoop, OtherMessage } from "#shared/scenario/round-schema.ts";
import { readNumberList } from "../model/channel-text.ts";
import { PLACEMENT, TRAVELS } from "../model/choices.ts";
import { getAt, type Path } from "../model/json-path.ts";
import { otherLoopText, otherMessageText } from "../model/round-words.ts";
import { EntryList } from "./entry-list.tsx";
import { ChoiceAt, NumberAt, PickAt, TextAt } from "./fields.tsx";
import { useForm } from "./form.tsx";
import { NumberListAt } from "./list-field.tsx";
import { CopiesAt, floorOf, LoopNodes, NodeAt } from "./node-fields.tsx";
import { Rhythm } from "./rhythm.tsx";

const LOOPS = ["round", "otherLoops"] as const;
const MESSAGES = ["round", "messages"] as const;

const idsAt = (json: unknown, path: Path): string[] => ((getAt(json, path) as { id: string }[] | undefined) ?? []).map(({ id }) => id);

/** "loop-2": the first that nobody has. */
function freeId(word: string, taken: readonly string[]): string {
  for (let k = 2; ; k++) if (!taken.includes(`${word}-${k}`)) return `${word}-${k}`;
}

/** A copy of its own: the same settings under an id and a name that are free. */
function copyOf<T extends { id: string; name: string }>(entry: T, taken: readonly string[]): T {
  const stem = entry.id.replace(/-\d+$/, "").slice(0, 24);
  const id = freeId(stem, taken);
  const number = id.slice(stem.length + 1);
  return { ...entry, id, name: `${entry.name.replace(/ \d+$/, "")} ${number}` };
}

/** Loops whose machines are not part of this scenario: they take slots and have a latency. */
export function OtherLoops() {
  const { json } = useForm().draft;
  const taken = () => [...idsAt(json, LOOPS), ...idsAt(json, ["loops"])];
  const first = (): OtherLoop => {
    const id = freeId("loop", taken());
    return {
      id,
      name: `Loop ${id.slice(5)}`,
      placement: "apart",
      nodes: null,
      everyRounds: 1,
      firstRound: 0,
      measurementBits: 32,
      measurementCopies: 1,
      commandBits: 16,
      commandCopies: 1,
      planLength: 1,
      computeS: 0.001,
      sampleAtS: 0,
      commandTravels: "same-round",
    };
  };
  return (
    <EntryList
      path={LOOPS}
      noun="loop"
      none="None: this loop has the round to itself."
      addWord="Add another loop"
      say={(i) => {
        const loop = getAt(json, [...LOOPS, i]) as OtherLoop;
        return `${loop.name}: ${otherLoopText(loop)}`;
      }}
      first={first}
      copyOf={(entry) => copyOf(entry as OtherLoop, taken())}
      copies
      ordered
      most={24}
    >
      {(_, path) => {
        const placement = getAt(json, [...path, "placement"]);
        return (
          <>
            <TextAt path={[...path, "name"]} />
            <PickAt path={[...path, "placement"]} options={PLACEMENT} />
            <LoopNodes path={[...path, "nodes"]} placement={placement} />
            <Rhythm path={path} />
            {placement !== "sensor" && (
              <>
                <NumberAt path={[...path, "measurementBits"]} />
                <CopiesAt path={[...path, "measurementCopies"]} />
              </>
            )}
            {placement !== "actuator" && (
              <>
                <NumberAt path={[...path, "commandBits"]} />
                <NumberAt path={[...path, "planLength"]} />
                <CopiesAt path={[...path, "commandCopies"]} />
              </>
            )}
            <NumberAt path={[...path, "computeS"]} />
            <NumberAt path={[...path, "sampleAtS"]} />
            <ChoiceAt path={[...path, "commandTravels"]} options={TRAVELS} />
          </>
        );
      }}
    </EntryList>
  );
}

/** Any other message of the round: a heartbeat, a valve's state, a diagnosis. */
export function OtherMessages() {
  const { json } = useForm().draft;
  const floor = floorOf(json);
  const first = (): OtherMessage => {
    const id = freeId("message", idsAt(json, MESSAGES));
    return {
      id,
      name: `Message ${id.slice(8)}`,
      from: floor?.nodes[0]?.id ?? null,
      to: [],
      payloadBytes: 8,
      everyRounds: 1,
      firstRound: 0,
      copies: 1,
    };
  };
  return (
    <EntryList
      path={MESSAGES}
      noun="message"
      none="None."
      say={(i) => {
        const message = getAt(json, [...MESSAGES, i]) as OtherMessage;
        return `${message.name}: ${otherMessageText(message)}`;
      }}
      first={first}
      copyOf={(entry) => copyOf(entry as OtherMessage, idsAt(json, MESSAGES))}
      copies
      ordered
      most={24}
    >
      {(_, path) => (
        <>
          <TextAt path={[...path, "name"]} />
          {floor && (
            <>
              <NodeAt path={[...path, "from"]} none="not said" />
              <NumberListAt path={[...path, "to"]} read={(text) => readNumberList(text, "node number")} empty="all nodes" />
            </>
          )}
          <NumberAt path={[...path, "payloadBytes"]} />
          <Rhythm path={path} />
          <CopiesAt path={[...path, "copies"]} />
        </>
      )}
    </EntryList>
  );
}
