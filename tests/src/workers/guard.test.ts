import { describe, expect, it } from "vitest";
import { guardWorker, WorkerBroken } from "#src/workers/guard.ts";

/** Only its errors are listened to. */
const worker = () => new EventTarget() as Worker;
const never = () => new Promise<string>(() => {});
const broken = (message: string) => Object.assign(new Event("error"), { message });

describe("calls to a worker", () => {
  it("hand on the worker's own answer", async () => {
    await expect(guardWorker(worker(), "engine").call(async () => "answer", "left open")).resolves.toBe("answer");
  });
  it("that are open when it is stopped are settled, and later ones are not sent at all", async () => {
    const guard = guardWorker(worker(), "engine");
    const open = guard.call(never, "left open");
    guard.dispose();
    await expect(open).resolves.toBe("left open");
    let sent = false;
    const later = guard.call(async () => {
      sent = true;
      return "answer";
    }, "left open");
    await expect(later).resolves.toBe("left open");
    expect(sent).toBe(false);
    expect(guard.disposed).toBe(true);
  });
  it("end when it breaks, and all later ones at once", async () => {
    const target = worker();
    const guard = guardWorker(target, "reception log");
    const open = guard.call(never, "left open");
    target.dispatchEvent(broken(""));
    await expect(open).rejects.toThrow("the reception log's worker could not start");
    await expect(guard.call(async () => "answer", "left open")).rejects.toBeInstanceOf(WorkerBroken);
  });
  it("that it answers by an error are told as broken, with what it said", async () => {
    const call = guardWorker(worker(), "engine").call(() => Promise.reject(new Error("out of memory")), "left open");
    await expect(call).rejects.toThrow("out of memory");
  });
});
