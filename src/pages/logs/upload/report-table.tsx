import { useState } from "react";
import { MAX_TROUBLES, type ReadReport, TROUBLE_KINDS, type Trouble, type TroubleKind } from "#shared/reception/types.ts";
import { counted, countText } from "#shared/reception/words.ts";
import { Button } from "#src/components/ui/button.tsx";
import { download, fileStem } from "#src/lib/download.ts";

export const TROUBLE_WORDS: Record<TroubleKind, { one: string; many: string; about: string }> = {
  "bad-row": {
    one: "row that cannot be read",
    many: "rows that cannot be read",
    about: "What cannot be read is left out; a missing number counts as lost.",
  },
  duplicate: { one: "duplicate", many: "duplicates", about: "The same packet again; counted once." },
  "out-of-order": { one: "row out of order", many: "rows out of order", about: "Put where its number belongs." },
  wrapped: { one: "wrap of the numbers", many: "wraps of the numbers", about: "The counter began anew at 0 and was counted on." },
  reset: { one: "reset of the numbers", many: "resets of the numbers", about: "The node began to count anew; the log goes on behind it." },
  gap: { one: "gap", many: "gaps", about: "Many numbers in a row are missing; all of them count as lost." },
  "clock-jump": { one: "jump of the clock", many: "jumps of the clock", about: "The time goes back or leaps; the order follows the numbers." },
};

const FEW = 3;
const found = (report: ReadReport) => TROUBLE_KINDS.filter((kind) => report.troubles[kind].count > 0);

function csvOf(report: ReadReport): string {
  const cell = (text: string) => (/[",\n\r]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text);
  const rows = found(report)
    .flatMap((kind) => report.troubles[kind].first.map((trouble) => ({ kind, ...trouble })))
    .sort((a, b) => a.line - b.line)
    .map(({ line, kind, link, message, value }) => [String(line), kind, link, message, value].map(cell).join(","));
  return `line,kind,link,message,value\n${rows.join("\n")}\n`;
}

/** What was wrong with a file, by kind and line. */
export function ReportTable({ report, name }: { report: ReadReport; name: string }) {
  const kinds = found(report);
  const left = report.rows - report.rowsUsed;
  return (
    <section aria-labelledby="lg-report">
      <div className="hrow">
        <h2 id="lg-report">Report of the reading</h2>
        <span className="rt">
          {countText(report.rows)} rows, {left === 0 ? "all used" : `${countText(report.rowsUsed)} used, ${countText(left)} left out`}
        </span>
      </div>
      {kinds.length === 0 ? (
        <p className="second">No row was wrong: nothing was left out, out of order or twice in the file.</p>
      ) : (
        <>
          <ul className="lg-report">
            {kinds.map((kind) => (
              <KindOfTrouble key={kind} kind={kind} count={report.troubles[kind].count} first={report.troubles[kind].first} />
            ))}
          </ul>
          <div className="mt-3">
            <Button small icon="export" onClick={() => download(`${fileStem(name)}-report.csv`, csvOf(report), "text/csv")}>
              Download the report as CSV
            </Button>
          </div>
        </>
      )}
    </section>
  );
}

function KindOfTrouble({ kind, count, first }: { kind: TroubleKind; count: number; first: readonly Trouble[] }) {
  const [all, setAll] = useState(false);
  const words = TROUBLE_WORDS[kind];
  const shown = all ? first : first.slice(0, FEW);
  return (
    <li>
      <p>
        <b className="strong">{count >= 10_000 ? `${countText(count)} ${words.many}` : counted(count, words.one, words.many)}</b>{" "}
        <span className="second">{words.about}</span>
      </p>
      <ol className="lg-troubles" aria-label={words.many}>
        {shown.map(({ line, link, message, value }, i) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: a line can have two troubles of a kind
          <li key={`${line} ${i}`}>
            <span className="at">line {countText(line)}</span>
            <span>{message}</span>
            <span className="of">{link}</span>
            <span className="value">{value}</span>
          </li>
        ))}
      </ol>
      {first.length > FEW && (
        <Button small kind="bare" onClick={() => setAll(!all)} aria-expanded={all}>
          {all ? "Show fewer" : count > MAX_TROUBLES ? `Show the first ${first.length}` : `Show all ${first.length}`}
        </Button>
      )}
    </li>
  );
}
