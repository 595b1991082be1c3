import { createHash } from "node:crypto";
import { gunzipSync, gzipSync } from "node:zlib";
import { eq, sql } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { activity, logPieces, logReadings, receptionLogs } from "#server/db/schema.ts";
import { readLog } from "#server/features/logs/read.ts";
import { errorBodySchema } from "#shared/api/errors.ts";
import { deleteLogResponse, type LogListQuery, logDetailSchema, logListResponse, uploadLogParameters, uploadLogResponse } from "#shared/api/logs.ts";
import { scenarioResponse } from "#shared/api/scenarios.ts";
import { logReader } from "#shared/reception/log-reader.ts";
import { type ColumnMapping, columnMappingSchema } from "#shared/reception/types.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { bodyOf, createScenario, type Harness, type Person, SLOW, scenarioNamed, startHarness } from "./harness.ts";
import { csvText, MAPPING } from "./reception-csv.ts";

let harness: Harness;
beforeAll(async () => {
  harness = await startHarness();
}, SLOW);
afterAll(() => harness?.close());

const path = (team = harness.team) => `/api/teams/${team.id}/logs`;
interface Sent {
  name?: string;
  fileName?: string;
  mapping?: ColumnMapping;
  type?: string;
  by?: Person;
}
const upload = (body: Buffer | string, { name = "Hall 2", fileName = "hall-2.csv", mapping = MAPPING, type = "text/csv", by }: Sent = {}) => {
  const { agent } = by ?? harness.people.engineer;
  const team = by === harness.stranger ? harness.otherTeam : harness.team;
  return agent.post(path(team)).query(uploadLogParameters({ name, fileName, mapping })).set("Content-Type", type).send(body);
};
const uploaded = async (text: string, sent?: Sent) => bodyOf(uploadLogResponse, await upload(text, sent).expect(201)).log;
const errorOf = (response: { body: unknown }) => bodyOf(errorBodySchema, response).error;
const kept = () => harness.connection.db.$count(receptionLogs);

const locally = (text: string, mapping = MAPPING) => {
  const reader = logReader(mapping);
  reader.push(text);
  const read = reader.finish();
  if (!read.ok) throw new Error(read.issues[0].message);
  return read.value;
};

