import { Fragment, useEffect, useId, useMemo, useState } from "react";
import type { LogDetail } from "#shared/api/logs.ts";
import { slowerThanRound } from "#shared/reception/claim.ts";
import { packetsPerRound } from "#shared/reception/loss-process.ts";
import { type LinkTrace, linkName } from "#shared/reception/types.ts";
import { counted, countText, durationText } from "#shared/reception/words.ts";
import type { LossProcess } from "#shared/scenario/schema.ts";
import { Button } from "#src/components/ui/button.tsx";
import { PickField } from "#src/components/ui/choice.tsx";
import { Field } from "#src/components/ui/field.tsx";
import { msText } from "#src/lib/format.ts";
import { lossText } from "../model/log-words.ts";
import { fittedProcess, KINDS, MOST_RUNS, type Replayed, replayFrom, replayProcess, roundsToEmbed, type UseKind } from "../model/loss-process.ts";
import { indexRuns, longestBurst } from "../model/run-index.ts";
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

const MESSAGES = ["Measurement", "Command"] as const;

/** null: no packet of the link. */
function readStart(text: string, packets: number): number | null {
  const start = Number(text.trim());
  return text.trim() !== "" && Number.isInteger(start) && start >= 0 && start < packets ? start : null;
}

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
  /** Of measurement and command. */
  const [startTexts, setStartTexts] = useState<readonly [string, string]>(["0", "0"]);
  const [then, setThen] = useState<"repeat" | "delivered" | "error">("repeat");

  const chosen = useMemo(() => [measurement, command].map((at) => links[at] as LinkTrace), [links, measurement, command]);
  const every = useMemo(() => chosen.map((one) => packetsPerRound(one, periodS)), [chosen, periodS]);
  const figures = useMemo(() => chosen.map((one, i) => figuresOf(one, every[i])), [chosen, every]);
  const { rounds, reserve } = roundsToEmbed(durationS, periodS);
  const starts = startTexts.map((text, i) => readStart(text, chosen[i]?.packets ?? 0));
  const wrong = starts.indexOf(null);
  const replayed = useMemo(
    () => chosen.map((one, i) => replayFrom(one.runs, readStart(startTexts[i] ?? "", one.packets) ?? 0, rounds + reserve, every[i])),
    [chosen, every, startTexts, rounds, reserve],
  );
  const tooFew = replayed.find(({ packets }) => packets < rounds);

  const noChain = figures.some(({ chain }) => chain === null)
    ? "Nothing to fit: it needs a delivered packet, a lost one, and a delivered one after it, on both links."
    : null;
  const outcome = useMemo((): LogChoiceOutcome => {
    const [ofMeasurement, ofCommand] = figures;
    const [y, u] = replayed;
    if (!ofMeasurement || !ofCommand || !y || !u) return { process: null, problem: "Choose the links first." };
    if (kind !== "replay") {
      const process = fittedProcess(kind, ofMeasurement, ofCommand);
      return { process, problem: process ? null : noChain };
    }
    if (wrong >= 0)
      return { process: null, problem: `A replay starts at a packet of the link: 0 to ${countText((chosen[wrong]?.packets ?? 1) - 1)}.` };
    const [first, second] = chosen.map((one) => linkName(one).slice(0, 120));
    return {
      process: replayProcess({
        log: { id: log.id, name: log.name },
        measurement: { link: first ?? "", runs: y.runs },
        command: { link: second ?? "", runs: u.runs },
        then: tooFew ? then : "error",
      }),
      problem: null,
    };
  }, [figures, replayed, kind, noChain, wrong, chosen, log.id, log.name, tooFew, then]);
  useEffect(() => onOutcome(outcome), [outcome, onOutcome]);

  const group = useId();
  const options = links.map((one, at) => ({
    value: String(at),
    word: `${linkName(one)}: ${one.packets > 0 ? lossText(one.lost / one.packets) : "no packet"} lost`,
  }));
  const burst = useMemo(() => longestBurst(indexRuns(chosen[0]?.runs ?? [])), [chosen]);
  const startBeforeBurst = () => {
    const need = (rounds + reserve) * Math.max(...every);
    const from = burst ? Math.max(0, Math.min(burst.from - BEFORE_BURST * (every[0] ?? 1), (chosen[0]?.packets ?? 0) - need)) : 0;
    setStartTexts([String(from), String(Math.max(0, Math.min(from, (chosen[1]?.packets ?? 1) - 1)))]);
  };
  const together = measurement === command && startTexts[0] === startTexts[1];
  return (
    <>
      <PickField
        label="Stands for the measurement"
        options={options}
        value={String(measurement)}
        onChoose={(value) => setMeasurement(Number(value))}
      />
      <PickField label="Stands for the command" options={options} value={String(command)} onChoose={(value) => setCommand(Number(value))} />
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
          {MESSAGES.map((message, i) => {
            const last = Math.max(0, (chosen[i]?.packets ?? 1) - 1);
            const text = startTexts[i] ?? "";
            return (
              <Field
                key={message}
                label={`${message} starts at packet`}
                value={text}
                onText={(next) => setStartTexts(([first, second]) => (i === 0 ? [next, second] : [first, next]))}
                inputMode="numeric"
                range={`0 to ${countText(last)}`}
                problem={
                  starts[i] === null
                    ? { title: `“${text}” is no packet of this link.`, text: `Permitted: whole numbers from 0 to ${countText(last)}.` }
                    : null
                }
              />
            );
          })}
          <div className="flex flex-wrap gap-1.5 py-1">
            <Button small onClick={() => setStartTexts(["0", "0"])}>
              First packet
            </Button>
            <Button small impossible={burst ? null : "No packet of the measurement’s link was lost."} onClick={startBeforeBurst}>
              Before the longest burst
            </Button>
          </div>
          <Embedded replayed={replayed} />
          {together && (
            <p className="note second">
              One link from one packet on stands for both: both messages are lost in the same rounds. Start the command elsewhere to keep them apart.
            </p>
          )}
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
          <dl>
            {processLines(outcome.process).map(({ name, text }) => (
              <Fragment key={name}>
                <dt>{name}</dt>
                <dd>{text}</dd>
              </Fragment>
            ))}
          </dl>
          <Pace links={chosen} every={every} periodS={periodS} />
        </div>
      )}
    </>
  );
}

