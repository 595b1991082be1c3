import { useState } from "react";
import { countText } from "#shared/reception/words.ts";
import { ChoiceField, PickField } from "#src/components/ui/choice.tsx";
import { Field } from "#src/components/ui/field.tsx";
import { type Columns, DELIMITER_WORDS, type Delimiter } from "../model/columns.ts";

const WRAPS = [256, 65_536, 4_294_967_296];
const BITS: Record<number, string> = { 256: "8 bits", 65536: "16 bits", 4294967296: "32 bits" };

interface FileDetailsProps {
  columns: Columns;
  onChange: (columns: Columns) => void;
  onSplit: (delimiter: Delimiter) => void;
}

/** What the file is like beside its columns. */
export function FileDetails({ columns, onChange, onSplit }: FileDetailsProps) {
  const { wrapsAt, roles } = columns;
  const numbered = roles.includes("sequence") || roles.includes("round");
  const wraps = wrapsAt === null || WRAPS.includes(wrapsAt) ? WRAPS : [wrapsAt, ...WRAPS];
  return (
    <div className="lg-details">
      <div>
        <PickField
          label="Divided by"
          options={(Object.keys(DELIMITER_WORDS) as Delimiter[]).map((value) => ({ value, word: DELIMITER_WORDS[value] }))}
          value={columns.delimiter}
          onChoose={onSplit}
        />
        <ChoiceField
          label="First row"
          options={[
            { value: "names", word: "names" },
            { value: "data", word: "data" },
          ]}
          value={columns.header ? "names" : "data"}
          onChoose={(value) => onChange({ ...columns, header: value === "names" })}
        />
        <ChoiceField
          label="Decimal sign"
          options={[
            { value: ".", word: "point" },
            { value: ",", word: "comma" },
          ]}
          value={columns.decimal}
          onChoose={(decimal) => onChange({ ...columns, decimal })}
        />
      </div>
      <div>
        {numbered && (
          <PickField
            label="Numbers begin anew"
            options={[
              { value: "found", word: "as found: 8, 16 or 32 bits" },
              ...wraps.map((value) => ({ value: String(value), word: `after ${countText(value - 1)}${BITS[value] ? ` (${BITS[value]})` : ""}` })),
            ]}
            value={wrapsAt === null ? "found" : String(wrapsAt)}
            onChoose={(value) => onChange({ ...columns, wrapsAt: value === "found" ? null : Number(value) })}
          />
        )}
        {!roles.includes("time") && <PeriodField columns={columns} onChange={onChange} />}
      </div>
    </div>
  );
}

const LEAST_MS = 0.001;
const MOST_MS = 86_400_000;

const asText = (periodS: number | null) => (periodS === null ? "" : String(Number((periodS * 1000).toPrecision(9))));
const readMs = (text: string) => (text.trim() === "" ? null : Number(text.replace(",", ".")));
const isPeriod = (ms: number) => ms >= LEAST_MS && ms <= MOST_MS;

/** Only asked for when no column tells the time. What is typed stays, also while it is no value. */
function PeriodField({ columns, onChange }: Pick<FileDetailsProps, "columns" | "onChange">) {
  const [text, setText] = useState(asText(columns.periodS));
  const [known, setKnown] = useState(columns.periodS);
  // The columns were guessed anew: the field follows.
  if (columns.periodS !== known) {
    setKnown(columns.periodS);
    setText(asText(columns.periodS));
  }
  const value = readMs(text);
  const wrong = value !== null && !isPeriod(value);
  return (
    <Field
      label="Packet to packet"
      value={text}
      onText={(next) => {
        setText(next);
        const ms = readMs(next);
        if (ms !== null && !isPeriod(ms)) return;
        const periodS = ms === null ? null : ms / 1000;
        setKnown(periodS);
        onChange({ ...columns, periodS });
      }}
      unit="ms"
      range="0.001 to 8.64e7"
      problem={
        wrong
          ? { title: `“${text}” is no time from packet to packet.`, text: "Permitted: 0.001 to 86 400 000 ms; left empty, times are not known." }
          : null
      }
      hint="No column tells the time: say the interval, or leave it empty."
    />
  );
}
