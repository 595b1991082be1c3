import { useId, useRef } from "react";
import { receptionRatio } from "#shared/network/reception.ts";
import type { RoundTiming } from "#shared/network/round.ts";
import { pathText } from "#shared/scenario/parse.ts";
import type { Phy, Radio } from "#shared/scenario/round-schema.ts";
import { ReceptionCurve } from "#src/components/drawings/reception-curve.tsx";
import { Button } from "#src/components/ui/button.tsx";
import { ProblemNote } from "#src/components/ui/field.tsx";
import { withUnit } from "#src/lib/format.ts";
import { RECEPTION } from "../model/choices.ts";
import { getAt } from "../model/json-path.ts";
import { readReception, receptionText } from "../model/reception-text.ts";
import { asProblem, ChoiceAt, NumberAt, TextAt } from "./fields.tsx";
import { useForm, useIssue } from "./form.tsx";

const RECEPTION_PATH = ["radio", "reception"] as const;

/** From the ratio of signal to noise to a packet's reception: the standard's formula, or a measured table; and its curve. */
export function ReceptionPart({ timing }: { timing: RoundTiming | null }) {
  const { json } = useForm().draft;
  const radio = getAt(json, ["radio"]) as Radio;
  const { reception, phy, headerBytes } = radio;
  const payload = Math.max(0, ...(timing?.slots.map(({ payloadBytes }) => payloadBytes) ?? [16]));
  const bytes = headerBytes + payload;
  return (
    <>
      <ChoiceAt path={RECEPTION_PATH} options={RECEPTION} form />
      {reception.type === "table" ? (
        <>
          <TextAt path={[...RECEPTION_PATH, "name"]} />
          <ReceptionTable />
        </>
      ) : (
        <CodingGains phy={phy} />
      )}
      <ReceptionCurve
        ratio={(snrDb) => receptionRatio(phy, reception, bytes, 10 ** (snrDb / 10))}
        points={reception.type === "table" ? reception.rows : undefined}
        note={
          reception.type === "table"
            ? "Constant outside of its rows, for packets of every length."
            : `Of the longest message, ${withUnit(String(bytes), "B")} with header.`
        }
      />
    </>
  );
}

const CodingGains = ({ phy }: { phy: Phy }) =>
  phy === "le-coded-s2" ? (
    <NumberAt path={[...RECEPTION_PATH, "codingGainS2Db"]} hint="Above LE 1M." />
  ) : phy === "le-coded-s8" ? (
    <NumberAt path={[...RECEPTION_PATH, "codingGainS8Db"]} hint="Above LE 1M." />
  ) : null;

const MOST_BYTES = 200_000;

/** Rows of SNR and PRR, typed, pasted or from a file. */
function ReceptionTable() {
  const { draft, edit, endStep, readOnly } = useForm();
  const path = [...RECEPTION_PATH, "rows"];
  const issue = useIssue(path, true);
  const id = useId();
  const file = useRef<HTMLInputElement>(null);
  const typed = draft.typed[pathText(path)];
  const rows = getAt(draft.json, path);
  const take = (text: string) => {
    const read = readReception(text);
    edit(read.ok ? { kind: "type", path, text, value: read.value } : { kind: "mistype", path, text, problem: read.problem });
  };
  const problem = asProblem(issue);
  return (
    <div className="su-seq">
      <label htmlFor={id}>
        SNR and reception ratio<span className="second"> in dB and 0 to 1, a row a line</span>
      </label>
      <textarea
        id={id}
        className="area"
        rows={5}
        spellCheck={false}
        value={typed ? typed.text : receptionText(rows)}
        readOnly={readOnly}
        aria-invalid={problem ? true : undefined}
        aria-describedby={problem ? `${id}-why` : undefined}
        onChange={(event) => take(event.target.value)}
        onBlur={endStep}
        data-path={pathText(path)}
      />
      {problem && <ProblemNote id={`${id}-why`} problem={problem} />}
      {!readOnly && (
        <>
          <input
            ref={file}
            type="file"
            accept=".csv,.txt,text/csv,text/plain"
            hidden
            aria-label="File with SNR and reception ratio"
            onChange={(event) => {
              const [chosen] = event.target.files ?? [];
              event.target.value = "";
              if (!chosen) return;
              if (chosen.size > MOST_BYTES)
                edit({
                  kind: "mistype",
                  path,
                  text: typed?.text ?? receptionText(rows),
                  problem: `\u201c${chosen.name}\u201d has more than 200 kB; a table has at most 2000 rows.`,
                });
              else void chosen.text().then(take);
            }}
          />
          <Button small icon="import" onClick={() => file.current?.click()}>
            From a file
          </Button>
        </>
      )}
    </div>
  );
}
