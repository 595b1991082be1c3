import { sha256 } from "@noble/hashes/sha2.js";
import { bytesToHex, utf8ToBytes } from "@noble/hashes/utils.js";
import type { RunResult } from "./result.ts";

/** SHA-256 over the series and the rounds of a run, hex: everything from which figures, events and verdicts follow, but for what nodes spent. */
export function digestRun(result: RunResult): string {
  const hash = sha256.create();
  // Doubles as they lie in memory: every machine that runs a browser or Node has the lowest byte first.
  const numbers = (values: Float64Array) => hash.update(new Uint8Array(values.buffer, values.byteOffset, values.byteLength));
  const { series, rounds } = result;
  hash.update(utf8ToBytes(`${result.engine}\n${result.ended}\n${series.columns.map(({ name }) => name).join(" ")}\n`));
  numbers(Float64Array.of(result.seed, result.endedAtS, rounds.count));
  numbers(series.t);
  for (const values of series.values) numbers(values);
  hash.update(rounds.measurementDelivered);
  hash.update(rounds.commandDelivered);
  numbers(rounds.measurement);
  numbers(rounds.noise);
  numbers(rounds.estimate);
  numbers(rounds.command);
  return bytesToHex(hash.digest());
}