describe("uploading a reception log", () => {
  it("reads on the server what the shared reader reads in the page, and keeps who sent it", async () => {
    const text = csvText(3_000, 11);
    const { log, existed } = bodyOf(
      uploadLogResponse,
      await upload(gzipSync(text), { name: "  Hall 2, night ", fileName: "night.csv", type: "application/gzip" }).expect(201),
    );
    const { links, report } = locally(text);
    expect(existed).toBe(false);
    expect(log.linkTraces).toEqual(links);
    expect(log.report).toEqual(report);
    expect(log.mapping).toEqual(MAPPING);
    expect(log).toMatchObject({
      name: "Hall 2, night",
      fileName: "night.csv",
      author: { name: "The engineer" },
      mayEdit: true,
      usedBy: [],
      scenarios: 0,
    });
    expect(log).toMatchObject({ rows: 6_000, rowsUsed: 6_000, troubles: 0, links: 2, packets: 6_000, bytes: Buffer.byteLength(text) });
    expect(log.lost).toBe(links.reduce((sum, link) => sum + link.lost, 0));
    expect(log.sha256).toBe(createHash("sha256").update(text).digest("hex"));
    const opened = bodyOf(logDetailSchema, await harness.people.trainee.agent.get(`${path()}/${log.id}`).expect(200));
    expect(opened).toEqual({ ...log, mayEdit: false });
  });

  it("counts troubles of the file and keeps them by line", async () => {
    const log = await uploaded("round,time,from,to,ok,rssi\n0,0,1,3,1,-60\n1,0.1,1,3,maybe,-60\n2,0.2,1,3,1,-61\n");
    expect(log).toMatchObject({ rows: 3, rowsUsed: 2 });
    expect(log.troubles).toBeGreaterThan(0);
    expect(log.report.troubles["bad-row"].first[0]).toMatchObject({ line: 3, value: "maybe" });
  });

  it.each([
    ["packed, said to be", gzipSync(csvText(20, 1)), "application/gzip"],
    ["packed, said to be anything", gzipSync(csvText(20, 2)), "application/octet-stream"],
    ["packed, said to be text", gzipSync(csvText(20, 8)), "text/csv"],
    ["packed in two parts", Buffer.concat([gzipSync(csvText(20, 3).slice(0, 500)), gzipSync(csvText(20, 3).slice(500))]), "application/gzip"],
    ["as it is, said to be anything", Buffer.from(csvText(20, 4)), "application/octet-stream"],
    ["as text with a character set", Buffer.from(csvText(20, 5)), "text/csv; charset=utf-8"],
    ["with a byte order mark and CRLF", Buffer.from(`\ufeff${csvText(20, 6).replaceAll("\n", "\r\n")}`), "text/csv"],
    ["in UTF-16, as spreadsheets write it", Buffer.from(`\ufeff${csvText(20, 7)}`, "utf16le"), "text/csv"],
  ])("takes the file %s", async (_what, body, type) => {
    expect(bodyOf(uploadLogResponse, await upload(body, { type }).expect(201)).log).toMatchObject({ rows: 40, rowsUsed: 40, links: 2 });
  });

  it("keeps the same file under the same mapping once in a team, however it was packed, and says so", async () => {
    const text = csvText(50, 21);
    const bodies = [Buffer.from(text), gzipSync(text), gzipSync(text, { level: 1 }), Buffer.from(text)];
    const answers = await Promise.all(bodies.map((body, i) => upload(body, { name: `Try ${i}`, type: "application/octet-stream" })));
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 200, 200, 201]);
    const read = answers.map((answer) => bodyOf(uploadLogResponse, answer));
    expect(new Set(read.map(({ log }) => log.id)).size).toBe(1);
    expect(new Set(read.map(({ log }) => log.name)).size).toBe(1);
    expect(read.filter(({ existed }) => existed)).toHaveLength(3);
    const other = { ...MAPPING, rssi: null };
    expect(bodyOf(uploadLogResponse, await upload(text, { mapping: other }).expect(201)).log.linkTraces[0].rssi).toBeNull();
    const elsewhere = bodyOf(uploadLogResponse, await upload(text, { by: harness.stranger }).expect(201));
    expect(elsewhere.log.id).not.toBe(read[0].log.id);
  });

  const good = csvText(30, 31);
  const packed = gzipSync(csvText(5_000, 31));
  it.each<[string, Buffer | string, Sent, number, string, RegExp]>([
    ["a column that the file does not have", good, { mapping: { ...MAPPING, received: "arrived" } }, 422, "log-invalid", /arrived/],
    ["a table in which nothing can be used", "round,time,from,to,ok,rssi\nx,y,1,2,z,w\n", {}, 422, "log-invalid", /None of 1 rows/],
    ["a header alone", "round,time,from,to,ok,rssi\n", {}, 422, "log-invalid", /rows/],
    ["nothing", "", {}, 422, "log-invalid", /empty/],
    ["nothing, packed", gzipSync(""), { type: "application/gzip" }, 422, "log-invalid", /empty/],
    ["text that is said to be packed", good, { type: "application/gzip" }, 422, "log-invalid", /not gzip at all/],
    ["a packed file that ends in the middle", packed.subarray(0, -4_000), { type: "application/gzip" }, 422, "log-invalid", /not whole/],
    [
      "a packed file that is damaged",
      Buffer.concat([packed.subarray(0, 3_000), Buffer.alloc(400), packed.subarray(3_400)]),
      { type: "application/gzip" },
      422,
      "log-invalid",
      /damaged/,
    ],
    ["a spreadsheet", Buffer.from("PK\x03\x04 and so on", "latin1"), {}, 422, "log-invalid", /Save the table as CSV/],
    ["one endless line", "1,".repeat(600_000), {}, 422, "log-invalid", /line of more than 1.0 MB/],
    ["a type out of nowhere", good, { type: "constructor" }, 415, "type-not-taken", /constructor was sent/],
    ["a form", good, { type: "application/x-www-form-urlencoded" }, 415, "type-not-taken", /application\/gzip/],
    ["JSON", good, { type: "application/json" }, 415, "type-not-taken", /application\/json was sent/],
    ["no name", good, { name: " " }, 400, "request-invalid", /name/],
    ["a name that is too long", good, { name: "n".repeat(121) }, 400, "request-invalid", /121/],
    ["a name that cannot be stored", good, { name: "zero\u0000" }, 400, "request-invalid", /U\+0000/],
    [
      "a mapping without what was lost",
      good,
      { mapping: { ...MAPPING, number: null, received: null } },
      400,
      "request-invalid",
      /^The mapping of the columns is not valid: Neither .+ one of them is needed/,
    ],
  ])("is refused with a reason and leaves nothing behind: %s", async (_what, body, sent, status, code, message) => {
    const before = await kept();
    const error = errorOf(await upload(body, { ...sent, by: harness.people.reviewer }).expect(status));
    expect(error.code).toBe(code);
    expect(error.message).toMatch(message);
    expect(await kept()).toBe(before);
  });

  it.each([
    ["not JSON", "{", "mapping"],
    ["of another form", '{"number": 7}', "number"],
    ["with a field too many", '{"received": "ok", "colour": "red"}', "colour"],
  ])("is refused by name when the mapping is %s", async (_what, mapping, at) => {
    const request = harness.people.reviewer.agent.post(path()).query({ name: "x", fileName: "", mapping }).set("Content-Type", "text/csv").send(good);
    const error = errorOf(await request.expect(400));
    expect(error.code).toBe("request-invalid");
    expect(error.issues?.map((issue) => issue.path)).toContain(at);
  });

  it("refuses a log with more bursts than anybody can work with, and says how many", async () => {
    const mapping = columnMappingSchema.parse({ header: false, received: 1 });
    async function* alternating() {
      const part = Buffer.from("1\n0\n".repeat(50_000));
      for (let i = 0; i < 51; i++) yield part;
    }
    const read = await readLog(alternating(), mapping, false);
    expect(read).toMatchObject({ ok: false, code: "log-invalid" });
    expect(!read.ok && read.message).toMatch(/changes 5100000 times/);
  });
});

