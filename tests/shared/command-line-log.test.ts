import { spawnSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, describe, expect, it } from "vitest";
import { log } from "#server/cli/log.ts";

const folder = mkdtempSync(join(tmpdir(), "holdfast-cli-log-"));
afterAll(() => rmSync(folder, { recursive: true }));

const holdfast = (args: readonly string[], input?: string) =>
  spawnSync("node", ["--import", "tsx", "server/cli.ts", "log", ...args], { encoding: "utf8", input, maxBuffer: 1 << 26 });
const PRESS = "examples/logs/press-running.csv";
const MAP = ["--map", "number=seq,time=time:iso,source=src,receiver=dst,rssi=rssi"];

describe("holdfast log", () => {
  it("prints fit, tests and verdict of each link, and compares with the round's period", () => {
    const { status, stdout, stderr } = holdfast([PRESS, ...MAP, "--period", "0.005"]);
    expect(stderr).toBe("");
    expect(status).toBe(0);
    const answer = JSON.parse(stdout);
    expect(answer.guessed).toBeUndefined();
    expect(answer.mapping).toMatchObject({ number: { column: "seq", kind: "sequence" }, time: { unit: "iso" } });
    expect(answer.howLong[1]).toMatchObject({ packets: 2995, durationS: 14.975 });
    const [link] = answer.links;
    expect(link).toMatchObject({ link: "5 > 1", packets: 7500, verdict: "bursts", independence: { verdict: "bursts", runs: { method: "exact" } } });
    expect(link.fit.gilbertElliott.goodToBad).toBeGreaterThan(0.005);
    expect(link.sentences.at(-1).replaceAll("\u2009\u2060", " ")).toMatch(/one packet each 20 ms, the round lasts 5 ms/);
    expect(link.lossProcesses.replay).toBeUndefined();
  });

  it("gives the same from standard input, and guesses what it is not told", () => {
    const guessed = holdfast(["-"], readFileSync(PRESS, "utf8"));
    expect(guessed.stderr).toBe("");
    const answer = JSON.parse(guessed.stdout);
    expect(answer.guessed).toContain('column "seq" is taken for the packet number, by its name.');
    expect(answer.links).toEqual(JSON.parse(holdfast([PRESS, ...MAP]).stdout).links);
  });

  it("adds the run lengths of a link that is asked for", () => {
    const answer = JSON.parse(holdfast(["examples/logs/quiet-shift.csv", "--link", "7>4"]).stdout);
    expect(answer.links).toHaveLength(1);
    const { runs } = answer.links[0].lossProcesses.replay;
    expect(runs.reduce((sum: number, length: number) => sum + length, 0)).toBe(5000);
  });

  it("reads columns by place, a lost column, and a counter of its own", () => {
    const file = join(folder, "bare.csv");
    writeFileSync(file, "97;1;0,0\n98;0;0,1\n99;0;0,2\n0;0;0,3\n1;1;0,4\n");
    const { stdout, stderr } = holdfast([file, "--map", "number=1,lost=2,time=3,wraps=100,delimiter=semicolon,decimal=comma,header=no"]);
    expect(stderr).toBe("");
    const answer = JSON.parse(stdout);
    expect(answer.links[0]).toMatchObject({ packets: 5, lost: 2, firstNumber: 97 });
    expect(answer.links[0].intervalS).toBeCloseTo(0.1, 12);
    expect(answer.report.troubles.wrapped.count).toBe(1);
  });

  it.each([
    ["no-such.csv", {}, /no-such\.csv cannot be read/],
    [PRESS, { period: "fast" }, /--period is fast; permitted: 0\.0005 to 10, in seconds/],
    [PRESS, { link: "9 > 9" }, /--link is 9 > 9; the log has "5 > 1"/],
    [PRESS, { map: "number=seqno" }, /"seqno", which the file does not have; it has "seq", "time", "src", "dst", "rssi"/],
    [PRESS, { map: "time=time:iso" }, /Neither a packet number nor a received column is chosen/],
    [PRESS, { map: "number=seq,time=time:hours" }, /--map says hours for the time's unit; permitted: s, ms, us, ns, iso/],
    [PRESS, { map: "number=seq,colour=red" }, /--map has "colour"; permitted: number=COLUMN/],
    [PRESS, { map: "number=seq,wraps=many" }, /--map, number\.wrapsAt: /],
    [PRESS, { map: "number" }, /--map has "number"; permitted/],
    ["package.json", {}, /No column looks like a packet number or like received\/lost/],
  ])("refuses %s with %j and says what is wrong", (file, options, message) => expect(() => log(file, options)).toThrow(message));

  it("ends with exit code 2 and says it on standard error when it refuses", () => {
    const { status, stdout, stderr } = holdfast([PRESS, "--seed", "1"]);
    expect(stderr).toMatch(/--seed: only for/);
    expect(stdout).toBe("");
    expect(status).toBe(2);
  });
});
