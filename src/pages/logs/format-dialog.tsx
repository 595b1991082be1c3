import { Dialog } from "#src/components/ui/dialog.tsx";
import { Scroller } from "#src/components/ui/table.tsx";

const EXAMPLE = {
  head: ["seq", "time_s", "from", "to", "ok", "rssi_dbm"],
  rows: [
    ["0", "0.000", "S1", "C1", "1", "−61"],
    ["1", "0.020", "S1", "C1", "1", "−62"],
    ["2", "0.040", "S1", "C1", "0", ""],
    ["4", "0.080", "S1", "C1", "1", "−60"],
  ],
};

const COLUMNS: { name: string; needed: string; text: string }[] = [
  {
    name: "Packet number",
    needed: "needed",
    text: "A sequence number per packet, or the number of the round. It may wrap (255, 0, 1 …) or begin anew after a restart of the node.",
  },
  {
    name: "Received",
    needed: "if there is one",
    text: "1 or 0, true or false, yes or no, ok or lost. Without this column every row is a packet that arrived.",
  },
  {
    name: "Time",
    needed: "if there is one",
    text: "In s, ms, µs or ns, or as date and time (ISO 8601). Without it, say the time from one packet to the next.",
  },
  {
    name: "Source, receiver",
    needed: "for several links",
    text: "Who sent and who listened. Each pair is a link of its own; without them the whole file is one link.",
  },
  { name: "RSSI", needed: "if there is one", text: "In dBm. It is summed up, and decides nothing." },
];

/** What a log has to hold, with a small example. */
export function FormatDialog({ onShut }: { onShut: () => void }) {
  return (
    <Dialog
      open
      broad
      onOpenChange={onShut}
      cancel="Close"
      title="What a reception log has to hold"
      text="A text file with one row per expected packet or per received packet: CSV, divided by commas, semicolons or tabs. Columns may have any name and any order; you say which is which after choosing the file."
    >
      <h3>Columns</h3>
      <table className="t">
        <tbody>
          {COLUMNS.map(({ name, needed, text }) => (
            <tr key={name}>
              <th scope="row" className="align-top!">
                {name}
                <span className="pl font-normal">{needed}</span>
              </th>
              <td>{text}</td>
            </tr>
          ))}
        </tbody>
      </table>
      <h3>For example</h3>
      <Scroller label="Example of a log">
        <table className="t num">
          <thead>
            <tr>
              {EXAMPLE.head.map((name) => (
                <th key={name} scope="col">
                  {name}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {EXAMPLE.rows.map((row) => (
              <tr key={row[0]}>
                {row.map((cell, i) => (
                  <td key={EXAMPLE.head[i]}>{cell}</td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </Scroller>
      <p className="second mt-2">
        Packet 2 is lost since its row says so, packet 3 since its number is missing: of five packets two were lost, in a row. Duplicates, rows out of
        order, gaps, clock jumps and rows that cannot be read are counted and reported by line.
      </p>
    </Dialog>
  );
}