describe("the list of reception logs", () => {
  const list = async (query: Partial<Record<keyof LogListQuery, string | number>>, by = harness.stranger) =>
    bodyOf(logListResponse, await by.agent.get(path(harness.otherTeam)).query(query).expect(200));

  it("is sorted, searched and paged on the server, and of the own team only", async () => {
    const by = harness.stranger;
    await harness.connection.db.delete(receptionLogs).where(eq(receptionLogs.teamId, harness.otherTeam.id));
    expect(await list({})).toEqual({ items: [], total: 0, totalUnfiltered: 0, page: 1, pageSize: 10 });
    await uploaded(csvText(40, 41), { name: "Rig 10", fileName: "süd.csv", by });
    await uploaded(csvText(20, 42), { name: "Rig 2", fileName: "nord.csv", by });
    await uploaded("received\n1\n1\n1\n0\n", { name: "Bench", fileName: "", mapping: columnMappingSchema.parse({ received: "received" }), by });
    await uploaded(csvText(5, 43), { name: "Somebody else's" });
    const names = async (query: Parameters<typeof list>[0]) => (await list(query)).items.map(({ name }) => name);
    expect(await names({})).toEqual(["Bench", "Rig 2", "Rig 10"]);
    expect(await names({ sort: "name", direction: "ascending" })).toEqual(["Bench", "Rig 2", "Rig 10"]);
    expect(await names({ sort: "size" })).toEqual(["Rig 10", "Rig 2", "Bench"]);
    expect(await names({ sort: "packets", direction: "ascending" })).toEqual(["Bench", "Rig 2", "Rig 10"]);
    expect((await names({ sort: "loss" }))[0]).toBe("Bench");
    expect(await names({ sort: "links", direction: "ascending" })).toEqual(["Bench", "Rig 2", "Rig 10"]);
    for (const sort of ["author", "used"]) expect(await names({ sort })).toEqual(["Bench", "Rig 2", "Rig 10"]);
    expect(await names({ sort: "name", direction: "descending", pageSize: 2, page: 2 })).toEqual(["Bench"]);
    expect(await names({ search: "sud rig" })).toEqual(["Rig 10"]);
    expect(await names({ search: "STRANGER bench" })).toEqual(["Bench"]);
    expect(await list({ search: "nothing like it" })).toMatchObject({ total: 0, totalUnfiltered: 3 });
  });

  it.each([{ sort: "colour" }, { page: 0 }, { pageSize: 101 }, { colour: "red" }])("refuses %o", async (query) => {
    expect(errorOf(await harness.stranger.agent.get(path(harness.otherTeam)).query(query).expect(400)).code).toBe("request-invalid");
  });
});

