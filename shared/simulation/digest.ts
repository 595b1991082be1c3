import { sha256 } from "@noble/hashes/sha2.js";
import { bytesToHex, utf8ToBytes } from "@noble/hashes/utils.js";
import type { RunResult } from "./result.ts";

/** SHA-256 over every number of a run, hex. Numbers enter as little-endian doubles, so that every engine agrees or differs. */
export function digestRun(result: RunResult): string {
  const hash = sha256.create();
  const numbers = (values: ArrayLike<number>) => {
    const view = new DataView(new ArrayBuffer(values.length * 8));
    for (let i = 0; i < values.length; i++) view.setFloat64(i * 8, values[i], true);
    hash.update(new Uint8Array(view.buffer));
  };
  const { series, rounds } = result;
  hash.update(utf8ToBytes(`${result.engine}\n${result.ended}\n${series.columns.map(({ name }) => name).join(" ")}\n`));
  numbers([result.seed, result.endedAtS, rounds.count]);
  numbers(series.t);
  for (const values of series.values) numbers(values);
  numbers(rounds.measurementDelivered);
  numbers(rounds.commandDelivered);
  numbers(rounds.measurement);
  numbers(rounds.estimate);
  numbers(rounds.command);
  return bytesToHex(hash.digest());
}
