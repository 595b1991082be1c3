import { type ReactNode, useMemo, useState } from "react";
import { parseScenario } from "#shared/scenario/parse.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { InterfererShape, NodeShape } from "#src/components/plan/marks.tsx";
import { Button } from "#src/components/ui/button.tsx";
import { Field, type Problem, ProblemNote, TextField } from "#src/components/ui/field.tsx";
import { Empty } from "#src/components/ui/states.tsx";
import { counted } from "#src/lib/format.ts";
import { setAt } from "#src/pages/scenario/model/json-path.ts";
import { siUnit, toStored } from "#src/pages/scenario/model/screen-unit.ts";
import { Fold } from "#src/pages/scenario/setup/fold.tsx";
import { useForm } from "#src/pages/scenario/setup/form.tsx";
import { emptyFloor, exampleFloor, floorOfMatrix } from "./model/example-floor.ts";
import { readMatrix } from "./model/matrix-text.ts";
import "#src/components/plan/plan.css";

const METRES = siUnit("m");
const HALL_M = 2000;

function lengthProblem(label: string, text: string): Problem | null {
  const value = toStored(text, METRES);
  if (value === null) return { title: text.trim() === "" ? `${label} is empty.` : `“${text.trim()}” is no number.`, text: `Enter 1 to ${HALL_M} m.` };
  return value < 1 || value > HALL_M ? { title: `${label} is ${value} m: 1 to ${HALL_M} m is permitted.` } : null;
}

/** Ways to a floor where there is none yet. */
export function EmptyFloor({ onLaidOut }: { onLaidOut: () => void }) {
  const { draft, edit, readOnly } = useForm();
  const [name, setName] = useState("");
  const [width, setWidth] = useState("72");
  const [depth, setDepth] = useState("40");
  const [matrix, setMatrix] = useState("");
  const [tried, setTried] = useState(false);
  const parsed = useMemo(() => parseScenario(draft.json), [draft.json]);
  const problems = { width: lengthProblem("Width", width), depth: lengthProblem("Depth", depth) };
  const fits = !problems.width && !problems.depth;
  const widthM = toStored(width, METRES) ?? 1;
  const depthM = toStored(depth, METRES) ?? 1;
  const example = useMemo(
    () => (parsed.ok && fits ? exampleFloor(parsed.value, name.trim(), widthM, depthM) : null),
    [parsed, fits, name, widthM, depthM],
  );
  const read = readMatrix(matrix, null);
  const lay = (json: unknown) => {
    edit({ kind: "put", json, forget: [["floor"], ["loops", 0, "nodes"]] });
    onLaidOut();
  };
  if (readOnly) return <Empty title="No floor" text="This revision was saved without a floor: its losses do not come from floods." />;
  const notYet = !parsed.ok ? "Put the marked fields of the set-up right first." : !fits ? "Put the size right first." : null;
  return (
    <section className="fl-empty sheet doc" aria-label="Lay out a floor">
      <div className="pad">
        <h2>No floor yet</h2>
        <p className="second fl-lead">
          On a floor you place the nodes of the loop and everything that weakens or disturbs their links. The page then draws every flood of a run
          over it, step by step, and delivery follows from physics instead of from a typed percentage.
        </p>
        <div className="fl-ways">
          <div>
            <h3>Size of the plan</h3>
            <div className="nf">
              <TextField label="Name" value={name} onText={setName} placeholder="Hall 2" maxLength={80} />
              <Field label="Width" unit="m" range={`1 to ${HALL_M}`} value={width} onText={setWidth} problem={problems.width} />
              <Field label="Depth" unit="m" range={`1 to ${HALL_M}`} value={depth} onText={setDepth} problem={problems.depth} />
            </div>
            <div className="fl-acts">
              <Button kind="go" impossible={notYet} onClick={() => example && lay(example)}>
                Place the loop and relays
              </Button>
              <Button impossible={notYet} onClick={() => lay(setAt(draft.json, ["floor"], emptyFloor(name.trim(), widthM, depthM)))}>
                Start with an empty plan
              </Button>
            </div>
            <p className="note muted">
              The arrangement follows from the size, its links from ITU-R P.1238, industrial, without line of sight; transmit power is lowered to what
              takes about three hops across. Everything can be changed afterwards.
            </p>
          </div>
          <figure className="fl-sketch">{example?.floor && <Sketch scenario={example} />}</figure>
        </div>
        <Fold title="Start from measured links instead" sum="a table of reception ratios">
          <div className="su-seq">
            <label htmlFor="fl-matrix">Row sends, column receives; one row for each node</label>
            <textarea
              id="fl-matrix"
              className="area fl-area"
              rows={6}
              wrap="off"
              spellCheck={false}
              value={matrix}
              placeholder={"0\t0.99\t0.62\n0.98\t0\t0.97\n0.60\t0.97\t0"}
              aria-invalid={tried && !read.ok ? true : undefined}
              onChange={(event) => {
                setMatrix(event.target.value);
                setTried(true);
              }}
            />
            <p className="note second">
              {read.ok
                ? `${counted(read.prr.length, "node")}: node 1 is taken for the sensor, 2 for the controller, 3 for the actuator, to be changed afterwards.`
                : "0 to 1 or per cent, divided by tabs, commas or spaces, from a table or a CSV file; the diagonal is not read."}
            </p>
            {tried && matrix.trim() !== "" && !read.ok && <ProblemNote problem={{ title: read.problem }} />}
            <div className="fl-acts">
              <Button
                impossible={!parsed.ok ? notYet : matrix.trim() === "" ? "Paste the table first." : read.ok ? null : read.problem}
                onClick={() => parsed.ok && read.ok && lay(floorOfMatrix(parsed.value, name.trim(), read.prr))}
              >
                Take these links
              </Button>
            </div>
          </div>
        </Fold>
      </div>
    </section>
  );
}

const SKETCH = 420;

/** The arrangement as it would be laid out. */
function Sketch({ scenario }: { scenario: Scenario }): ReactNode {
  const { floor } = scenario;
  if (!floor) return null;
  const scale = Math.min((SKETCH - 40) / floor.widthM, 240 / floor.depthM);
  const width = floor.widthM * scale;
  const height = floor.depthM * scale;
  return (
    <svg
      width={width + 40}
      height={height + 40}
      viewBox={`-20 -20 ${width + 40} ${height + 40}`}
      role="img"
      aria-label={`Arrangement of ${counted(floor.nodes.length, "node")}`}
      className="fluid"
    >
      <rect width={width} height={height} className="paperf" />
      <rect width={width} height={height} className="pl-hall" />
      {floor.nodes.map((node) => (
        <g key={node.id} transform={`translate(${node.xM * scale} ${node.yM * scale})`}>
          <NodeShape state={node.name ? "starts" : "plain"} label={node.id} r={8.5} />
        </g>
      ))}
      {floor.interferers.map((one) => (
        <g key={`${one.xM} ${one.yM}`} transform={`translate(${one.xM * scale} ${one.yM * scale})`}>
          <InterfererShape />
        </g>
      ))}
    </svg>
  );
}
