import { Icon } from "#src/components/ui/icon.tsx";
import type { LogPreview } from "#src/workers/log-contract.ts";
import { type Columns, ROLE_WORDS, ROLES, type Role, type TimeUnit, UNIT_WORDS, withRole } from "../model/columns.ts";

const ROWS = 8;
const MARKS = [
  { value: "received", word: "1, yes: received" },
  { value: "lost", word: "1, yes: lost" },
];
const UNITS = Object.keys(UNIT_WORDS) as TimeUnit[];

interface ColumnTableProps {
  preview: LogPreview;
  columns: Columns;
  /** Header, or null. */
  names: readonly string[] | null;
  bad: boolean;
  onChange: (columns: Columns) => void;
}

/** The first rows as they stand in the file, and above each column what it is. */
export function ColumnTable({ preview, columns, names, bad, onChange }: ColumnTableProps) {
  const rows = preview.rows.slice(columns.header ? 1 : 0).slice(0, ROWS);
  const nameOf = (index: number) => names?.[index]?.trim() || `column ${index + 1}`;
  return (
    // biome-ignore lint/a11y/noNoninteractiveTabindex: it scrolls, and keys have to be able to scroll it
    <section className="scroll-x lg-columns" aria-label="First rows of the file" tabIndex={0}>
      <table className="t num">
        <thead>
          <tr>
            <td className="lg-line" />
            {columns.roles.map((role, index) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: columns are known by their place
              <td key={index} data-used={role !== "unused"}>
                <Select
                  label={`What ${nameOf(index)} is`}
                  value={role}
                  options={ROLES.map((value) => ({ value, word: ROLE_WORDS[value] }))}
                  bad={bad}
                  onChoose={(value) => onChange(withRole(columns, index, value as Role))}
                />
                {role === "time" && (
                  <Select
                    label={`Unit of ${nameOf(index)}`}
                    value={columns.timeUnit}
                    options={UNITS.map((value) => ({ value, word: value === "iso" ? UNIT_WORDS[value] : `in ${UNIT_WORDS[value]}` }))}
                    onChoose={(value) => onChange({ ...columns, timeUnit: value as TimeUnit })}
                  />
                )}
                {role === "received" && (
                  <Select
                    label={`What a 1 in ${nameOf(index)} says`}
                    value={columns.marks}
                    options={MARKS}
                    onChoose={(value) => onChange({ ...columns, marks: value as Columns["marks"] })}
                  />
                )}
              </td>
            ))}
          </tr>
          <tr>
            <th scope="col" className="lg-line">
              <span className="vh">Line</span>
            </th>
            {columns.roles.map((role, index) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: as above
              <th key={index} scope="col" data-used={role !== "unused"}>
                {nameOf(index)}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map(({ line, cells }) => (
            <tr key={line}>
              <td className="lg-line">{line}</td>
              {columns.roles.map((role, index) => (
                // biome-ignore lint/suspicious/noArrayIndexKey: as above
                <td key={index} data-used={role !== "unused"}>
                  {cells[index] ?? ""}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </section>
  );
}

interface SelectProps {
  label: string;
  value: string;
  options: readonly { value: string; word: string }[];
  bad?: boolean;
  onChoose: (value: string) => void;
}

export const Select = ({ label, value, options, bad = false, onChoose }: SelectProps) => (
  <span className={`pick ${bad ? "lg-bad" : ""}`}>
    <select aria-label={label} aria-invalid={bad || undefined} value={value} onChange={(event) => onChoose(event.target.value)}>
      {options.map((option) => (
        <option key={option.value} value={option.value}>
          {option.word}
        </option>
      ))}
    </select>
    <Icon name="down" size={14} />
  </span>
);
