import type { LogDetail } from "#shared/api/logs.ts";
import type { ColumnMapping } from "#shared/reception/types.ts";
import { durationText } from "#shared/reception/words.ts";
import { bytesText, instantText } from "#src/lib/format.ts";
import { DELIMITER_WORDS, UNIT_WORDS } from "../model/columns.ts";

const columnText = (column: string | number): string => (typeof column === "number" ? `column ${column}` : `“${column}”`);

/** "“seq” is the packet number; “time_s” is the time, in s; …" */
function mappingText(mapping: ColumnMapping): string {
  const { number, time, source, receiver, received, rssi } = mapping;
  const marks = mapping.receivedMarks === "lost" ? "says what was lost" : "says what was received";
  return [
    number &&
      `${columnText(number.column)} is the ${number.kind === "round" ? "round" : "packet number"}${number.wrapsAt ? `, anew after ${number.wrapsAt - 1}` : ""}`,
    time && `${columnText(time.column)} is the time${time.unit === "iso" ? ", as date and time" : `, in ${UNIT_WORDS[time.unit]}`}`,
    source && `${columnText(source)} is the source`,
    receiver && `${columnText(receiver)} is the receiver`,
    received ? `${columnText(received)} ${marks}` : "every row is a received packet",
    rssi && `${columnText(rssi)} is the RSSI`,
    mapping.periodS !== null && `one packet every ${durationText(mapping.periodS)}`,
    `divided by ${DELIMITER_WORDS[mapping.delimiter]}${mapping.decimal === "," ? ", decimal comma" : ""}`,
  ]
    .filter(Boolean)
    .join("; ");
}

/** Where the log comes from, and how it was read. */
export function LogRecord({ log }: { log: LogDetail }) {
  return (
    <section className="lg-record" aria-labelledby="lg-record">
      <div className="hrow">
        <h2 id="lg-record">The file</h2>
      </div>
      <dl className="small">
        <dt>Name of the file</dt>
        <dd>{log.fileName || "not given"}</dd>
        <dt>Size</dt>
        <dd>{bytesText(log.bytes)}, kept as it was</dd>
        <dt>Uploaded</dt>
        <dd>
          {instantText(log.uploadedAt)} by {log.author.name}
        </dd>
        <dt>Read as</dt>
        <dd>{mappingText(log.mapping)}</dd>
        <dt>SHA-256</dt>
        <dd className="num">{log.sha256}</dd>
      </dl>
    </section>
  );
}
