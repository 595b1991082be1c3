import { useState } from "react";
import { slowerThanRound } from "#shared/reception/claim.ts";
import type { LinkTrace } from "#shared/reception/types.ts";
import { durationText } from "#shared/reception/words.ts";
import { useScenarioList } from "#src/api/scenarios/list-scenarios.ts";
import { useTeam } from "#src/app/session.tsx";
import { PickField } from "#src/components/ui/choice.tsx";
import { Mark } from "#src/components/ui/mark.tsx";
import { failureText } from "#src/components/ui/query-error.tsx";
import { msText } from "#src/lib/format.ts";
import { NEWEST_SCENARIOS } from "../use/newest-scenarios.ts";

/** Is the log quick enough for the round of a scenario? */
export function RoundPart({ link }: { link: LinkTrace }) {
  const team = useTeam();
  const list = useScenarioList(team.id, NEWEST_SCENARIOS);
  const [chosen, setChosen] = useState<string | null>(null);
  const items = list.data?.items ?? [];
  const item = items.find(({ id }) => id === chosen) ?? items[0];
  if (list.isError) return <p className="second">{`The scenarios cannot be compared with: ${failureText(list.error)}`}</p>;
  if (!item) return null;
  const { periodS } = item.round;
  const { slower, sentence } = slowerThanRound(link, periodS);
  return (
    <section aria-labelledby="lg-round">
      <div className="hrow">
        <h2 id="lg-round">Is it quick enough for your round?</h2>
      </div>
      <div className="lg-round">
        <PickField
          label="Scenario"
          options={items.map((one) => ({ value: one.id, word: `${one.name}, ${msText(one.round.periodS)} round` }))}
          value={item.id}
          onChoose={setChosen}
        />
        <p aria-live="polite">
          <Mark state={link.intervalS === null ? "not-decided" : slower ? "near" : "holds"} quiet />{" "}
          {sentence ??
            `One packet every ${durationText(link.intervalS ?? periodS)}, a round every ${msText(periodS)}: this log shows every burst that the round can meet.`}
        </p>
      </div>
    </section>
  );
}