describe("a reception log", () => {
  it("gives back the original file byte for byte, packed only for who takes it", async () => {
    const text = `${csvText(30_000, 51)}\n\n"an odd end`;
    const { id } = await uploaded(text, { fileName: 'Halle "2" – Süd.csv' });
    const get = (encoding: string) =>
      harness.people.trainee.agent
        .get(`${path()}/${id}/original`)
        .set("Accept-Encoding", encoding)
        .buffer(true)
        .parse((stream, done) => {
          const parts: Buffer[] = [];
          stream.on("data", (part: Buffer) => parts.push(part));
          stream.on("end", () => done(null, Buffer.concat(parts)));
        })
        .expect(200);
    const plain = await get("identity");
    expect(Buffer.compare(plain.body, Buffer.from(text))).toBe(0);
    expect(plain.headers["content-encoding"]).toBeUndefined();
    expect(plain.headers.vary).toContain("Accept-Encoding");
    expect(plain.headers["content-type"]).toBe("text/csv; charset=utf-8");
    expect(plain.headers["content-disposition"]).toBe(
      "attachment; filename=\"Halle _2_ _ Sud.csv\"; filename*=UTF-8''Halle%20%222%22%20%E2%80%93%20S%C3%BCd.csv",
    );
    const packed = await get("gzip");
    expect(packed.headers["content-encoding"]).toBe("gzip");
    // The agent unpacks by itself.
    expect(Buffer.compare(packed.body, Buffer.from(text))).toBe(0);
    const pieces = await harness.connection.db
      .select({ bytes: logPieces.bytes })
      .from(logPieces)
      .where(eq(logPieces.logId, id))
      .orderBy(logPieces.number);
    expect(gunzipSync(Buffer.concat(pieces.map(({ bytes }) => bytes))).toString()).toBe(text);
  });

  it("takes the log's own name where the file had none", async () => {
    const { id } = await uploaded(csvText(6, 52), { name: "Bay 3", fileName: "" });
    const response = await harness.people.engineer.agent.get(`${path()}/${id}/original`).expect(200);
    expect(response.headers["content-disposition"]).toContain('filename="Bay 3.csv"');
  });

  it("can be renamed, and is found under the new name and sorted by it", async () => {
    const { id } = await uploaded(csvText(6, 53), { name: "Old name" });
    const { agent } = harness.people.reviewer;
    const renamed = bodyOf(logDetailSchema, await agent.patch(`${path()}/${id}`).send({ name: " New name " }).expect(200));
    expect(renamed).toMatchObject({ id, name: "New name", fileName: "hall-2.csv", author: { name: "The engineer" } });
    const { items } = bodyOf(logListResponse, await agent.get(path()).query({ search: "new name engineer" }).expect(200));
    expect(items.map((item) => item.id)).toEqual([id]);
    for (const body of [{ name: "" }, { name: "n".repeat(121) }, { name: 7 }, {}, { name: "x", sha256: "0" }]) {
      await agent.patch(`${path()}/${id}`).send(body).expect(400);
    }
  });

  it("that nothing uses is deleted with everything that was read from it", async () => {
    const { id } = await uploaded(csvText(6, 54));
    bodyOf(deleteLogResponse, await harness.people.reviewer.agent.delete(`${path()}/${id}`).expect(200));
    const { db } = harness.connection;
    expect(await db.$count(logReadings, eq(logReadings.logId, id))).toBe(0);
    expect(await db.$count(logPieces, eq(logPieces.logId, id))).toBe(0);
    for (const request of [harness.people.engineer.agent.get(`${path()}/${id}`), harness.people.engineer.agent.get(`${path()}/${id}/original`)]) {
      await request.expect(404);
    }
  });

  it("leaves lines in the activity record, of a refusal too", async () => {
    const { agent } = harness.people.engineer;
    const log = await uploaded(csvText(6, 55), { name: "Recorded" });
    await agent.patch(`${path()}/${log.id}`).send({ name: "Recorded anew" }).expect(200);
    await agent.patch(`${path()}/${log.id}`).send({ name: "Recorded anew" }).expect(200);
    const { id } = await createScenario(harness, scenarioNamed("Using", replaying(log)));
    await agent.delete(`${path()}/${log.id}`).expect(409);
    await agent.patch(`/api/teams/${harness.team.id}/scenarios/${id}`).send({ archived: true });
    await agent.delete(`/api/teams/${harness.team.id}/scenarios/${id}`).expect(200);
    await agent.delete(`${path()}/${log.id}`).expect(200);
    const lines = await harness.connection.db.select().from(activity).where(sql`${activity.subjectId} = ${log.id}`).orderBy(activity.position);
    expect(lines.map(({ what, subjectName }) => [what, subjectName])).toEqual([
      ["log-uploaded", "Recorded"],
      ["log-renamed", "Recorded anew"],
      ["log-deletion-refused", "Recorded anew"],
      ["log-deleted", "Recorded anew"],
    ]);
  });
});

