import type { RoundTiming } from "#shared/network/round.ts";
import { msText } from "#src/lib/format.ts";
import { TRAVELS } from "../model/choices.ts";
import { ChoiceAt, NumberAt } from "./fields.tsx";

const TIMING = ["loops", 0, "timing"] as const;

export function TimingPart({ timing }: { timing: RoundTiming | null }) {
  const span = timing && `${msText(timing.earliestActS - timing.sampleAtS, 5)} to ${msText(timing.latestActS - timing.sampleAtS, 5)}`;
  return (
    <>
      <NumberAt path={[...TIMING, "sampleAtS"]} />
      <ChoiceAt path={[...TIMING, "commandTravels"]} options={TRAVELS} />
      <NumberAt
        path={[...TIMING, "actAfterSampleS"]}
        empty={timing ? String(Number((timing.latencyS * 1000).toPrecision(5))) : "latest"}
        hint={span ? `From sampling to acting: ${span} is possible. Empty: up to the round boundary.` : "Empty: up to the round boundary."}
      />
    </>
  );
}
