import type { Measure } from "#src/components/plots/measure.ts";
import { fixed, withUnit } from "#src/lib/format.ts";
import { laneParts, type Placed, type RibbonScale, type RoundPicture, WordPlacer } from "./ribbon-geometry.ts";

interface RibbonLaneProps {
  timing: RoundPicture;
  scale: RibbonScale;
  y: number;
  width: number;
  measure: Measure;
}

interface Word extends Placed {
  text: string;
  strong?: boolean;
}

/** The loop below the round: samples, on its way, computes, waits, acts, and the latency's bracket. */
export function RibbonLane({ timing, scale, y, width, measure }: RibbonLaneProps) {
  const { xOf } = scale;
  const [own] = timing.loops;
  const parts = laneParts(timing, own);
  const [samples, acts] = [xOf(own.sampleAtS), xOf(own.actAtS)];
  const placer = new WordPlacer(0, width);
  placer.reserve(samples, y, 4);
  placer.reserve(acts, y - 4, 5);
  const words: Word[] = [];
  const say = (text: string, offers: Omit<Placed, "width">[]) => {
    const size = measure(text, "axis");
    const placed = placer.place(offers.map((offer) => ({ ...offer, width: size })));
    if (placed) words.push({ ...placed, text });
  };
  say("samples", [
    { x: samples - 9, y: y + 4, anchor: "end" },
    { x: samples + 1, y: y - 10, anchor: "start" },
    { x: samples + 8, y: y + 15, anchor: "start" },
  ]);
  say("acts", [
    { x: acts - 11, y: y + 15, anchor: "end" },
    { x: acts + 12, y: y + 4, anchor: "start" },
  ]);
  // Computing first: its box is the shortest, the ways around it have room.
  for (const kind of ["computes", "way", "wait"] as const) {
    for (const part of parts.filter((one) => one.kind === kind)) {
      const [from, until] = [xOf(part.fromS), xOf(part.untilS)];
      const x = (from + until) / 2;
      const fits = until - from > measure(part.words, "axis") + 8;
      if (kind === "computes") {
        say(part.words, [
          { x, y: y - 10, anchor: "middle" },
          { x, y: y + 19, anchor: "middle" },
        ]);
      } else if (fits) say(part.words, [{ x, y: y - 6, anchor: "middle" }]);
      else if (kind === "way" && until - from > measure("on its way", "axis") + 4) say("on its way", [{ x, y: y - 6, anchor: "middle" }]);
    }
  }
  const ms = (seconds: number) => withUnit(fixed(seconds * 1000, 2), "ms");
  const latency = ms(own.latencyS);
  const tooEarly = own.earliestActS > own.actAtS + 1e-9;
  const long = ", the same in every round";
  const lead = `latency τ = ${latency}`;
  const whole = measure(lead, "strong") + measure(long, "strong") < width - 8;
  const half = tooEarly ? 0 : (measure(lead, "strong") + (whole ? measure(long, "strong") : 0)) / 2;
  const middle = Math.min(width - half - 2, Math.max(half + 2, (samples + acts) / 2));
  return (
    <g>
      <path d={`M${samples} ${y - 38}V${y - 4}M${acts} ${y - 38}V${y - 9}`} className="lead" />
      {parts.map(({ kind, fromS, untilS }) =>
        kind === "computes" ? (
          <rect key={fromS} x={xOf(fromS)} y={y - 6} width={Math.max(3, xOf(untilS) - xOf(fromS))} height="12" className="comp" />
        ) : (
          <path key={fromS} d={`M${xOf(fromS)} ${y}H${xOf(untilS)}`} className={kind === "way" ? "lane" : "laned"} />
        ),
      )}
      <circle cx={samples} cy={y} r="4.2" className="samp" />
      <path d={`M${acts - 6} ${y - 9}h12l-6 10z`} className={tooEarly ? "act over" : "act"} />
      {words.map(({ text, x, y: at, anchor }) => (
        <text key={`${text}${x}`} x={x} y={at} className="ax" textAnchor={anchor}>
          {text}
        </text>
      ))}
      {tooEarly ? (
        <text x={width} y={y + 36} className="txc" textAnchor="end">
          would have to act at {ms(own.actAtS)}, the command is there at {ms(own.earliestActS)}
        </text>
      ) : (
        <>
          <path d={`M${samples} ${y + 22}v6H${acts}v-6`} className="brk" />
          <text x={middle} y={y + 44} className="txb" textAnchor="middle">
            latency <tspan className="it">τ</tspan> = {latency}
            {whole && long}
          </text>
        </>
      )}
    </g>
  );
}
