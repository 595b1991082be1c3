import { linkName } from "#shared/reception/types.ts";
import { counted, countText, durationText } from "#shared/reception/words.ts";
import { Button } from "#src/components/ui/button.tsx";
import { ProblemNote } from "#src/components/ui/field.tsx";
import { Scroller } from "#src/components/ui/table.tsx";
import type { LogReading } from "#src/workers/log-contract.ts";
import { lossText, packetsText } from "../model/log-words.ts";
import { ProgressBar } from "./progress.tsx";
import type { UploadControl } from "./use-upload.ts";

const FEW_LINKS = 12;

/** What the whole file holds under the present columns: while it is read, and after. */
export function WhatWasRead({ control }: { control: UploadControl }) {
  const { reading } = control;
  if (reading.state === "reading") {
    return (
      <div className="lg-progress">
        <ProgressBar what="Reading the whole file" progress={reading.progress} />
        <Button small onClick={control.cancelReading}>
          Stop reading
        </Button>
      </div>
    );
  }
  if (reading.state === "cancelled") {
    return (
      <div className="lg-progress">
        <span>The reading was stopped; nothing is known of the whole file yet.</span>
        <Button small onClick={control.readAgain}>
          Read the file
        </Button>
      </div>
    );
  }
  if (reading.state === "failed") {
    return (
      <div className="lg-progress">
        <ProblemNote problem={{ title: "The file was not read.", text: reading.message }} />
        <Button small onClick={control.readAgain}>
          Try again
        </Button>
      </div>
    );
  }
  if (reading.state === "waiting") return <p className="second">The whole file is read as soon as the columns say what was lost.</p>;
  return <Sum reading={reading.reading} />;
}

function Sum({ reading: { links } }: { reading: LogReading }) {
  const packets = links.reduce((sum, link) => sum + link.packets, 0);
  const lost = links.reduce((sum, link) => sum + link.lost, 0);
  if (links.length === 0 || packets === 0)
    return (
      <ProblemNote problem={{ title: "No packet was found under these columns.", text: "Choose other columns, or look at the report below." }} />
    );
  return (
    <>
      <p className="lg-sum">
        <b>{counted(links.length, "link")}</b>, {packetsText(packets)}, <b>{countText(lost)} lost</b> ({lossText(lost / packets)}).
      </p>
      <Scroller label="Links that were found">
        <table className="t num">
          <thead>
            <tr>
              <th scope="col">Link</th>
              <th scope="col" className="r">
                Packets
              </th>
              <th scope="col" className="r">
                Lost
              </th>
              <th scope="col" className="r">
                Share
              </th>
              <th scope="col" className="r">
                One packet every
              </th>
              <th scope="col" className="r">
                Lasts
              </th>
              <th scope="col" className="r">
                RSSI, median
              </th>
            </tr>
          </thead>
          <tbody>
            {links.slice(0, FEW_LINKS).map((link) => (
              <tr key={linkName(link)}>
                <th scope="row">{linkName(link)}</th>
                <td className="r">{countText(link.packets)}</td>
                <td className="r">{countText(link.lost)}</td>
                <td className="r nw">{link.packets > 0 ? lossText(link.lost / link.packets) : "none"}</td>
                <td className="r nw">{link.intervalS === null ? "not known" : durationText(link.intervalS)}</td>
                <td className="r nw">{link.intervalS === null ? "not known" : durationText(link.intervalS * link.packets)}</td>
                <td className="r nw">{link.rssi ? `${String(link.rssi.medianDbm).replace("-", "−")} dBm` : "none"}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroller>
      {links.length > FEW_LINKS && (
        <p className="second mt-1">and {counted(links.length - FEW_LINKS, "link")} more; all are shown once the log is saved.</p>
      )}
    </>
  );
}
