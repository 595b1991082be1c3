import { getAt, type Path } from "../model/json-path.ts";
import { NumberAt } from "./fields.tsx";
import { useForm } from "./form.tsx";

/** In which rounds something occurs; the first is asked for where there is a choice. */
export function Rhythm({ path }: { path: Path }) {
  const { json } = useForm().draft;
  const every = Number(getAt(json, [...path, "everyRounds"]));
  const first = Number(getAt(json, [...path, "firstRound"]));
  return (
    <>
      <NumberAt path={[...path, "everyRounds"]} />
      {(every > 1 || first > 0) && (
        <NumberAt path={[...path, "firstRound"]} range={`0 to ${Math.max(0, Math.min(63, every - 1))}`} hint="Rounds count from 0." />
      )}
    </>
  );
}
