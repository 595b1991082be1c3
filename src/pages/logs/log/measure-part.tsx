import { useState } from "react";
import { packetsForClaim } from "#shared/math/statistics.ts";
import { shownReliability } from "#shared/reception/claim.ts";
import { countText, durationText } from "#shared/reception/words.ts";
import { Field, type Problem } from "#src/components/ui/field.tsx";
import { Mark } from "#src/components/ui/mark.tsx";
import { significant, withUnit } from "#src/lib/format.ts";
import { packetsText } from "../model/log-words.ts";

interface Entry {
  label: string;
  unit: string;
  low: number;
  high: number;
  whole?: boolean;
  permitted: string;
}

const RELIABILITY: Entry = { label: "Delivered, at least", unit: "%", low: 50, high: 99.9999, permitted: "50 to 99.9999" };
const CONFIDENCE: Entry = { label: "Confidence", unit: "%", low: 50, high: 99.9999, permitted: "50 to 99.9999" };
const ALLOWED: Entry = { label: "Losses allowed", unit: "", low: 0, high: 1000, whole: true, permitted: "0 to 1000" };
const PERIOD: Entry = { label: "One packet every", unit: "ms", low: 0.001, high: 86_400_000, permitted: "0.001 to 8.64e7" };

function read(
  text: string,
  { label, unit, low, high, whole, permitted }: Entry,
): { value: number; problem: null } | { value: null; problem: Problem } {
  const value = Number(text.trim().replace(",", "."));
  const rule = `Permitted: ${permitted}${unit && ` ${unit}`}${whole ? ", whole" : ""}.`;
  if (text.trim() === "" || !Number.isFinite(value)) return { value: null, problem: { title: `${label}: “${text}” is no number.`, text: rule } };
  if (value < low || value > high || (whole && !Number.isInteger(value)))
    return { value: null, problem: { title: `${label}: ${text.trim()}${unit && ` ${unit}`}.`, text: rule } };
  return { value, problem: null };
}

interface MeasurePartProps {
  packets: number;
  lost: number;
  intervalS: number | null;
  /** Losses in this log come in bursts: its packets tell less than as many independent ones. */
  bursts: boolean;
}

/** How long one has to measure for a claim, and what the present log shows. */
export function MeasurePart({ packets, lost, intervalS, bursts }: MeasurePartProps) {
  const [texts, setTexts] = useState({
    reliability: "99.9",
    confidence: "95",
    allowed: "0",
    period: String(Number(((intervalS ?? 0.02) * 1000).toPrecision(3))),
  });
  const set = (key: keyof typeof texts) => (text: string) => setTexts((before) => ({ ...before, [key]: text }));
  const reliability = read(texts.reliability, RELIABILITY);
  const confidence = read(texts.confidence, CONFIDENCE);
  const allowed = read(texts.allowed, ALLOWED);
  const period = read(texts.period, PERIOD);
  const known = reliability.value !== null && confidence.value !== null && allowed.value !== null;
  const needed = known ? packetsForClaim(reliability.value / 100, confidence.value / 100, allowed.value) : null;
  const shown = confidence.value === null ? null : shownReliability(packets, lost, confidence.value / 100);
  const holds = shown !== null && reliability.value !== null && shown >= reliability.value / 100;
  const losses = allowed.value === 0 ? "without a loss" : `with at most ${countText(allowed.value ?? 0)} lost`;
  return (
    <section aria-labelledby="lg-measure">
      <div className="hrow">
        <h2 id="lg-measure">How long must I measure?</h2>
      </div>
      <div className="lg-measure">
        <div>
          <Field {...about(RELIABILITY)} value={texts.reliability} onText={set("reliability")} problem={reliability.problem} />
          <Field {...about(CONFIDENCE)} value={texts.confidence} onText={set("confidence")} problem={confidence.problem} />
          <Field {...about(ALLOWED)} value={texts.allowed} onText={set("allowed")} problem={allowed.problem} />
          <Field {...about(PERIOD)} value={texts.period} onText={set("period")} problem={period.problem} />
        </div>
        <div aria-live="polite">
          {needed !== null && (
            <p className="lg-answer">
              <b>{packetsText(needed)}</b> {losses}
              {period.value !== null && <>: {durationText((needed * period.value) / 1000)} of measuring</>}.
            </p>
          )}
          {shown !== null && (
            <p className="mt-2">
              <Mark state={holds ? "holds" : "not-decided"} quiet /> This log, {countText(lost)} of {packetsText(packets)} lost, shows that at least{" "}
              <b className="strong">{withUnit(deliveredText(shown), "%")}</b> arrive, at {texts.confidence.trim()} % confidence
              {reliability.value !== null &&
                (holds
                  ? `: the claim of ${withUnit(texts.reliability.trim(), "%")} is shown.`
                  : `: not enough for ${withUnit(texts.reliability.trim(), "%")}.`)}
            </p>
          )}
          <p className="note second mt-2">
            {bursts
              ? "Counted as if packets were lost independently. In this log they are not: measure longer than that, and at different hours."
              : "Counted as if packets were lost independently, under conditions that stay as they were while measuring."}
          </p>
        </div>
      </div>
    </section>
  );
}

const about = ({ label, unit, permitted }: Entry) => ({ label, unit, range: permitted });

/** Rounded down: what is shown must not promise more than what holds. */
function deliveredText(share: number): string {
  const misses = 1 - share;
  const digits = Math.max(1, Math.min(6, Math.ceil(-Math.log10(Math.max(misses * 100, 1e-6))) + 1));
  const scale = 10 ** digits;
  return significant(Math.floor(share * 100 * scale) / scale, digits + 3);
}
