import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { z } from "zod";
import { type ApiError, request } from "#src/api/client.ts";
import { connection } from "#src/api/connection.ts";

/** What a browser's request does, step by step at the test's word. */
class SteppedRequest extends EventTarget {
  static newest: SteppedRequest;
  upload = new EventTarget();
  status = 0;
  responseText = "";
  asked = "";
  type = "";
  sent: unknown = null;
  aborted = false;
  constructor() {
    super();
    SteppedRequest.newest = this;
  }
  open(method: string, path: string) {
    this.asked = `${method} ${path}`;
  }
  setRequestHeader(name: string, value: string) {
    if (name === "Content-Type") this.type = value;
  }
  getResponseHeader() {
    return "application/json";
  }
  send(body: unknown) {
    this.sent = body;
  }
  abort() {
    this.aborted = true;
    this.dispatchEvent(new Event("abort"));
  }
  answer(status: number, value: unknown) {
    this.status = status;
    this.responseText = JSON.stringify(value);
    this.dispatchEvent(new Event("load"));
  }
}

beforeEach(() => vi.stubGlobal("XMLHttpRequest", SteppedRequest));
afterEach(() => vi.unstubAllGlobals());

const schema = z.strictObject({ id: z.string() });
const file = new Blob(["packed"]);
const send = (more: { signal?: AbortSignal; onProgress?: (sent: number, total: number) => void } = {}) => {
  const { signal, onProgress } = more;
  const answer = request("/api/logs", schema, { method: "POST", upload: { file, type: "application/gzip", onProgress }, signal });
  return { answer, asked: SteppedRequest.newest };
};

describe("a file that is sent", () => {
  it("goes as it is, tells how much of it went, and its answer is read by the schema", async () => {
    const told: number[][] = [];
    const { answer, asked } = send({ onProgress: (sent, total) => told.push([sent, total]) });
    asked.upload.dispatchEvent(Object.assign(new Event("progress"), { loaded: 3, total: 6 }));
    asked.answer(201, { id: "a" });
    await expect(answer).resolves.toEqual({ id: "a" });
    expect([asked.asked, asked.type, asked.sent]).toEqual(["POST /api/logs", "application/gzip", file]);
    expect(told).toEqual([[3, 6]]);
  });
  it("meets a refusal as any request does", async () => {
    const { answer, asked } = send();
    asked.answer(413, { error: { code: "too-large", message: "At most 64 MB.", size: { bytes: 70, permittedBytes: 64 } } });
    const error = await answer.catch((caught: ApiError) => caught);
    expect(error).toMatchObject({ code: "too-large", status: 413, message: "At most 64 MB." });
  });
  it("is no lost connection when it is stopped", async () => {
    const controller = new AbortController();
    const { answer, asked } = send({ signal: controller.signal });
    const stopped = new Error("stopped");
    controller.abort(stopped);
    await expect(answer).rejects.toBe(stopped);
    expect(asked.aborted).toBe(true);
    expect(connection.state).toBe("up");
  });
  it("that nobody answers says that the server cannot be reached", async () => {
    // The watch over the connection asks at once whether it is back.
    vi.stubGlobal("fetch", async () => new Response('{"ok":true,"database":true}', { headers: { "Content-Type": "application/json" } }));
    const { answer, asked } = send();
    asked.dispatchEvent(new Event("error"));
    await expect(answer).rejects.toMatchObject({ code: "unreachable" });
    await vi.waitFor(() => expect(connection.state).toBe("up"), { timeout: 4000 });
  });
});
