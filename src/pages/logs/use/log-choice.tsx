import { useEffect, useId, useMemo, useState } from "react";
import type { LogDetail } from "#shared/api/logs.ts";
import { type LinkTrace, linkName } from "#shared/reception/types.ts";
import { counted, countText, durationText } from "#shared/reception/words.ts";
import type { LossProcess } from "#shared/scenario/schema.ts";
import { Button } from "#src/components/ui/button.tsx";
import { PickField } from "#src/components/ui/choice.tsx";
import { Field } from "#src/components/ui/field.tsx";
import { msText } from "#src/lib/format.ts";
import { lossText } from "../model/log-words.ts";
import { fittedProcess, KINDS, MOST_RUNS, replayFrom, replayProcess, roundsToEmbed, type UseKind } from "../model/loss-process.ts";
import { indexRuns, longestBurst, type RunIndex } from "../model/run-index.ts";
import { figuresOf } from "../model/study.ts";
import { TapeStrip } from "../pictures/tape-strip.tsx";
import { usePictureWidth } from "../pictures/use-picture-width.ts";
import { processLines } from "./process-words.ts";

/** Rounds shown before the longest burst, so that a run begins calmly. */
const BEFORE_BURST = 50;

export interface LogChoiceOutcome {
  process: LossProcess | null;
  /** Why there is none. */
  problem: string | null;
}

interface LogChoiceProps {
  log: LogDetail;
  periodS: number;
  durationS: number;
  /** A link that is chosen already. */
  link?: number;
  onOutcome: (outcome: LogChoiceOutcome) => void;
}

const KIND_WORDS: Record<UseKind, { title: string; text: string }> = {
  replay: { title: "As it was received", text: "Packet after packet, one packet a round (replay)." },
  "gilbert-elliott": {
    title: "In bursts like these",
    text: "Drawn anew for every seed, with the fitted lengths of bursts and gaps (Gilbert-Elliott).",
  },
  bernoulli: { title: "Each message by itself", text: "Independent losses at the measured share (Bernoulli)." },
  "bernoulli-upper": { title: "Each message by itself, on the safe side", text: "Independent losses at the upper end of the 95 % interval." },
};

/** The link in the other direction, else the second, else the same. */
function otherWay(links: readonly LinkTrace[], from: number): number {
  const { source, receiver } = links[from] ?? { source: "", receiver: "" };
  const back = links.findIndex((link) => link.source === receiver && link.receiver === source && source !== "");
  if (back >= 0) return back;
  return links.length > 1 ? (from + 1) % links.length : from;
}