/** The stretches that go into the scenario, round by round. */
function Embedded({ replayed }: { replayed: readonly Replayed[] }) {
  const [host, width] = usePictureWidth();
  const until = Math.max(1, ...replayed.map(({ packets }) => packets));
  return (
    <div ref={host}>
      <svg
        width={width}
        height="62"
        viewBox={`0 0 ${width} 62`}
        role="img"
        aria-label="Loss tapes of what goes into the scenario, measurement above command"
        className="block max-w-full"
      >
        {replayed.map(({ runs }, i) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: measurement and command
          <g key={i}>
            <text x="4" y={14 + i * 30} className="ax it">
              {i === 0 ? "y" : "u"}
            </text>
            <TapeStrip index={indexRuns(runs)} fromPacket={0} untilPacket={until} left={18} right={width - 2} y={4 + i * 30} height={12} />
          </g>
        ))}
      </svg>
    </div>
  );
}

interface PaceProps {
  links: readonly LinkTrace[];
  every: readonly number[];
  periodS: number;
}

/** How the log's pace and the round's go together. */
function Pace({ links, every, periodS }: PaceProps) {
  const notes = links.flatMap((link, i) => {
    const { slower, sentence } = slowerThanRound(link, periodS);
    if (slower || link.intervalS === null) return sentence ? [`${sentence} Here one of its packets stands for one round.`] : [];
    if ((every[i] ?? 1) > 1)
      return [
        `The log has one packet each ${durationText(link.intervalS)}, the round lasts ${durationText(periodS)}: of every ${every[i]} packets one stands for a round.`,
      ];
    if (periodS > 1.02 * link.intervalS)
      return [
        `The log has one packet each ${durationText(link.intervalS)}, the round lasts ${durationText(periodS)}: with one packet a round, bursts last a little longer than they did.`,
      ];
    return [];
  });
  return [...new Set(notes)].map((note) => (
    <p key={note} className="note second mt-2">
      {note}
    </p>
  ));
}
