import { useMemo } from "react";
import type { LinkTrace } from "#shared/reception/types.ts";
import { verdictWords } from "#shared/reception/verdict-words.ts";
import { VerdictLine } from "#src/components/ui/mark.tsx";
import { Loading } from "#src/components/ui/states.tsx";
import type { LinkStudy } from "#src/workers/log-contract.ts";
import { indexRuns } from "../model/run-index.ts";
import { VERDICT_MARKS } from "../model/verdict.ts";
import { CorrelationPlot } from "../pictures/correlation-plot.tsx";
import { LossPicture } from "../pictures/loss-picture.tsx";
import { StreakPlot } from "../pictures/streak-plot.tsx";
import { LinkFiguresList } from "./link-figures.tsx";
import { MeasurePart } from "./measure-part.tsx";
import { RoundPart } from "./round-part.tsx";
import { TestTable } from "./test-table.tsx";
import { useStudy } from "./use-study.ts";

/** Everything that is known of one link: verdict, figures, pictures, tests. */
export function LinkSheet({ link, name }: { link: LinkTrace; name: string }) {
  const index = useMemo(() => indexRuns(link.runs), [link]);
  const study = useStudy(link);
  const bursts = study?.independence.verdict === "bursts";
  return (
    <section className="sheet doc pad lg-sheet" aria-label={`Link ${name}`}>
      {study ? <Verdict link={link} name={name} study={study} /> : <Loading what={`The losses of ${name} are studied`} />}
      {link.packets > 0 && <LossPicture link={link} index={index} />}
      {study && study.fit.streaks.length > 0 && (
        <div className="lg-two">
          <StreakPlot streaks={study.fit.streaks} />
          {study.fit.autocorrelation.values.length > 0 && (
            <CorrelationPlot values={study.fit.autocorrelation.values} bound={study.fit.autocorrelation.band} />
          )}
        </div>
      )}
      {study && <TestTable test={study.independence} fit={study.fit} />}
      <RoundPart link={link} />
      <MeasurePart packets={link.packets} lost={link.lost} intervalS={link.intervalS} bursts={bursts} />
    </section>
  );
}

function Verdict({ link, name, study: { fit, independence } }: { link: LinkTrace; name: string; study: LinkStudy }) {
  const { headline, sentences } = useMemo(() => verdictWords({ trace: link, fit, test: independence }), [link, fit, independence]);
  return (
    <div>
      <VerdictLine state={VERDICT_MARKS[independence.verdict]} word={headline} sentence="" meta={`link ${name}`} />
      <div className="lg-top">
        <div className="lg-more">
          {sentences.map((sentence) => (
            <p key={sentence}>{sentence}</p>
          ))}
        </div>
        <LinkFiguresList link={link} fit={fit} />
      </div>
    </div>
  );
}
