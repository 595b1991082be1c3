import { useId } from "react";
import { getAt } from "../model/json-path.ts";
import { TextAt } from "./fields.tsx";
import { useForm, useIssue } from "./form.tsx";
import { SetupSection } from "./setup-section.tsx";

export function AboutSection() {
  const { draft, edit, endStep, readOnly } = useForm();
  const id = useId();
  const description = getAt(draft.json, ["description"]);
  const issue = useIssue(["description"]);
  const path = ["description"];
  return (
    <SetupSection id="about" title="Name" sum={String(getAt(draft.json, ["name"]) ?? "")}>
      <TextAt path={["name"]} label="Scenario" />
      <TextAt path={["loops", 0, "name"]} label="Loop" />
      <div className="su-seq">
        <label htmlFor={id}>Description</label>
        <textarea
          id={id}
          className="area"
          rows={4}
          maxLength={4000}
          value={typeof description === "string" ? description : ""}
          readOnly={readOnly}
          aria-invalid={issue ? true : undefined}
          onChange={(event) => edit({ kind: "set", path, value: event.target.value, step: "description" })}
          onBlur={endStep}
        />
      </div>
    </SetupSection>
  );
}
