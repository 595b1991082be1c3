import type { Floor } from "#shared/scenario/floor-schema.ts";
import { PickField } from "#src/components/ui/choice.tsx";
import { COPIES } from "../model/choices.ts";
import { fieldSpec } from "../model/field-spec.ts";
import { getAt, type Path } from "../model/json-path.ts";
import { asProblem, ChoiceAt, SwitchAt } from "./fields.tsx";
import { useForm, useIssue } from "./form.tsx";

export const floorOf = (json: unknown): Floor | null => (getAt(json, ["floor"]) as Floor | null | undefined) ?? null;

/** One of the floor's nodes; `none` offers that nothing is said. */
export function NodeAt({ path, label, none }: { path: Path; label?: string; none?: string }) {
  const { draft, edit, readOnly } = useForm();
  const issue = useIssue(path);
  const value = getAt(draft.json, path);
  const nodes = floorOf(draft.json)?.nodes ?? [];
  const options = [
    ...(none ? [{ value: "none", word: none }] : []),
    ...nodes.map(({ id, name }) => ({ value: String(id), word: name ? `${id} ${name}` : String(id) })),
  ];
  const chosen = value === null || value === undefined ? "none" : String(value);
  const known = options.some((option) => option.value === chosen);
  return (
    <PickField
      label={label ?? fieldSpec(draft.json, path).label}
      options={known ? options : [{ value: chosen, word: chosen === "none" ? "not said" : `${chosen} (not on the floor)` }, ...options]}
      value={chosen}
      onChoose={(next) => edit({ kind: "set", path, value: next === "none" ? null : Number(next) })}
      disabled={readOnly}
      problem={asProblem(issue)}
    />
  );
}

/** Nodes of a loop's parts; the controller's only where it stands apart. */
export function LoopNodes({ path, placement }: { path: Path; placement: unknown }) {
  const { json } = useForm().draft;
  const nodes = floorOf(json)?.nodes ?? [];
  const value = getAt(json, path);
  const first = () => ({ sensor: nodes[0]?.id ?? 1, controller: nodes[1]?.id ?? 2, actuator: nodes[2]?.id ?? nodes[0]?.id ?? 3 });
  if (nodes.length === 0 && value === null) return null;
  return (
    <>
      <SwitchAt path={path} off="not said" on="of the floor" first={first} />
      {value !== null && value !== undefined && (
        <>
          <NodeAt path={[...path, "sensor"]} />
          {placement === "apart" && <NodeAt path={[...path, "controller"]} />}
          <NodeAt path={[...path, "actuator"]} />
        </>
      )}
    </>
  );
}

/** Slots of a round in which a message is sent: one or two. */
export function CopiesAt({ path }: { path: Path }) {
  const { draft, edit } = useForm();
  return (
    <ChoiceAt
      path={path}
      options={COPIES}
      value={String(getAt(draft.json, path))}
      onChoose={(next) => edit({ kind: "set", path, value: Number(next) })}
    />
  );
}