interface Named {
  id: string;
  name: string;
}
/** What was received on both links, one packet a round. */
function replaying({ id, name }: Named) {
  return (scenario: Scenario) => {
    const link = { link: "1 > 3", runs: [40, 2, 10_000] };
    scenario.losses.process = { type: "replay", log: { id, name }, measurement: link, command: link, then: "repeat" };
  };
}

describe("a reception log that a scenario names", () => {
  const scenarios = () => `/api/teams/${harness.team.id}/scenarios`;

  it("stays while any revision names it, and the refusal names them all", async () => {
    const { agent } = harness.people.engineer;
    const log = await uploaded(csvText(6, 61), { name: "Named" });
    const first = await createScenario(harness, scenarioNamed("Alpha", replaying(log)));
    const second = await createScenario(harness, scenarioNamed("Beta"));
    const save = (id: string, baseRevision: number, scenario: Scenario) =>
      agent.post(`${scenarios()}/${id}/revisions`).send({ baseRevision, scenario }).expect(201);
    await save(first.id, 1, scenarioNamed("Alpha", replaying(log)));
    await save(first.id, 2, scenarioNamed("Alpha"));
    await save(second.id, 1, scenarioNamed("Beta", replaying(log)));
    const uses = [
      { id: first.id, name: "Alpha", archived: false, revisions: [1, 2] },
      { id: second.id, name: "Beta", archived: false, revisions: [2] },
    ];
    const error = errorOf(await agent.delete(`${path()}/${log.id}`).expect(409));
    expect(error).toMatchObject({ code: "in-use", uses });
    expect(error.message).toContain("“Alpha” (revisions 1 and 2) and “Beta” (revision 2)");
    expect(error.message).toContain("Drafts that nobody has saved are not known here");
    expect(bodyOf(logDetailSchema, await agent.get(`${path()}/${log.id}`))).toMatchObject({ scenarios: 2, usedBy: uses });
    const { items } = bodyOf(logListResponse, await agent.get(path()).query({ sort: "used", pageSize: 1 }));
    expect(items[0]).toMatchObject({ id: log.id, scenarios: 2 });
  });

  it("goes with duplicates and imports inside the team", async () => {
    const log = await uploaded(csvText(6, 62));
    const { agent } = harness.people.engineer;
    const { id, latestRun } = await createScenario(harness, scenarioNamed("Exported", replaying(log)));
    const copy = bodyOf(scenarioResponse, await agent.post(`${scenarios()}/${id}/duplicate`).send({}).expect(201));
    expect(copy.latest.scenario.losses.process).toMatchObject({ type: "replay", log: { id: log.id } });
    expect(copy.latestRun?.digest).toBe(latestRun?.digest);
    await agent.post(scenarios()).send({ scenario: copy.latest.scenario }).expect(201);
    expect(errorOf(await agent.delete(`${path()}/${log.id}`).expect(409)).uses).toHaveLength(3);
  });

  it("has to be one of the team's: another one is refused at its place, and nothing is saved", async () => {
    const theirs = await uploaded(csvText(6, 63), { name: "Theirs", by: harness.stranger });
    const { agent } = harness.people.engineer;
    const { id } = await createScenario(harness, scenarioNamed("Curious"));
    for (const log of [theirs, { id: "0b7c6a52-2f0e-4d3e-9a51-3f0d2a7d9f11", name: "Theirs" }]) {
      const scenario = scenarioNamed("Curious", replaying(log));
      for (const request of [
        agent.post(scenarios()).send({ scenario }),
        agent.post(`${scenarios()}/${id}/revisions`).send({ baseRevision: 1, scenario }),
      ]) {
        const error = errorOf(await request.expect(422));
        expect(error.issues?.map(({ code, path: at }) => [code, at])).toEqual([["unknown-log", "losses.process.log.id"]]);
        expect(error.message).toContain("“Theirs” is not one of Northquay Packaging");
      }
    }
    const opened = bodyOf(scenarioResponse, await agent.get(`${scenarios()}/${id}`));
    expect(opened.revision).toBe(1);
    // Nobody needs a log to replay what the scenario carries itself.
    const unnamed = scenarioNamed("Curious", (scenario) => {
      replaying(theirs)(scenario);
      if (scenario.losses.process.type === "replay") scenario.losses.process.log = null;
    });
    await agent.post(`${scenarios()}/${id}/revisions`).send({ baseRevision: 1, scenario: unnamed }).expect(201);
  });

  it("cannot be deleted or altered in the database either", async () => {
    const { pool } = harness.connection;
    const log = await uploaded(csvText(6, 64));
    await createScenario(harness, scenarioNamed("Guarded", replaying(log)));
    await expect(pool.query("delete from reception_logs where id = $1", [log.id])).rejects.toThrow("revision_logs_keep_log");
    const { rows } = await pool.query("select column_name from information_schema.columns where table_name = 'reception_logs'");
    const free = ["name", "sort_key", "search_text"];
    const fixed = rows.map(({ column_name }) => column_name as string).filter((column) => !free.includes(column));
    expect(fixed.length).toBeGreaterThan(10);
    for (const column of fixed) {
      await expect(pool.query(`update reception_logs set ${column} = ${column}`), column).rejects.toThrow("never changes");
    }
    for (const [table, column] of [
      ["log_pieces", "bytes"],
      ["log_readings", "link_traces"],
    ]) {
      await expect(pool.query(`update ${table} set ${column} = ${column}`)).rejects.toThrow("never changes");
      await expect(pool.query(`delete from ${table}`)).rejects.toThrow("is deleted only together with");
    }
    await expect(pool.query("delete from revision_logs")).rejects.toThrow("is deleted only together with");
    await harness.people.engineer.agent.get(`${path()}/${log.id}`).expect(200);
  });

  it("goes with its whole team", async () => {
    const { db } = harness.connection;
    await expect(
      db.transaction(async (transaction) => {
        await transaction.execute(sql`delete from teams where id = ${harness.team.id}`);
        await transaction.execute(sql`set constraints all immediate`);
        expect(await transaction.$count(receptionLogs, eq(receptionLogs.teamId, harness.team.id))).toBe(0);
        transaction.rollback();
      }),
    ).rejects.toThrow("Rollback");
  });

  it("is either named or deleted when both happen at the same moment", async () => {
    for (let i = 0; i < 6; i++) {
      const log = await uploaded(csvText(6, 70 + i), { by: harness.people.administrator });
      const saving = harness.people.engineer.agent.post(scenarios()).send({ scenario: scenarioNamed(`Contested ${i}`, replaying(log)) });
      const [saved, deleted] = await Promise.all([saving, harness.people.reviewer.agent.delete(`${path()}/${log.id}`)]);
      expect([
        [201, 409],
        [422, 200],
      ]).toContainEqual([saved.status, deleted.status]);
      await harness.people.engineer.agent.get(`${path()}/${log.id}`).expect(saved.status === 201 ? 200 : 404);
    }
  });

  it("is deleted once when several want it gone", async () => {
    const { id } = await uploaded(csvText(6, 80), { by: harness.people.administrator });
    const answers = await Promise.all(Array.from({ length: 4 }, () => harness.people.reviewer.agent.delete(`${path()}/${id}`)));
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 404, 404, 404]);
  });
});
