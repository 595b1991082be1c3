/** Files over real connections: large ones, too large ones, and such as never end. */
import { createHash } from "node:crypto";
import { once } from "node:events";
import { type ClientRequest, request as httpRequest, type IncomingMessage, type Server } from "node:http";
import { type AddressInfo, connect } from "node:net";
import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { createGzip } from "node:zlib";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { logPieces, receptionLogs } from "#server/db/schema.ts";
import { limitPerPerson } from "#server/http/rate.ts";
import { errorBodySchema } from "#shared/api/errors.ts";
import { MAX_LOG_BYTES, MAX_LOG_SENT_BYTES, uploadLogParameters, uploadLogResponse } from "#shared/api/logs.ts";
import { bodyOf, type Harness, PASSWORD, type Person, SLOW, startHarness } from "./harness.ts";
import { csvChunks, csvText, MAPPING } from "./reception-csv.ts";

let harness: Harness;
let server: Server;
beforeAll(async () => {
  harness = await startHarness();
  server = harness.express.listen(0, "127.0.0.1");
  await new Promise((resolve) => server.once("listening", resolve));
}, SLOW);
afterAll(async () => {
  server.closeAllConnections();
  await new Promise((resolve) => server.close(resolve));
  await harness?.close();
});

const path = () => `/api/teams/${harness.team.id}/logs`;
const cookies = new Map<Person, string>();
async function cookieOf(person: Person): Promise<string> {
  if (!cookies.has(person)) {
    const response = await person.agent.post("/api/session").send({ email: person.email, password: PASSWORD });
    cookies.set(person, response.headers["set-cookie"][0].split(";")[0]);
  }
  return cookies.get(person) as string;
}

interface Answer {
  status: number;
  headers: IncomingMessage["headers"];
  body: unknown;
}
interface Upload {
  outgoing: ClientRequest;
  answer: Promise<Answer>;
}
/** An upload whose body is still to be written, so that a connection cut off before the answer would be seen. */
async function begin(type: string, { by = harness.people.engineer, name = "Hall 2", headers = {} as Record<string, string> } = {}): Promise<Upload> {
  const query = new URLSearchParams(uploadLogParameters({ name, fileName: "hall-2.csv", mapping: MAPPING }));
  const outgoing = httpRequest({
    host: "127.0.0.1",
    port: (server.address() as AddressInfo).port,
    path: `${path()}?${query}`,
    method: "POST",
    headers: { "Content-Type": type, Cookie: await cookieOf(by), ...headers },
  });
  const answer = new Promise<Answer>((resolve, reject) => {
    outgoing.on("error", reject);
    outgoing.on("response", async (incoming) => {
      const parts: Buffer[] = [];
      for await (const part of incoming) parts.push(part);
      resolve({ status: incoming.statusCode ?? 0, headers: incoming.headers, body: JSON.parse(Buffer.concat(parts).toString()) });
    });
  });
  // Some of them are broken off on purpose.
  answer.catch(() => undefined);
  return { outgoing, answer };
}

/** `bytes` in chunks that all are the same. */
function* repeated(chunk: Buffer, bytes: number): Generator<Buffer> {
  for (let sent = 0; sent < bytes; sent += chunk.length) yield bytes - sent < chunk.length ? chunk.subarray(0, bytes - sent) : chunk;
}
const LONG_LINES = Buffer.from(`${"x".repeat(99_999)}\n`.repeat(10));

/** Looks at the answer only when all is sent: a connection that is reset before loses it. */
async function sendLikeABrowser(chunks: Iterable<Buffer>, length: number | null): Promise<{ status: number; body: unknown }> {
  const socket = connect((server.address() as AddressInfo).port, "127.0.0.1");
  socket.pause();
  const query = new URLSearchParams(uploadLogParameters({ name: "Large", fileName: "", mapping: MAPPING }));
  const size = length === null ? "Transfer-Encoding: chunked" : `Content-Length: ${length}`;
  const head = `POST ${path()}?${query} HTTP/1.1\r\nHost: 127.0.0.1\r\nContent-Type: text/csv\r\nCookie: ${await cookieOf(harness.people.engineer)}\r\n${size}\r\n\r\n`;
  function* all() {
    yield Buffer.from(head);
    for (const chunk of chunks) {
      if (length !== null) yield chunk;
      else yield Buffer.concat([Buffer.from(`${chunk.length.toString(16)}\r\n`), chunk, Buffer.from("\r\n")]);
    }
    if (length === null) yield Buffer.from("0\r\n\r\n");
  }
  for (const part of all()) if (!socket.write(part)) await once(socket, "drain");
  let text = "";
  for await (const part of socket) {
    text += part;
    const [, expected] = /content-length: (\d+)/i.exec(text) ?? [];
    if (expected && text.length >= text.indexOf("\r\n\r\n") + 4 + Number(expected)) break;
  }
  return { status: Number(text.split(" ")[1]), body: JSON.parse(text.slice(text.indexOf("\r\n\r\n"))) };
}

