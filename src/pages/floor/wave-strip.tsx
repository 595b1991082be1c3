import { useEffect, useRef } from "react";
import type { Slot } from "#shared/network/round.ts";
import { GLYPH_WORDS, type Glyph, GlyphMark, type NodeState, StateMark } from "#src/components/plan/marks.tsx";
import { useWidth } from "#src/components/plots/measure.ts";
import { IconButton } from "#src/components/ui/button.tsx";
import { useMedia } from "#src/lib/use-media.ts";

interface WaveStripProps {
  slots: readonly Slot[];
  slot: Slot;
  /** "measurement from 1 Cart" */
  title: string;
  /** The plan shows hop contours. */
  contoured: boolean;
  /** Nodes that have the message after each step; null before the floods are drawn. */
  reached: readonly number[] | null;
  nodes: number;
  step: number;
  playing: boolean;
  /** The slot is not in this round: nothing is flooded. */
  idle: boolean;
  onStep: (step: number) => void;
  onPlay: (playing: boolean) => void;
  onSlot: (id: string) => void;
  busy: boolean;
  /** The worker broke. */
  broken: boolean;
}

const KEY: { state: NodeState; word: string }[] = [
  { state: "starts", word: "starts" },
  { state: "has", word: "has it" },
  { state: "receives", word: "receives now" },
  { state: "sends", word: "sends now" },
  { state: "waiting", word: "not yet" },
  { state: "lost", word: "lost" },
];

const ROLES: readonly Glyph[] = ["sensor", "controller", "actuator", "beacon"];

const STEP_MS = 650;

/** Which slot, step by step: the slot's own stair enlarged is the slider. */
export function WaveStrip(props: WaveStripProps) {
  const { slots, slot, title, contoured, reached, nodes, step, playing, idle, onStep, onPlay, onSlot, busy, broken } = props;
  const reduced = useMedia("(prefers-reduced-motion: reduce)");
  const { steps } = slot;

  useEffect(() => {
    if (!playing) return;
    if (reduced) {
      onPlay(false);
      onStep(step >= steps ? 1 : step + 1);
      return;
    }
    if (step >= steps) {
      onPlay(false);
      return;
    }
    const timer = setTimeout(() => onStep(step + 1), STEP_MS);
    return () => clearTimeout(timer);
  }, [playing, reduced, step, steps, onStep, onPlay]);

  return (
    <div className="fl-wave" aria-busy={busy || undefined}>
      <div className="under">
        <label className="fl-slot">
          <span className="vh">Slot</span>
          <span className="pick">
            <select value={slot.id} onChange={(event) => onSlot(event.target.value)}>
              {slots.map((one, i) => (
                <option key={one.id} value={one.id}>
                  Slot {i + 1}, {one.label.charAt(0).toLowerCase()}
                  {one.label.slice(1)}
                  {one.copy > 1 ? ", again" : ""}
                </option>
              ))}
            </select>
          </span>
        </label>
        <span className="second fl-from">{title}</span>
        <span className="fl-play">
          <IconButton
            small
            icon="step-back"
            iconSize={14}
            label="Step back"
            impossible={step <= 1 ? "This is the first step." : null}
            onClick={() => onStep(step - 1)}
          />
          <IconButton
            small
            icon={playing ? "pause" : "play"}
            iconSize={14}
            label={playing ? "Pause the flood" : reduced ? "Go on by one step" : "Play the flood"}
            onClick={() => {
              if (!playing && step >= steps && !reduced) onStep(1);
              onPlay(!playing);
            }}
          />
          <IconButton
            small
            icon="step-on"
            iconSize={14}
            label="Step on"
            impossible={step >= steps ? "This is the last step." : null}
            onClick={() => onStep(step + 1)}
          />
        </span>
        <span className="lg">
          {KEY.map(({ state, word }) => (
            <span key={state}>
              <StateMark state={state} />
              {word}
            </span>
          ))}
          {ROLES.map((glyph) => (
            <span key={glyph}>
              <GlyphMark glyph={glyph} />
              {GLYPH_WORDS[glyph]}
            </span>
          ))}
        </span>
      </div>
      {broken ? (
        <p className="second fl-idle" role="alert">
          The floods could not be drawn: the engine stopped. Nothing that you entered is lost; the next edit draws them again.
        </p>
      ) : reached === null ? (
        <p className="second fl-idle" role="status">
          The floods of this run are drawn …
        </p>
      ) : idle ? (
        <p className="second fl-idle">This slot does not occur in this round. Choose another round.</p>
      ) : (
        <StepStair
          steps={steps}
          reached={reached}
          nodes={nodes}
          step={step}
          onStep={onStep}
          note={contoured ? "Contours: reached by that step in half of the floods" : ""}
        />
      )}
    </div>
  );
}

interface StairProps {
  steps: number;
  reached: readonly number[];
  nodes: number;
  step: number;
  onStep: (step: number) => void;
  note: string;
}

