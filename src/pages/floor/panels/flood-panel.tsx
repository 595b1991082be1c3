import { useEffect, useMemo, useState } from "react";
import { deeperThanBound } from "#shared/network/depth.ts";
import type { FloodRecord } from "#shared/network/floods.ts";
import type { RoundTiming, Slot } from "#shared/network/round.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import { Button, ButtonPair, IconButton } from "#src/components/ui/button.tsx";
import { Mark } from "#src/components/ui/mark.tsx";
import { Section } from "#src/components/ui/section.tsx";
import { useToast } from "#src/components/ui/toast.tsx";
import { msText, significant, withUnit } from "#src/lib/format.ts";
import { type FloodShown, floodSentences, nextMissed, nextOccurring, shortName } from "../model/flood-view.ts";

interface FloodPanelProps {
  floor: Floor;
  record: FloodRecord;
  slot: Slot;
  slotIndex: number;
  flood: FloodShown;
  round: number;
  timing: RoundTiming;
  seed: number;
  onRound: (round: number) => void;
}

/** Which flood of which round, and what became of it. */
export function FloodPanel({ floor, record, slot, slotIndex, flood, round, timing, seed, onRound }: FloodPanelProps) {
  const toast = useToast();
  const back = nextOccurring(slot, record.rounds, round, -1);
  const on = nextOccurring(slot, record.rounds, round, 1);
  const seek = (direction: 1 | -1) => {
    const found = nextMissed(record, slot, slotIndex, round, direction);
    if (found === null)
      toast({
        text:
          direction === 1
            ? "From here to the end of the run nobody who needs this message missed it."
            : "Before this round nobody who needs this message missed it.",
      });
    else onRound(found);
  };
  const deep = useMemo(() => deeperThanBound(record, timing), [record, timing]);
  const sentences = floodSentences(flood, floor);
  const atS = round * timing.periodS + slot.floodStartS;
  return (
    <Section title="This flood" sum={`round ${round} of ${record.rounds}, seed ${seed}`} defaultOpen>
      <div className="fl-round">
        <ButtonPair label="Round">
          <IconButton
            small
            icon="left"
            iconSize={14}
            label="The round before"
            impossible={back === null ? "There is none." : null}
            onClick={() => back !== null && onRound(back)}
          />
          <IconButton
            small
            icon="right"
            iconSize={14}
            label="The next round"
            impossible={on === null ? "There is none." : null}
            onClick={() => on !== null && onRound(on)}
          />
        </ButtonPair>
        <RoundField round={round} rounds={record.rounds} onRound={onRound} />
        <span className="second small nw">at {atS < 1 ? msText(atS, 4) : withUnit(significant(atS, 5), "s")}</span>
      </div>
      <div className="fl-round">
        <Button small onClick={() => seek(-1)}>
          Missed before
        </Button>
        <Button small onClick={() => seek(1)}>
          Next missed
        </Button>
        <span className="second small">a round in which somebody who needs it missed it</span>
      </div>
      <div role="status" className="fl-said">
        {sentences.map(({ mark, text }) => (
          <p key={text} className="verdict">
            <Mark state={mark} size={16} />
            <span>{text}</span>
          </p>
        ))}
      </div>
      {deep.length > 0 && (
        <p className="verdict">
          <Mark state="near" size={16} />
          <span>
            Deeper than the hop bound of {timing.hops}: {deep.map(({ node, step }) => `${shortName(floor, node)} in step ${step}`).join(", ")}. Most
            floods get there later than the slot was counted for; a larger hop bound gives them back their tries.
          </span>
        </p>
      )}
    </Section>
  );
}

function RoundField({ round, rounds, onRound }: { round: number; rounds: number; onRound: (round: number) => void }) {
  const [text, setText] = useState(String(round));
  useEffect(() => setText(String(round)), [round]);
  const value = Number(text);
  const bad = !/^\d+$/.test(text.trim()) || value >= rounds;
  const commit = () => {
    if (bad) setText(String(round));
    else onRound(value);
  };
  return (
    <input
      className={`fl-cell ${bad ? "bad" : ""}`}
      aria-label={`Round, 0 to ${rounds - 1}`}
      aria-invalid={bad || undefined}
      title={bad ? `Enter a whole number, 0 to ${rounds - 1}.` : undefined}
      inputMode="numeric"
      value={text}
      onChange={(event) => setText(event.target.value)}
      onBlur={commit}
      onKeyDown={(event) => {
        if (event.key === "Enter") commit();
        else if (event.key === "Escape") setText(String(round));
      }}
    />
  );
}
