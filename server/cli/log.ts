/** `holdfast log FILE`: what a reception log holds, its fit and its tests for independence, link by link. */
import { closeSync, openSync, readSync } from "node:fs";
import { StringDecoder } from "node:string_decoder";
import { measureForClaim } from "#shared/reception/claim.ts";
import { fitLink } from "#shared/reception/fit.ts";
import { previewLog } from "#shared/reception/guess.ts";
import { testIndependence } from "#shared/reception/independence.ts";
import { logReader } from "#shared/reception/log-reader.ts";
import { bernoulliOf, gilbertElliottOf, packetsPerRound, replayOf } from "#shared/reception/loss-process.ts";
import { rollingLoss } from "#shared/reception/trace.ts";
import { type ColumnMapping, type LinkTrace, linkName } from "#shared/reception/types.ts";
import { verdictWords } from "#shared/reception/verdict-words.ts";
import { Refused } from "./input.ts";
import { mappingOf } from "./log-map.ts";

const SAMPLE_CHARACTERS = 65_536;
const CHUNK_BYTES = 1 << 20;
const ROLLING_POINTS = 50;
const RELIABILITIES = [0.99, 0.999, 0.9999];
const CONFIDENCE = 0.95;

interface LogOptions {
  map?: string;
  period?: string;
  link?: string;
}

export function log(file: string, options: LogOptions): unknown {
  const periodS = periodOf(options.period);
  const source = open(file);
  try {
    const first = source.read(SAMPLE_CHARACTERS);
    if (first.includes("\0")) throw new Refused(`${file} is not a text in UTF-8: it holds zero bytes. Export it as CSV in UTF-8.`);
    const { mapping, guessed } = mappingOf(options.map, previewLog(first));
    const reader = logReader(mapping);
    for (let text = first; text !== ""; text = source.read(CHUNK_BYTES)) reader.push(text);
    const outcome = reader.finish();
    if (!outcome.ok) throw new Refused(`${file}: ${outcome.issues.map(({ message }) => message).join("\n")}`);
    const { links, report } = outcome.value;
    return {
      file: file === "-" ? "standard input" : file,
      mapping,
      ...(guessed ? { guessed } : {}),
      report,
      howLong: RELIABILITIES.map((reliability) => measureForClaim(reliability, CONFIDENCE, 0, periodS)),
      links: chosen(links, options.link).map((trace) => answerFor(trace, mapping, periodS, options.link !== undefined)),
    };
  } finally {
    source.close();
  }
}

/** Reads a file, or standard input, piece by piece. "" is the end. */
function open(file: string): { read: (most: number) => string; close: () => void } {
  const decoder = new StringDecoder("utf8");
  const fail = (cause: unknown): never => {
    throw new Refused(`${file} cannot be read: ${cause instanceof Error ? cause.message : String(cause)}`);
  };
  let handle: number;
  try {
    handle = file === "-" ? 0 : openSync(file, "r");
  } catch (cause) {
    return fail(cause);
  }
  const bytes = Buffer.alloc(CHUNK_BYTES);
  let ended = false;
  const readOnce = (most: number): string => {
    try {
      const count = readSync(handle, bytes, 0, Math.min(most, bytes.length), null);
      ended = count === 0;
      return ended ? decoder.end() : decoder.write(bytes.subarray(0, count));
    } catch (cause) {
      if (cause instanceof Error && "code" in cause && cause.code === "EOF") {
        ended = true;
        return decoder.end();
      }
      return fail(cause);
    }
  };
  return {
    /** A pipe gives what it has; a piece is never empty before the end. */
    read(most) {
      let text = "";
      while (!ended && text.length < most) text += readOnce(most - text.length);
      return text;
    },
    close() {
      if (handle !== 0) closeSync(handle);
    },
  };
}

function periodOf(text: string | undefined): number | null {
  if (text === undefined) return null;
  const value = Number(text);
  if (!(value >= 0.0005 && value <= 10)) throw new Refused(`--period is ${text}; permitted: 0.0005 to 10, in seconds.`);
  return value;
}

function chosen(links: readonly LinkTrace[], wanted: string | undefined): readonly LinkTrace[] {
  if (wanted === undefined) return links;
  const bare = (name: string): string => name.replace(/\s*>\s*/g, ">").trim();
  const found = links.filter((link) => bare(linkName(link)) === bare(wanted));
  if (found.length === 0) {
    const names = links.slice(0, 20).map((link) => `"${linkName(link)}"`);
    throw new Refused(`--link is ${wanted}; the log has ${names.join(", ")}${links.length > 20 ? ` and ${links.length - 20} more` : ""}.`);
  }
  return found;
}

/** With `whole`, also the recording as it goes into a scenario. */
function answerFor(trace: LinkTrace, mapping: ColumnMapping, periodS: number | null, whole: boolean): unknown {
  const fit = fitLink(trace);
  const independence = testIndependence(trace);
  const { headline, sentences } = verdictWords({ trace, fit, test: independence, periodS });
  const { runs: _, hours, ...about } = trace;
  const every = periodS === null ? 1 : packetsPerRound(trace, periodS);
  return {
    link: linkName(trace),
    ...about,
    ...(hours ? { hours } : {}),
    numbersAre: mapping.number?.kind ?? "none",
    verdict: independence.verdict,
    headline,
    sentences,
    fit,
    independence,
    lossOverTime: rollingLoss(trace, { points: ROLLING_POINTS }),
    lossProcesses: {
      bernoulli: bernoulliOf(fit),
      bernoulliUpper: bernoulliOf(fit, "upper"),
      gilbertElliott: gilbertElliottOf(fit),
      gilbertElliottUpper: gilbertElliottOf(fit, "upper"),
      ...(whole ? { replay: { packetsPerRound: every, ...replayOf(trace, 0, trace.packets, every) } } : {}),
    },
  };
}
