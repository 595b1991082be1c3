import { niceStep } from "#src/components/plots/units.ts";
import { fixed, significant } from "#src/lib/format.ts";
import { NeatAxis } from "./neat-axis.tsx";
import { hatchedBands } from "./rock.tsx";
import { usePictureWidth } from "./use-picture-width.ts";

interface CorrelationPlotProps {
  /** Lag 1, 2, ... */
  values: readonly number[];
  /** Within ± this in 95 of 100 independent logs, lag by lag. */
  bound: number;
}

const LEFT = 46;
const TOP = 8;
const PLOT = 128;
const HEIGHT = TOP + PLOT + 44;

/** Autocorrelation of the losses by lag; outside of the bound of independence is rock. */
export function CorrelationPlot({ values, bound }: CorrelationPlotProps) {
  const [host, width] = usePictureWidth();
  const right = width - 8;
  const high = Math.max(bound * 1.6, ...values);
  const low = Math.min(-bound * 1.6, ...values);
  const step = niceStep(high / 2);
  const top = Math.ceil(high / step - 1e-9) * step;
  const bottom = Math.min(low, -top * 0.12);
  const yOf = (value: number) => TOP + PLOT * ((top - value) / (top - bottom));
  const slot = (right - LEFT) / Math.max(1, values.length);
  const xOf = (lag: number) => LEFT + (lag - 0.5) * slot;
  const decimals = Math.max(1, Math.ceil(-Math.log10(top) - 1e-9) + 1);
  return (
    <figure className="lg-plot">
      <figcaption className="lg-cap">
        <b>Autocorrelation</b> <i>r</i>, by lag in packets; rock: outside of ±{significant(bound, 2)}
      </figcaption>
      <div ref={host}>
        <svg width={width} height={HEIGHT} viewBox={`0 0 ${width} ${HEIGHT}`} role="img" aria-label={correlationText(values, bound)}>
          {hatchedBands([
            { x: LEFT, y: TOP, width: right - LEFT, height: yOf(bound) - TOP },
            { x: LEFT, y: yOf(-bound), width: right - LEFT, height: TOP + PLOT - yOf(-bound) },
          ])}
          <path d={`M${LEFT} ${yOf(bound)}H${right}M${LEFT} ${yOf(-bound)}H${right}`} className="lim" />
          <path d={`M${LEFT} ${yOf(0)}H${right}`} className="hair2" />
          {[
            { value: top, text: fixed(top, decimals) },
            { value: 0, text: "0" },
          ].map(({ value, text }) => (
            <text key={text} x={LEFT - 8} y={yOf(value) + 4} textAnchor="end" className="ax">
              {text}
            </text>
          ))}
          <path d={values.map((value, i) => `M${xOf(i + 1).toFixed(1)} ${yOf(0)}V${yOf(value).toFixed(1)}`).join("")} className="lg-stem" />
          {values.map((value, i) => (
            // biome-ignore lint/suspicious/noArrayIndexKey: lags are known by their place
            <circle key={i} cx={xOf(i + 1)} cy={yOf(value)} r={Math.min(3.5, slot / 3)} className="lg-dot" />
          ))}
          <NeatAxis from={0.5} until={values.length + 0.5} left={LEFT} right={right} y={TOP + PLOT + 3} whole />
        </svg>
      </div>
    </figure>
  );
}

function correlationText(values: readonly number[], bound: number): string {
  const outside = values.flatMap((value, i) => (Math.abs(value) > bound ? [`${i + 1} (${fixed(value, 3)})`] : []));
  const all = `Autocorrelation of the losses at lags 1 to ${values.length}; independent losses stay within plus or minus ${fixed(bound, 4)}.`;
  return outside.length === 0
    ? `${all} None lies outside.`
    : `${all} Outside: lag ${outside.slice(0, 10).join(", ")}${outside.length > 10 ? " and more" : ""}.`;
}
