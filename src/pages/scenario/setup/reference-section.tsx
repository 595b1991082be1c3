import { PROFILE } from "../model/choices.ts";
import { describeProfile, describeReferences, shown } from "../model/describe.ts";
import { getAt, type Path } from "../model/json-path.ts";
import { plantOf } from "../model/machine.ts";
import { SignalAt } from "./controller-part.tsx";
import { EntryList } from "./entry-list.tsx";
import { ChoiceAt, NumberAt, PickAt } from "./fields.tsx";
import { useForm } from "./form.tsx";
import { SetupSection } from "./setup-section.tsx";

const REFERENCES = ["loops", 0, "references"] as const;
const FEEDFORWARD = ["loops", 0, "feedforward"] as const;

export function ReferenceSection() {
  const { json } = useForm().draft;
  const plant = plantOf(json);
  const profile = { type: "steps", points: [{ atS: 1, value: 0.1 }] };
  return (
    <SetupSection id="reference" title="Reference" sum={describeReferences(json)}>
      <EntryList
        path={REFERENCES}
        noun="reference"
        none="None: every signal is to stay at the operating point."
        say={(i) => describeProfile(json, [...REFERENCES, i])}
        first={() => ({ signal: plant?.states[0]?.name ?? "x1", profile })}
        most={24}
      >
        {(_, path) => (
          <>
            <SignalAt path={[...path, "signal"]} />
            <ProfileFields path={[...path, "profile"]} />
          </>
        )}
      </EntryList>
      <p className="sub3">Feed-forward</p>
      <EntryList
        path={FEEDFORWARD}
        noun="feed-forward"
        none="None: the input's operating point."
        say={(i) => describeProfile(json, [...FEEDFORWARD, i])}
        first={() => ({ signal: plant?.inputs[0]?.name ?? "u1", profile })}
        most={24}
      >
        {(_, path) => (
          <>
            <PickAt
              path={[...path, "signal"]}
              label="Input"
              options={(plant?.inputs ?? []).map(({ name, label }) => ({ value: name, word: label }))}
            />
            <ProfileFields path={[...path, "profile"]} />
          </>
        )}
      </EntryList>
    </SetupSection>
  );
}

function ProfileFields({ path }: { path: Path }) {
  const { json } = useForm().draft;
  const points = [...path, "points"];
  const count = (getAt(json, points) as unknown[] | undefined)?.length ?? 0;
  const next = () => {
    const last = getAt(json, [...points, count - 1]) as { atS: number; value: number } | undefined;
    return { atS: (last?.atS ?? 0) + 1, value: last?.value ?? 0 };
  };
  return (
    <>
      <ChoiceAt path={path} options={PROFILE} form />
      {getAt(json, [...path, "type"]) === "sine" ? (
        <>
          <NumberAt path={[...path, "offset"]} />
          <NumberAt path={[...path, "amplitude"]} />
          <NumberAt path={[...path, "frequencyHz"]} />
          <NumberAt path={[...path, "phaseRad"]} />
        </>
      ) : (
        <EntryList
          path={points}
          noun="point"
          say={(i) => `${shown(json, [...points, i, "value"])} from ${shown(json, [...points, i, "atS"])}`}
          first={next}
          least={1}
          most={1000}
        >
          {(_, point) => (
            <>
              <NumberAt path={[...point, "atS"]} />
              <NumberAt path={[...point, "value"]} />
            </>
          )}
        </EntryList>
      )}
    </>
  );
}
