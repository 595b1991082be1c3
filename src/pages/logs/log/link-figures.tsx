import type { LinkFit } from "#shared/reception/fit.ts";
import type { LinkTrace } from "#shared/reception/types.ts";
import { countText, durationText } from "#shared/reception/words.ts";
import { significant, withUnit } from "#src/lib/format.ts";
import { lossText, packetsText, rangeOfLoss } from "../model/log-words.ts";

interface Figure {
  name: string;
  value: string;
  more: string;
}

function figuresOf(link: LinkTrace, { counts, lossRatio, clopperPearson, gilbertElliott }: LinkFit): Figure[] {
  const { intervalS } = link;
  const lasting = (packets: number) => (intervalS === null ? "" : durationText(packets * intervalS));
  const figures: Figure[] = [
    { name: "Lost", value: lossText(lossRatio), more: `95 % interval ${rangeOfLoss(...clopperPearson)}` },
    {
      name: "Recorded",
      value: packetsText(counts.packets),
      more:
        intervalS === null
          ? `${countText(counts.lost)} lost; times not known`
          : `${countText(counts.lost)} lost; ${durationText(counts.packets * intervalS)}`,
    },
    {
      name: "One packet every",
      value: intervalS === null ? "not known" : durationText(intervalS),
      more: intervalS === null ? "no column tells the time" : "median",
    },
  ];
  if (counts.lostStreaks > 0) {
    figures.push({ name: "Longest burst", value: packetsText(counts.longestLost), more: lasting(counts.longestLost) });
  }
  if (gilbertElliott) {
    const { goodToBad, badToGood, meanBurst, meanGap } = gilbertElliott;
    const packets = (mean: number) => `${significant(mean)} ${significant(mean) === "1" ? "packet" : "packets"}`;
    const percent = (share: number) => withUnit(significant(share * 100), "%");
    figures.push(
      {
        name: "Mean burst, fitted",
        value: packets(meanBurst),
        more: `bad to good ${percent(badToGood)}; if independent ${significant(1 / (1 - lossRatio))}`,
      },
      { name: "Mean gap, fitted", value: packets(meanGap), more: `good to bad ${percent(goodToBad)}` },
    );
  }
  if (link.rssi) {
    const { medianDbm, p05Dbm, p95Dbm } = link.rssi;
    const dbm = (value: number) => String(Math.round(value)).replace("-", "−");
    figures.push({
      name: "RSSI, median",
      value: withUnit(dbm(medianDbm), "dBm"),
      more: `9 of 10 within ${dbm(p05Dbm)} to ${withUnit(dbm(p95Dbm), "dBm")}`,
    });
  }
  return figures;
}

export function LinkFiguresList({ link, fit }: { link: LinkTrace; fit: LinkFit }) {
  return (
    <dl className="lg-figures">
      {figuresOf(link, fit).map(({ name, value, more }) => (
        <div key={name}>
          <dt>{name}</dt>
          <dd>{value}</dd>
          <dd>{more}</dd>
        </div>
      ))}
    </dl>
  );
}
