import type { RoundTiming } from "#shared/network/round.ts";
import { msText } from "#src/lib/format.ts";
import { TRAVELS } from "../model/choices.ts";
import { ChoiceAt, NumberAt } from "./fields.tsx";
import { Rhythm } from "./rhythm.tsx";

const TIMING = ["loops", 0, "timing"] as const;

export function TimingPart({ timing }: { timing: RoundTiming | null }) {
  const own = timing?.loops[0];
  const span = own && `${msText(own.earliestActS - own.sampleAtS, 5)} to ${msText(own.latestActS - own.sampleAtS, 5)}`;
  return (
    <>
      <Rhythm path={TIMING} />
      <NumberAt path={[...TIMING, "sampleAtS"]} />
      <ChoiceAt path={[...TIMING, "commandTravels"]} options={TRAVELS} />
      <NumberAt
        path={[...TIMING, "actAfterSampleS"]}
        empty={own ? String(Number((own.latencyS * 1000).toPrecision(5))) : "latest"}
        hint={span ? `From sampling to acting: ${span} is possible. Empty: up to the round boundary.` : "Empty: up to the round boundary."}
      />
    </>
  );
}
