/** A measured curve as text: SNR in dB and packet reception ratio, a row a line; CSV with a head is welcome. */
import { numberText, plainNumber } from "./screen-unit.ts";
import type { Read } from "./typed-values.ts";

const MOST_ROWS = 2000;

/** Decimal commas are read where a semicolon or a tab divides. */
function columnsOf(line: string): string[] {
  if (/[;\t]/.test(line)) return line.split(/[;\t]/).map((word) => word.trim());
  return line.trim().split(/[\s,]+/);
}

export function readReception(text: string): Read {
  const rows: { snrDb: number; prr: number }[] = [];
  let head = true;
  for (const [i, line] of text.split(/\r?\n/).entries()) {
    if (line.trim() === "" || line.trim().startsWith("#")) continue;
    const columns = columnsOf(line);
    const [snr, prr] = columns.map((word) => plainNumber(word.replace(/%$/, "")));
    if (head && snr === null) {
      head = false;
      continue;
    }
    head = false;
    if (columns.length < 2 || snr === null || snr === undefined || prr === null || prr === undefined)
      return { ok: false, problem: `Line ${i + 1}: \u201c${line.trim().slice(0, 30)}\u201d is not an SNR and a reception ratio.` };
    const ratio = columns[1]?.endsWith("%") ? Number(prr) / 100 : Number(prr);
    if (ratio < 0 || ratio > 1) return { ok: false, problem: `Line ${i + 1}: the reception ratio is ${numberText(ratio)}; 0 to 1 is permitted.` };
    const before = rows.at(-1);
    if (before && Number(snr) <= before.snrDb)
      return {
        ok: false,
        problem: `Line ${i + 1}: ${numberText(Number(snr))} dB does not lie above the row before it (${numberText(before.snrDb)} dB).`,
      };
    rows.push({ snrDb: Number(snr), prr: ratio });
  }
  if (rows.length < 2) return { ok: false, problem: `${rows.length} rows: at least two are needed.` };
  if (rows.length > MOST_ROWS) return { ok: false, problem: `${rows.length} rows: at most ${MOST_ROWS}.` };
  return { ok: true, value: rows };
}

export const receptionText = (rows: unknown): string =>
  Array.isArray(rows) ? rows.map(({ snrDb, prr }) => `${numberText(snrDb)}  ${numberText(prr)}`).join("\n") : "";