const nothingKept = async () => {
  const { db } = harness.connection;
  expect(await db.$count(receptionLogs)).toBe(0);
  expect(await db.$count(logPieces)).toBe(0);
};
const errorOf = (answer: Answer) => bodyOf(errorBodySchema, answer).error;

describe("a reception log that is too large", () => {
  it("is refused by its declared length, with both sizes, before anything of it is sent", async () => {
    const { outgoing, answer } = await begin("text/csv", { headers: { "Content-Length": "3000000000" } });
    outgoing.flushHeaders();
    const error = errorOf(await answer);
    expect(error).toMatchObject({ code: "too-large", size: { bytes: 3_000_000_000, permittedBytes: MAX_LOG_SENT_BYTES } });
    expect(error.message).toBe("This file is 3000.0 MB, more than is taken: at most 64.0 MB.");
    outgoing.destroy();
    await nothingKept();
  });

  it.each([
    ["with its length said", true],
    ["of unknown length", false],
  ])(
    "is answered although all of it is on its way: %s",
    async (_what, said) => {
      const bytes = MAX_LOG_SENT_BYTES + 6_000_000;
      const { status, body } = await sendLikeABrowser(repeated(LONG_LINES, bytes), said ? bytes : null);
      expect(status).toBe(413);
      expect(bodyOf(errorBodySchema, { body }).error.size).toEqual({ bytes: said ? bytes : null, permittedBytes: MAX_LOG_SENT_BYTES });
      await nothingKept();
    },
    60_000,
  );

  it("is refused when it only grows large by being unpacked", async () => {
    const { outgoing, answer } = await begin("application/gzip");
    await pipeline(Readable.from(repeated(LONG_LINES, MAX_LOG_BYTES + 10_000_000)), createGzip({ level: 1 }), outgoing);
    const error = errorOf(await answer);
    expect(error).toMatchObject({ code: "too-large", size: { bytes: null, permittedBytes: MAX_LOG_BYTES } });
    expect(error.message).toBe("Unpacked, this file is larger than is taken: at most 256.0 MB.");
    await nothingKept();
  }, 60_000);
});

