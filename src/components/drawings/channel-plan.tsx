import "./drawings.css";
import { type KeyboardEvent, useRef, useState } from "react";
import { channelPlan, channelRange, type NamedBand } from "#shared/network/channels.ts";
import type { Phy } from "#shared/scenario/round-schema.ts";
import { measureWith, pageFace, useWidth } from "#src/components/plots/measure.ts";
import { listed } from "#src/lib/format.ts";
import { channelFactsText } from "./channel-facts.ts";

interface ChannelPlanProps {
  phy: Phy;
  /** As stored: empty stands for the PHY's usual channel. */
  list: readonly number[];
  /** What else sends in the band. */
  bands: readonly NamedBand[];
  /** Takes a channel in or out; left out: only to look at. */
  onToggle?: (channel: number) => void;
}

const FROM_MHZ = 2400;
const UNTIL_MHZ = 2483.5;
const LINE = 22;
const BARS = 40;

/** The band from 2400 to 2483.5 MHz: what else sends there above, the radio's channels below, where they stand on each other between. */
export function ChannelPlan({ phy, list, bands, onToggle }: ChannelPlanProps) {
  const host = useRef<HTMLDivElement>(null);
  const width = Math.max(260, useWidth(host) || 320);
  return (
    <div ref={host} className="channel-plan">
      <Band {...{ phy, list, bands, onToggle, width }} />
    </div>
  );
}

function Band({ phy, list, bands, onToggle, width }: ChannelPlanProps & { width: number }) {
  const { first, last, usual } = channelRange(phy);
  const [focused, setFocused] = useState(list[0] ?? usual);
  const measure = measureWith(pageFace());
  const xOf = (mhz: number) => 1 + ((Math.min(UNTIL_MHZ, Math.max(FROM_MHZ, mhz)) - FROM_MHZ) / (UNTIL_MHZ - FROM_MHZ)) * (width - 2);
  const shown = bands.filter(({ centreMHz, bandwidthMHz }) => centreMHz + bandwidthMHz / 2 > FROM_MHZ && centreMHz - bandwidthMHz / 2 < UNTIL_MHZ);
  const lines = linesFor(
    shown.map((band) => ({
      from: xOf(band.centreMHz - band.bandwidthMHz / 2),
      until: xOf(band.centreMHz + band.bandwidthMHz / 2),
      name: measure(band.name, "axis"),
    })),
    width,
  );
  const count = shown.length === 0 ? 0 : Math.max(...lines) + 1;
  const top = count * LINE + 4;
  const base = top + BARS;
  const used = (channel: number) => (list.length === 0 ? channel === usual : list.includes(channel));
  const plan = channelPlan(phy, shown);
  const half = (one: { bandwidthMHz: number }) => Math.max(1.5, (xOf(FROM_MHZ + one.bandwidthMHz) - xOf(FROM_MHZ)) / 2);
  const labelEvery = (plan.length * 18) / width > 1 ? ((plan.length * 18) / width > 2 ? 4 : 2) : 1;
  const onKeyDown = (event: KeyboardEvent<SVGSVGElement>) => {
    const step = event.key === "ArrowRight" ? 1 : event.key === "ArrowLeft" ? -1 : 0;
    if (step === 0 && event.key !== " " && event.key !== "Enter") return;
    event.preventDefault();
    if (step === 0) onToggle?.(focused);
    else {
      const next = Math.min(last, Math.max(first, focused + step));
      setFocused(next);
      event.currentTarget.querySelector<SVGElement>(`[data-channel="${next}"]`)?.focus();
    }
  };
  return (
    <svg
      width={width}
      height={base + 36}
      viewBox={`0 0 ${width} ${base + 36}`}
      role={onToggle ? "group" : "img"}
      aria-label={onToggle ? "Channels in the 2.4 GHz band" : `Channels in the 2.4 GHz band. ${channelFactsText(phy, list, bands)}`}
      onKeyDown={onToggle && onKeyDown}
    >
      {shown.map((band, i) => {
        const [from, until] = [xOf(band.centreMHz - band.bandwidthMHz / 2), xOf(band.centreMHz + band.bandwidthMHz / 2)];
        const y = 4 + (lines[i] ?? 0) * LINE;
        const size = measure(band.name, "axis");
        const inside = size < until - from - 6;
        const middle = Math.min(width - size / 2 - 2, Math.max(size / 2 + 2, (from + until) / 2));
        const after = until + 4 + size < width;
        return (
          <g key={`${band.name}${band.centreMHz}`}>
            <rect x={from} y={y} width={Math.max(2, until - from)} height={base - y} className="channel-foul" />
            <rect x={from} y={y} width={Math.max(2, until - from)} height={LINE - 5} className="channel-band" />
            <text
              x={inside ? middle : after ? until + 4 : from - 4}
              y={y + 13}
              className="ax halo2"
              textAnchor={inside ? "middle" : after ? "start" : "end"}
            >
              {band.name}
            </text>
          </g>
        );
      })}
      {plan.map((one) => {
        const x = xOf(one.centreMHz);
        const inUse = used(one.channel);
        const words = `Channel ${one.channel}, ${one.centreMHz} MHz, ${one.overlaps.length === 0 ? "clear" : `reached by ${listed(one.overlaps.map(({ name }) => name))}`}`;
        const slot = ((xOf(UNTIL_MHZ) - xOf(FROM_MHZ)) / (UNTIL_MHZ - FROM_MHZ)) * (phy === "ieee802154" ? 5 : 2);
        return (
          <g
            key={one.channel}
            className={`channel${inUse ? " used" : ""}${onToggle ? " pressed" : ""}`}
            {...(onToggle && {
              role: "checkbox",
              "aria-checked": inUse,
              "aria-label": words,
              tabIndex: one.channel === focused ? 0 : -1,
              "data-channel": one.channel,
              onClick: () => {
                setFocused(one.channel);
                onToggle(one.channel);
              },
            })}
          >
            <title>{words}</title>
            <rect x={x - slot / 2} y={top} width={slot} height={BARS + 18} className="channel-hit" />
            <rect x={x - half(one)} y={top + 8} width={2 * half(one)} height={BARS - 8} className="channel-bar" />
            {one.overlaps.length > 0 && inUse && <rect x={x - half(one)} y={base + 1} width={2 * half(one)} height="3" className="cut" />}
            {(one.channel - first) % labelEvery === 0 && (
              <text x={x} y={base + 14} className={inUse ? "txb" : "axm"} textAnchor="middle" style={inUse ? { fontSize: 12 } : undefined}>
                {one.channel}
              </text>
            )}
          </g>
        );
      })}
      <path d={`M0 ${base + 0.5}H${width}`} className="ink" />
      <text x="0" y={base + 32} className="axm">
        2400
      </text>
      <text x={width} y={base + 32} className="axm" textAnchor="end">
        {"2483.5\u2009MHz"}
      </text>
    </svg>
  );
}

/** Bands that would lie over each other, with their names, go on lines of their own. */
function linesFor(spans: readonly { from: number; until: number; name: number }[], width: number): number[] {
  const ends: { from: number; until: number }[][] = [];
  return spans.map(({ from, until, name }) => {
    const inside = name < until - from - 6;
    const box = inside ? { from, until } : until + 4 + name < width ? { from, until: until + 6 + name } : { from: from - 6 - name, until };
    let line = 0;
    while (ends[line]?.some((other) => box.from < other.until + 2 && box.until > other.from - 2)) line++;
    ends[line] ??= [];
    ends[line]?.push(box);
    return line;
  });
}
