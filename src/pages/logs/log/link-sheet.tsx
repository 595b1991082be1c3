import { useMemo } from "react";
import type { LinkTrace } from "#shared/reception/types.ts";
import { verdictWords } from "#shared/reception/verdict-words.ts";
import { VerdictLine } from "#src/components/ui/mark.tsx";
import { indexRuns } from "../model/run-index.ts";
import { studyLink } from "../model/study.ts";
import { VERDICT_MARKS } from "../model/verdict.ts";
import { CorrelationPlot } from "../pictures/correlation-plot.tsx";
import { LossPicture } from "../pictures/loss-picture.tsx";
import { StreakPlot } from "../pictures/streak-plot.tsx";
import { LinkFiguresList } from "./link-figures.tsx";
import { MeasurePart } from "./measure-part.tsx";
import { RoundPart } from "./round-part.tsx";
import { TestTable } from "./test-table.tsx";

/** Everything that is known of one link: verdict, figures, pictures, tests. */
export function LinkSheet({ link, name }: { link: LinkTrace; name: string }) {
  const index = useMemo(() => indexRuns(link.runs), [link]);
  const { fit, independence } = useMemo(() => studyLink(link), [link]);
  const { headline, sentences } = useMemo(() => verdictWords({ trace: link, fit, test: independence }), [link, fit, independence]);
  const decided = VERDICT_MARKS[independence.verdict] !== "not-decided";
  return (
    <section className="sheet doc pad lg-sheet" aria-label={`Link ${name}`}>
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
      {link.packets > 0 && <LossPicture link={link} index={index} />}
      {fit.streaks.length > 0 && (
        <div className="lg-two">
          <StreakPlot streaks={fit.streaks} />
          {fit.autocorrelation.values.length > 0 && <CorrelationPlot values={fit.autocorrelation.values} bound={fit.autocorrelation.band} />}
        </div>
      )}
      {(decided || independence.runs) && <TestTable test={independence} fit={fit} />}
      <RoundPart link={link} />
      <MeasurePart packets={link.packets} lost={link.lost} intervalS={link.intervalS} bursts={independence.verdict === "bursts"} />
    </section>
  );
}