/** Which links stand for which message, and how their losses come into the scenario. */
export function LogChoice({ log, periodS, durationS, link = 0, onOutcome }: LogChoiceProps) {
  const { linkTraces: links } = log;
  const [measurement, setMeasurement] = useState(link);
  const [command, setCommand] = useState(() => otherWay(links, link));
  const [kind, setKind] = useState<UseKind>("replay");
  const [startText, setStartText] = useState("0");
  const [then, setThen] = useState<"repeat" | "delivered" | "error">("repeat");

  const indexes = useMemo(
    () => [measurement, command].map((at) => indexRuns(links[at]?.runs ?? [])) as [RunIndex, RunIndex],
    [links, measurement, command],
  );
  const figures = useMemo(() => [measurement, command].map((at) => figuresOf(links[at] as LinkTrace)), [links, measurement, command]);
  const { rounds, reserve } = roundsToEmbed(durationS, periodS);
  const shortest = Math.min(indexes[0].packets, indexes[1].packets);
  const start = Number(startText.trim());
  const startWrong = startText.trim() === "" || !Number.isInteger(start) || start < 0 || start > shortest - 1;
  const replayed = useMemo(
    () => indexes.map((index) => replayFrom(index, startWrong ? 0 : start, rounds + reserve)),
    [indexes, startWrong, start, rounds, reserve],
  );
  const tooFew = replayed.find(({ packets }) => packets < rounds);

  const noChain = figures.some(({ chain }) => chain === null)
    ? "Nothing to fit: it needs a delivered packet, a lost one, and a delivered one after it, on both links."
    : null;
  const outcome = useMemo((): LogChoiceOutcome => {
    const [first, second] = figures;
    const [y, u] = replayed;
    if (!first || !second || !y || !u) return { process: null, problem: "Choose the links first." };
    if (kind !== "replay") {
      const process = fittedProcess(kind, first, second);
      return { process, problem: process ? null : noChain };
    }
    if (startWrong) return { process: null, problem: `A replay starts at a packet from 0 to ${countText(shortest - 1)}.` };
    const named = (at: number) => linkName(links[at] as LinkTrace).slice(0, 120);
    return {
      process: replayProcess({
        log: { id: log.id, name: log.name },
        measurement: { link: named(measurement), runs: y.runs },
        command: { link: named(command), runs: u.runs },
        then: tooFew ? then : "error",
      }),
      problem: null,
    };
  }, [figures, replayed, kind, noChain, startWrong, shortest, links, measurement, command, log.id, log.name, tooFew, then]);
  useEffect(() => onOutcome(outcome), [outcome, onOutcome]);

  const group = useId();
  const options = links.map((one, at) => ({
    value: String(at),
    word: `${linkName(one)}: ${one.packets > 0 ? lossText(one.lost / one.packets) : "no packet"} lost`,
  }));
  const burst = longestBurst(indexes[0]);
  const beforeBurst = burst ? Math.max(0, Math.min(burst.from - BEFORE_BURST, shortest - rounds - reserve)) : 0;
  return (
    <>
      <PickField
        label="Stands for the measurement"
        options={options}
        value={String(measurement)}
        onChoose={(value) => setMeasurement(Number(value))}
      />
      <PickField label="Stands for the command" options={options} value={String(command)} onChoose={(value) => setCommand(Number(value))} />
      {measurement === command && links.length > 1 && (
        <p className="note second">One link for both: in a replay both messages are lost in the same rounds.</p>
      )}
      <h3 id={group}>Its losses come into the scenario</h3>
      <div className="lg-kinds" role="radiogroup" aria-labelledby={group}>
        {KINDS.map((value) => (
          <label key={value}>
            <input
              type="radio"
              name={group}
              checked={kind === value}
              disabled={value === "gilbert-elliott" && noChain !== null}
              onChange={() => setKind(value)}
            />
            <span>
              <b className="strong">{KIND_WORDS[value].title}</b>
              <span className="pl">{value === "gilbert-elliott" && noChain ? noChain : KIND_WORDS[value].text}</span>
            </span>
          </label>
        ))}
      </div>
      {kind === "replay" && (
        <div className="mt-2">
          <Field
            label="Starts at packet"
            value={startText}
            onText={setStartText}
            inputMode="numeric"
            range={`0 to ${countText(Math.max(0, shortest - 1))}`}
            problem={
              startWrong
                ? { title: `“${startText}” is not a packet of both links.`, text: `Permitted: whole numbers from 0 to ${countText(shortest - 1)}.` }
                : null
            }
          />
          <div className="flex flex-wrap gap-1.5 py-1">
            <Button small onClick={() => setStartText("0")}>
              First packet
            </Button>
            <Button
              small
              impossible={burst ? null : "No packet of the measurement’s link was lost."}
              onClick={() => setStartText(String(beforeBurst))}
            >
              Before the longest burst
            </Button>
          </div>
          <Embedded indexes={indexes} from={startWrong ? 0 : start} packets={replayed.map(({ packets }) => packets)} />
          <p className="note second">
            The run needs {counted(rounds, "round")} of {msText(periodS)}; {countText(Math.max(...replayed.map(({ packets }) => packets)))} packets go
            into the scenario, a reserve of {countText(Math.max(0, Math.max(...replayed.map(({ packets }) => packets)) - rounds))}.
            {replayed.some(({ short }) => short === "runs") && ` A scenario holds at most ${countText(MOST_RUNS)} run lengths.`}
          </p>
          {tooFew && (
            <PickField
              label={`After ${countText(tooFew.packets)} packets the log is at its end; then`}
              options={[
                { value: "repeat", word: "it begins again" },
                { value: "delivered", word: "all is delivered" },
                { value: "error", word: "the run is refused" },
              ]}
              value={then}
              onChoose={setThen}
            />
          )}
        </div>
      )}
      {outcome.process && (
        <div className="lg-sets">
          <p className="strong">What this sets in the losses</p>
          <dl className="lg-record">
            {processLines(outcome.process).map(({ name, text }) => (
              <div key={name}>
                <dt className="second">{name}</dt>
                <dd>{text}</dd>
              </div>
            ))}
          </dl>
          <Pace links={[links[measurement], links[command]]} periodS={periodS} />
        </div>
      )}
    </>
  );
}

/** The stretch that goes into the scenario. */
function Embedded({ indexes, from, packets }: { indexes: [RunIndex, RunIndex]; from: number; packets: number[] }) {
  const [host, width] = usePictureWidth();
  const until = from + Math.max(1, ...packets);
  return (
    <div ref={host}>
      <svg
        width={width}
        height="62"
        viewBox={`0 0 ${width} 62`}
        role="img"
        aria-label="Loss tapes of the stretch that goes into the scenario"
        className="block max-w-full"
      >
        {indexes.map((index, i) => (
          <g key={["y", "u"][i]}>
            <text x="4" y={14 + i * 30} className="ax it">
              {["y", "u"][i]}
            </text>
            <TapeStrip index={index} fromPacket={from} untilPacket={until} left={18} right={width - 2} y={4 + i * 30} height={12} />
          </g>
        ))}
      </svg>
    </div>
  );
}

/** One packet stands for one round, whatever time lay between packets. */
function Pace({ links, periodS }: { links: (LinkTrace | undefined)[]; periodS: number }) {
  const other = links.find((link) => link?.intervalS && Math.abs(link.intervalS - periodS) > 0.02 * periodS);
  if (!other?.intervalS) return null;
  return (
    <p className="note second mt-2">
      The log has one packet every {durationText(other.intervalS)}, your round takes {msText(periodS)}: one packet stands for one round.{" "}
      {other.intervalS > periodS
        ? `Bursts shorter than ${durationText(other.intervalS)} cannot be seen in this log.`
        : "In rounds, bursts are then longer than they were in time."}
    </p>
  );
}
