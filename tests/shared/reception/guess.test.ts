import { describe, expect, it } from "vitest";
import { previewLog } from "#shared/reception/guess.ts";

const guess = (text: string) => previewLog(text).guess.mapping;

describe("guessing what a log looks like", () => {
  it("recognises delimiter, decimal sign and header", () => {
    expect(previewLog("seq,t_ms,ok\n0,0.5,1\n1,20.1,1\n")).toMatchObject({ delimiter: ",", decimal: ".", header: ["seq", "t_ms", "ok"] });
    expect(previewLog("seq;t;ok\n0;0,5;1\n1;20,1;1\n")).toMatchObject({ delimiter: ";", decimal: ",", header: ["seq", "t", "ok"] });
    expect(previewLog("seq\tt\n0\t0,5\n1\t20,1\n")).toMatchObject({ delimiter: "\t", decimal: "," });
    expect(previewLog("0|0.5\n1|20.1\n")).toMatchObject({ delimiter: "|", decimal: ".", header: null });
  });
  it("is not misled by decimal commas or by commas in quotes", () => {
    expect(previewLog("0;0,5;-70,5\n1;20,1;-71,0\n2;40,2;-69,5\n")).toMatchObject({ delimiter: ";", decimal: ",", header: null });
    expect(previewLog('seq,note\n0,"a;b;c"\n1,"d;e;f"\n')).toMatchObject({ delimiter: "," });
  });
  it("does not take the line that a sample cuts off for a row", () => {
    const text = `seq,t\n${Array.from({ length: 500 }, (_, k) => `${k},${k * 20}`).join("\n")}`;
    const { rows } = previewLog(text.slice(0, 1500), 400);
    expect(rows.every((row) => row.length === 2)).toBe(true);
  });
  it("passes over what a logger writes before the header", () => {
    const rows = Array.from({ length: 20 }, (_, k) => `${k},${20 * k},3`);
    const seen = previewLog(["# logger 2", "firmware 1.4", "seq,t_ms,src", ...rows].join("\n"));
    expect(seen).toMatchObject({ delimiter: ",", header: ["seq", "t_ms", "src"], guess: { mapping: { number: { column: "seq" }, source: "src" } } });
    expect(seen.rows[0]).toEqual(["0", "0", "3"]);
  });
  it("takes columns by their names, with units from their endings", () => {
    expect(guess("Round;Time [ms];Sender;Receiver;Received;RSSI (dBm)\n5;100;3;7;1;-70\n6;120;3;7;0;\n")).toMatchObject({
      number: { column: "Round", kind: "round" },
      time: { column: "Time [ms]", unit: "ms" },
      source: "Sender",
      receiver: "Receiver",
      received: "Received",
      receivedMarks: "received",
      rssi: "RSSI (dBm)",
    });
    expect(guess("pkt_id,rx_time_us,src,dst\n1,2000,3,7\n2,22000,3,7\n")).toMatchObject({
      number: { column: "pkt_id", kind: "sequence" },
      time: { column: "rx_time_us", unit: "us" },
    });
  });
  it("takes a 1 under lost for a loss, unless the cells say it in words", () => {
    expect(guess("seq,lost\n1,0\n2,1\n")).toMatchObject({ received: "lost", receivedMarks: "lost" });
    expect(guess("seq,lost\n1,ok\n2,lost\n")).toMatchObject({ received: "lost", receivedMarks: "received" });
  });
  it("falls back on what stands in the columns", () => {
    const rows = Array.from(
      { length: 30 },
      (_, k) => `2026-03-11T05:58:${String(k).padStart(2, "0")},${k},${k % 5 === 2 ? "lost" : "ok"},${-60 - (k % 9)}`,
    );
    expect(guess(rows.join("\n"))).toMatchObject({
      header: false,
      number: { column: 2 },
      time: { column: 1, unit: "iso" },
      received: 3,
      rssi: 4,
      source: null,
    });
  });
  it("judges the unit of a time by its size and steps", () => {
    const unit = (values: number[]) => guess(["seq,time", ...values.map((value, k) => `${k},${value}`)].join("\n"))?.time?.unit;
    expect(unit([0, 0.02, 0.04])).toBe("s");
    expect(unit([0, 20, 40])).toBe("ms");
    expect(unit([0, 20_000, 40_000])).toBe("us");
    expect(unit([1_773_208_720, 1_773_208_721])).toBe("s");
    expect(unit([1_773_208_720_000, 1_773_208_720_020])).toBe("ms");
    expect(unit([1_773_208_720_000_000, 1_773_208_720_020_000])).toBe("us");
  });
  it("chooses a column by its place when two headers are alike", () => {
    expect(guess("n,n,seq\n3,7,1\n3,7,2\n")?.number).toMatchObject({ column: "seq" });
    expect(guess("seq,seq\n1,5\n2,5\n")?.number).toMatchObject({ column: 1 });
  });
  it("gives no mapping when nothing says what was lost, and says what it took for what", () => {
    expect(guess("name,colour\nanna,red\nbert,blue\n")).toBeNull();
    expect(previewLog("seq,t_ms\n0,0\n1,20\n").guess.reasons).toEqual([
      'column "seq" is taken for the packet number, by its name.',
      'column "t_ms" is taken for the time, by its name.',
      "Times are taken to be in ms.",
    ]);
  });
});