describe("an upload", () => {
  it("that is broken off in the middle leaves nothing behind and keeps nobody from the next", async () => {
    for (const type of ["text/csv", "application/gzip"]) {
      const uploads = await Promise.all(Array.from({ length: 5 }, () => begin(type)));
      for (const { outgoing } of uploads) {
        const chunk = type === "text/csv" ? Buffer.from(csvText(2_000)) : Buffer.from([0x1f, 0x8b, 8, 0, 0, 0, 0, 0, 0, 3]);
        await new Promise((resolve) => outgoing.write(chunk, resolve));
        outgoing.destroy();
      }
      const broken = await Promise.allSettled(uploads.map(({ answer }) => answer));
      expect(broken.map(({ status }) => status)).toEqual(Array(5).fill("rejected"));
    }
    await nothingKept();
    const { outgoing, answer } = await begin("text/csv", { name: "The next" });
    outgoing.end(csvText(10, 7));
    const { log } = bodyOf(uploadLogResponse, await answer);
    expect(log).toMatchObject({ name: "The next", rows: 20 });
    await harness.people.engineer.agent.delete(`${path()}/${log.id}`).expect(200);
  }, 60_000);

  it("waits for its turn behind others, and is refused for a moment when too many wait", async () => {
    const uploads = await Promise.all(
      Array.from({ length: 14 }, async (_, i) => {
        const upload = await begin("text/csv", { by: [harness.people.engineer, harness.people.reviewer][i % 2] });
        const text = csvText(20, 100 + i);
        upload.outgoing.write(text.slice(0, 200));
        return { ...upload, rest: text.slice(200) };
      }),
    );
    const refused = new Set<number>();
    await new Promise<void>((resolve) => {
      for (const [i, { answer }] of uploads.entries()) {
        void answer.then(({ status }) => {
          if (status === 429) refused.add(i);
          if (refused.size === 3) resolve();
        });
      }
    });
    for (const { outgoing, rest } of uploads) outgoing.end(rest);
    const answers = await Promise.all(uploads.map(({ answer }) => answer));
    expect(answers.map(({ status }) => status).sort()).toEqual([...Array(11).fill(201), ...Array(3).fill(429)]);
    const error = errorOf(answers.find(({ status }) => status === 429) as Answer);
    expect(error).toMatchObject({ code: "too-many-attempts", retryAfterS: 15 });
    expect(error.message).toContain("reading 3 reception logs, and 8 more are waiting");
  }, 60_000);

  it("is refused when one person sends very many, until some time has passed", async () => {
    let now = 1_000_000;
    const limit = limitPerPerson("pictures", 2, () => now);
    const [ada, ben] = ["ada", "ben"].map((id) => ({ user: { id, name: id }, team: harness.team, roles: [] }));
    limit(ada);
    limit(ada);
    expect(() => limit(ada)).toThrow("You sent 2 pictures; 2 are taken in 15 minutes. Try again in 15 minutes.");
    limit(ben);
    now += 14.5 * 60_000;
    expect(() => limit(ada)).toThrow("Try again in 1 minute.");
    now += 30_000;
    limit(ada);

    const { agent } = harness.people.administrator;
    const send = () => agent.post(`/api/teams/${harness.team.id}/pictures?name=x.png`).set("Content-Type", "image/gif").send("x");
    for (let i = 0; i < 60; i++) await send().expect(415);
    const response = await send().expect(429);
    expect(bodyOf(errorBodySchema, response).error.code).toBe("too-many-attempts");
    expect(Number(response.headers["retry-after"])).toBeGreaterThan(800);
  });
});

describe("a reception log of more than 50 MB", () => {
  it("is read and given back while everybody else is answered at once", async () => {
    const hash = createHash("sha256");
    let bytes = 0;
    const counted = function* () {
      for (const text of csvChunks(420_000, 5, 45)) {
        const chunk = Buffer.from(text);
        hash.update(chunk);
        bytes += chunk.length;
        yield chunk;
      }
    };
    const { outgoing, answer } = await begin("application/gzip");
    let done = false;
    const sent = pipeline(Readable.from(counted()), createGzip({ level: 1 }), outgoing)
      .then(() => answer)
      .finally(() => {
        done = true;
      });
    const began = performance.now();
    let answered = 0;
    let slowestMs = 0;
    while (!done) {
      const from = performance.now();
      await harness.people.trainee.agent.get(`/api/teams/${harness.team.id}/members`).expect(200);
      slowestMs = Math.max(slowestMs, performance.now() - from);
      answered++;
    }
    const { log } = bodyOf(uploadLogResponse, await sent);
    expect(bytes).toBeGreaterThan(50_000_000);
    expect(log).toMatchObject({ bytes, sha256: hash.digest("hex"), rows: 840_000, rowsUsed: 840_000, packets: 840_000 });
    expect(answered).toBeGreaterThan(10);
    // Whoever else asked never waited for the reading, on however busy a machine.
    expect(slowestMs).toBeLessThan((performance.now() - began) / 3);

    const cookie = await cookieOf(harness.people.trainee);
    const download = (limit: number) =>
      new Promise<{ bytes: number; sha256: string }>((resolve, reject) => {
        const { port } = server.address() as AddressInfo;
        const incoming = httpRequest(
          { host: "127.0.0.1", port, path: `${path()}/${log.id}/original`, headers: { Cookie: cookie } },
          async (response) => {
            const got = createHash("sha256");
            let length = 0;
            for await (const part of response) {
              got.update(part);
              length += part.length;
              if (length >= limit) break;
            }
            resolve({ bytes: length, sha256: got.digest("hex") });
          },
        );
        incoming.on("error", reject).end();
      });
    // Somebody who has seen enough, and somebody who wants all of it.
    expect((await download(100_000)).bytes).toBeLessThan(5_000_000);
    expect(await download(Number.POSITIVE_INFINITY)).toEqual({ bytes, sha256: log.sha256 });
  }, 90_000);
});
