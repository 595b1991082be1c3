import { expect, it } from "vitest";
import { logReader } from "#shared/reception/log-reader.ts";
import { summariseLog } from "#shared/reception/log-summary.ts";
import { columnMappingSchema } from "#shared/reception/types.ts";

const MAPPING = columnMappingSchema.parse({ number: { column: "seq" }, time: { column: "t" }, source: "from", received: "ok" });

/** One packet every `apartS` from each source; "1" received, "0" lost. */
function linksOf(sources: Record<string, { bits: string; apartS: number }>) {
  const reader = logReader(MAPPING);
  reader.push("seq,t,from,ok\n");
  for (const [from, { bits, apartS }] of Object.entries(sources))
    [...bits].forEach((bit, k) => {
      reader.push(`${k},${(k * apartS).toFixed(3)},${from},${bit}\n`);
    });
  const outcome = reader.finish();
  if (!outcome.ok) throw new Error(outcome.issues[0]?.message);
  return outcome.value.links;
}

it("a table is told how many links have each verdict, and the middle of their intervals", () => {
  const summary = summariseLog(
    linksOf({
      S1: { bits: `${"1".repeat(17)}000`.repeat(20), apartS: 0.02 },
      S2: { bits: "1".repeat(400), apartS: 0.05 },
      S3: { bits: `${"1".repeat(99)}0`.repeat(3), apartS: 0.1 },
      S4: { bits: "1".repeat(200), apartS: 0.05 },
    }),
  );
  expect(summary.verdicts).toEqual({ bursts: 1, "nothing-lost": 2, "too-few": 1 });
  expect(summary.intervalS).toBeCloseTo(0.05, 6);
});

it("no interval is told where no column tells the time", () => {
  const reader = logReader(columnMappingSchema.parse({ received: "ok" }));
  reader.push("ok\n1\n1\n0\n1\n");
  const outcome = reader.finish();
  expect(outcome.ok && summariseLog(outcome.value.links)).toEqual({ intervalS: null, verdicts: { "too-few": 1 } });
});
