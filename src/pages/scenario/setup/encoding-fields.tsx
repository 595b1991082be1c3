import { withUnit } from "#src/lib/format.ts";
import { fieldSpec } from "../model/field-spec.ts";
import { getAt, type Path } from "../model/json-path.ts";
import { numberText, toScreen } from "../model/screen-unit.ts";
import { NumberAt, SwitchAt } from "./fields.tsx";
import { useForm } from "./form.tsx";

/** Bits and range of a value in its message; and the step that this leaves. */
export function EncodingFields({ path, first }: { path: Path; first: { lo: number; hi: number } }) {
  const { json } = useForm().draft;
  const encoding = getAt(json, path) as { bits: number; lo: number; hi: number } | null | undefined;
  const { unit } = fieldSpec(json, [...path, "lo"]);
  const step = encoding ? (encoding.hi - encoding.lo) / 2 ** encoding.bits : Number.NaN;
  return (
    <>
      <SwitchAt path={path} off="32-bit number" on="on bits" first={() => ({ bits: 16, ...first })} />
      {encoding && (
        <>
          <NumberAt path={[...path, "bits"]} label="Bits" />
          <NumberAt path={[...path, "lo"]} />
          <NumberAt
            path={[...path, "hi"]}
            hint={
              step > 0 && Number.isFinite(step)
                ? `One step is ${withUnit(numberText(Number(toScreen(step, unit).toPrecision(3))), unit.text)}.`
                : undefined
            }
          />
        </>
      )}
    </>
  );
}