const LEFT = 22;
const TOP = 26;
const BASE = 82;

/** The slot's stair as a slider: its height after each step is the share of the nodes that have the message. */
function StepStair({ steps, reached, nodes, step, onStep, note }: StairProps) {
  const host = useRef<HTMLDivElement>(null);
  const width = Math.max(260, useWidth(host) || 860);
  const right = width - LEFT;
  const piece = (right - LEFT) / steps;
  const x = (s: number) => LEFT + (s - 1) * piece;
  const top = (s: number) => BASE - ((BASE - TOP) * (reached[s - 1] ?? 0)) / Math.max(1, nodes);
  const all = Array.from({ length: steps }, (_, i) => i + 1);
  const outline = `M${LEFT} ${BASE}${all.map((s) => `V${top(s).toFixed(1)}H${(x(s) + piece).toFixed(1)}`).join("")}V${BASE}Z`;
  const wide = piece >= 62;
  const each = piece >= 30 ? 1 : Math.ceil(30 / piece);
  const words = `step ${step} of ${steps}: ${reached[step - 1] ?? 0} of ${nodes} nodes have the message`;
  const at = (clientX: number) => {
    const box = host.current?.getBoundingClientRect();
    const s = Math.floor((clientX - (box?.left ?? 0) - LEFT) / piece) + 1;
    onStep(Math.min(steps, Math.max(1, s)));
  };
  const middle = x(step) + piece / 2;
  return (
    <div
      ref={host}
      className="fl-stair"
      role="slider"
      tabIndex={0}
      aria-label="Step of the flood"
      aria-valuemin={1}
      aria-valuemax={steps}
      aria-valuenow={step}
      aria-valuetext={words}
      onKeyDown={(event) => {
        const next = { ArrowLeft: step - 1, ArrowDown: step - 1, ArrowRight: step + 1, ArrowUp: step + 1, Home: 1, End: steps }[event.key];
        if (next === undefined) return;
        event.preventDefault();
        onStep(Math.min(steps, Math.max(1, next)));
      }}
      onPointerDown={(event) => {
        if (event.pointerType !== "touch") event.currentTarget.setPointerCapture?.(event.pointerId);
        at(event.clientX);
      }}
      onPointerMove={(event) => event.buttons > 0 && at(event.clientX)}
    >
      <svg width={width} height={136} viewBox={`0 0 ${width} 136`} aria-hidden="true">
        <line x1={LEFT} y1={TOP} x2={right} y2={TOP} className="lead" />
        <text x={LEFT} y={TOP - 6} className="ax">
          all {nodes} nodes
        </text>
        {width > 560 && (
          <text x={right} y={TOP - 6} className="ax" textAnchor="end">
            {note}
          </text>
        )}
        {all.map((s) => (
          <rect
            key={s}
            x={x(s)}
            y={top(s)}
            width={piece}
            height={BASE - top(s)}
            className={s < step ? "fl-st-had" : s === step ? "fl-st-now" : "fl-st-wait"}
          />
        ))}
        <path d={outline} className="fl-swello" />
        <path
          d={all
            .slice(1)
            .map((s) => `M${x(s).toFixed(1)} ${BASE}v4`)
            .join("")}
          className="hair2"
        />
        <rect x={LEFT} y={BASE + 7} width={right - LEFT} height="5" className="neat" />
        {all
          .filter((s) => s % 2 === 1)
          .map((s) => (
            <rect key={s} x={x(s)} y={BASE + 7} width={piece} height="5" className="neatf" />
          ))}
        {all.map((s) => {
          if (s === step || (s !== steps && (s - 1) % each !== 0) || Math.abs(s - step) * piece < 34) return null;
          return (
            <text key={s} x={x(s) + piece / 2} y={BASE + 27} className="ax" textAnchor="middle">
              {wide ? `step ${s}` : s}
            </text>
          );
        })}
        {wide &&
          all.map((s) => (
            <text key={s} x={x(s) + piece / 2} y={BASE + 45} className={s === step ? "txb" : "ax"} textAnchor="middle">
              {reached[s - 1] ?? 0} of {nodes}
            </text>
          ))}
        <path d={`M${middle} ${BASE + 6}l-6 9h12z`} className="cursorf" />
        <rect x={Math.min(Math.max(middle - 30, 2), width - 62)} y={BASE + 15} width="60" height="17" className="cursorf" />
        <text x={Math.min(Math.max(middle, 32), width - 32)} y={BASE + 27.5} className="cursort" textAnchor="middle">
          step {step}
        </text>
        {!wide && (
          <text x={Math.min(Math.max(middle, 40), width - 40)} y={BASE + 48} className="txb" textAnchor="middle">
            {reached[step - 1] ?? 0} of {nodes}
          </text>
        )}
      </svg>
    </div>
  );
}
