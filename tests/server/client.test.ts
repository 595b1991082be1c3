import { mkdir, mkdtemp, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import express from "express";
import supertest from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { builtClient, builtPolicy, securityHeaders } from "#server/http/client.ts";

let directory: string;
let site: ReturnType<typeof supertest>;
beforeAll(async () => {
  directory = await mkdtemp(join(tmpdir(), "holdfast-client-"));
  await mkdir(join(directory, "assets"));
  await writeFile(join(directory, "assets/main-1a2b3c.js"), "export {};");
  await writeFile(join(directory, "mark.svg"), "<svg xmlns='http://www.w3.org/2000/svg'/>");
  await writeFile(
    join(directory, "index.html"),
    '<!doctype html><script>theme()</script><script type="module" src="/assets/main-1a2b3c.js"></script>',
  );
  const app = express();
  app.use(securityHeaders(builtPolicy(directory)));
  app.use(builtClient(directory));
  site = supertest(app);
});
afterAll(() => rm(directory, { recursive: true }));

describe("the built client", () => {
  it.each(["/", "/scenarios", "/teams/1/scenarios/2?tab=losses", "/no/such/page"])(
    "answers %s with the page, never from an old copy",
    async (path) => {
      const response = await site.get(path).expect(200).expect("Content-Type", /html/);
      expect(response.text).toContain("/assets/main-1a2b3c.js");
      expect(response.headers["cache-control"]).toBe("no-cache");
    },
  );

  it("lets browsers keep hashed assets for a year", async () => {
    const response = await site.get("/assets/main-1a2b3c.js").expect(200);
    expect(response.headers["cache-control"]).toBe("public, max-age=31536000, immutable");
  });

  it("has no page in place of an asset that is gone", async () => {
    await site.get("/assets/main-old.js").expect(404);
  });

  it("serves nothing from outside its directory", async () => {
    const response = await site.get("/assets/..%2f..%2f..%2fetc%2fpasswd");
    expect(response.text).not.toContain("root:");
    expect(response.status).toBeGreaterThanOrEqual(400);
  });

  it("lets only own scripts and workers run, and the page's one inline script by its hash", async () => {
    const policy = (await site.get("/")).headers["content-security-policy"];
    expect(policy).toContain("default-src 'self'");
    expect(policy).toContain("worker-src 'self' blob:");
    expect(policy).toMatch(/script-src 'self' 'sha256-[A-Za-z0-9+/=]{44}'(;|$)/);
    expect(policy).not.toContain("unsafe-eval");
    expect(policy).not.toContain("upgrade-insecure-requests");
    expect(policy).toContain("frame-ancestors 'none'");
  });

  it("says what to do when it has not been built", async () => {
    const app = express();
    app.use(builtClient(join(directory, "nothing")));
    const response = await supertest(app).get("/scenarios").expect(503);
    expect(response.text).toContain("npm start");
  });
});
