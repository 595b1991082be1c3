import { sql } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { activity, floorPictures } from "#server/db/schema.ts";
import { readImage } from "#server/features/pictures/image.ts";
import { errorBodySchema } from "#shared/api/errors.ts";
import { deletePictureResponse, MAX_PICTURE_BYTES, pictureListResponse, uploadPictureResponse } from "#shared/api/pictures.ts";
import { scenarioResponse } from "#shared/api/scenarios.ts";
import { floorSchema } from "#shared/scenario/floor-schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { bodyOf, createScenario, type Harness, type Person, SLOW, scenarioNamed, startHarness } from "./harness.ts";
import { jpeg, png } from "./pictures.ts";

let harness: Harness;
beforeAll(async () => {
  harness = await startHarness();
}, SLOW);
afterAll(() => harness?.close());

const path = (team = harness.team) => `/api/teams/${team.id}/pictures`;
const upload = (bytes: Buffer, name = "hall.png", type = "image/png", by: Person = harness.people.engineer, team = harness.team) =>
  by.agent.post(path(team)).query({ name }).set("Content-Type", type).send(bytes);
const uploaded = async (bytes: Buffer, name?: string) => bodyOf(uploadPictureResponse, await upload(bytes, name).expect(201)).picture;
const errorOf = (response: { body: unknown }) => bodyOf(errorBodySchema, response).error;
/** A floor of its own under the scenario's name, with the picture below it. */
const onPicture = (id: string) => (scenario: Scenario) => {
  scenario.floor = floorSchema.parse({ widthM: 40, depthM: 20, picture: { id, metresPerPixel: 0.05 } });
};

describe("a picture's own bytes", () => {
  it.each([
    ["a PNG", png(640, 480), { type: "image/png", widthPx: 640, heightPx: 480 }],
    ["a JPEG", jpeg(640, 480), { type: "image/jpeg", widthPx: 640, heightPx: 480 }],
    ["a progressive JPEG", jpeg(3000, 9999, { frame: 0xc2 }), { type: "image/jpeg", widthPx: 3000, heightPx: 9999 }],
    ["a photo that is shown as it was taken", jpeg(640, 480, { orientation: 3 }), { type: "image/jpeg", widthPx: 640, heightPx: 480 }],
    ["a photo that was taken upright", jpeg(640, 480, { orientation: 6 }), { type: "image/jpeg", widthPx: 480, heightPx: 640 }],
    [
      "the same by a camera that counts from the other end",
      jpeg(640, 480, { orientation: 8, little: true }),
      { type: "image/jpeg", widthPx: 480, heightPx: 640 },
    ],
    ["the largest", png(10_000, 10_000), { type: "image/png", widthPx: 10_000, heightPx: 10_000 }],
  ])("say what it is and how large: %s", (_what, bytes, image) => {
    expect(readImage(bytes)).toEqual({ ok: true, image });
  });

  it.each([
    ["nothing", Buffer.alloc(0), "empty"],
    ["text", Buffer.from("x,y\n1,2\n"), "is neither"],
    ["a GIF", Buffer.from("GIF89a\x10\0\x10\0", "latin1"), "a GIF. Save it as a PNG"],
    ["an SVG", Buffer.from('<?xml version="1.0"?><svg xmlns="http://www.w3.org/2000/svg" onload="alert(1)"/>'), "an SVG"],
    ["a page", Buffer.from("<!doctype html><script>alert(1)</script>"), "is neither"],
    ["a PDF", Buffer.from("%PDF-1.7"), "a PDF"],
    ["a WebP", Buffer.from("RIFF\x10\0\0\0WEBPVP8 ", "latin1"), "a WebP"],
    ["a HEIC", Buffer.from("\0\0\0\x18ftypheic", "latin1"), "a HEIC"],
    ["a PNG that ends in the middle", png(640, 480).subarray(0, -20), "not whole"],
    ["a PNG that is its first bytes only", png(640, 480).subarray(0, 12), "not whole"],
    ["a PNG without a size", png(0, 480), "0 by 480 pixels"],
    ["a PNG that is too wide", png(10_001, 20), "10001 by 20 pixels; permitted up to 10000"],
    [
      "a PNG with a chunk as long as numbers go",
      Buffer.concat([png(8, 8).subarray(0, 33), Buffer.from([0xff, 0xff, 0xff, 0xff, 0x49, 0x44, 0x41, 0x54])]),
      "not whole",
    ],
    ["a JPEG that is too high", jpeg(20, 20_000), "20 by 20000 pixels"],
    ["a JPEG that ends before its size", jpeg(640, 480).subarray(0, 24), "not whole"],
    ["a JPEG that ends in the middle", jpeg(640, 480).subarray(0, -2), "not whole"],
    ["a JPEG that no browser shows", jpeg(640, 480, { frame: 0xc3 }), "browsers do not show"],
    ["a JPEG with a segment of no length", Buffer.from([0xff, 0xd8, 0xff, 0xe0, 0, 0, 0, 0, 0, 0]), "not whole"],
    ["a JPEG that loses its way", Buffer.from([0xff, 0xd8, 0xff, 0xe0, 0, 4, 0, 0, 0x12, 0x34, 0x56, 0x78]), "damaged"],
  ])("say what is wrong: %s", (_what, bytes, message) => {
    const read = readImage(bytes);
    expect(read.ok).toBe(false);
    expect(!read.ok && read.message).toContain(message);
  });

  it("never make the reader fail, wherever they are cut or changed", () => {
    for (const whole of [png(64, 48), jpeg(64, 48, { orientation: 6 })]) {
      for (let cut = 0; cut < whole.length; cut++) expect(readImage(whole.subarray(0, cut)).ok).toBe(false);
      for (let at = 0; at < whole.length; at++) {
        const changed = Buffer.from(whole);
        changed[at] ^= 0xff;
        readImage(changed);
      }
    }
  });
});

describe("uploading a picture", () => {
  it("keeps it under its own type, size and author, whatever the request says of it", async () => {
    const bytes = jpeg(800, 600);
    const { picture, existed } = bodyOf(uploadPictureResponse, await upload(bytes, "  Halle 2 – Süd.png ", "image/png").expect(201));
    expect(existed).toBe(false);
    expect(picture).toMatchObject({
      name: "Halle 2 – Süd.png",
      type: "image/jpeg",
      widthPx: 800,
      heightPx: 600,
      bytes: bytes.length,
      scenarios: 0,
      mayEdit: true,
    });
    expect(picture.author.name).toBe("The engineer");
    const response = await harness.people.trainee.agent.get(`${path()}/${picture.id}`).buffer(true).expect(200);
    expect(Buffer.compare(response.body, bytes)).toBe(0);
    expect(response.headers).toMatchObject({
      "content-type": "image/jpeg",
      "x-content-type-options": "nosniff",
      "cache-control": "private, max-age=31536000, immutable",
      "content-security-policy": "default-src 'none'; sandbox",
    });
    expect(response.headers["content-disposition"]).toBe(
      "inline; filename=\"Halle 2 _ Sud.png\"; filename*=UTF-8''Halle%202%20%E2%80%93%20S%C3%BCd.png",
    );
  });

  it("keeps the same file once in a team, however often and at once it comes, and once more in another team", async () => {
    const bytes = png(123, 45);
    const answers = await Promise.all(Array.from({ length: 4 }, (_, i) => upload(bytes, `copy ${i}.png`)));
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 200, 200, 201]);
    expect(new Set(answers.map(({ body }) => body.picture.id)).size).toBe(1);
    const elsewhere = await upload(bytes, "ours.png", "image/png", harness.stranger, harness.otherTeam).expect(201);
    expect(elsewhere.body.picture.id).not.toBe(answers[0].body.picture.id);
  });

  it.each([
    ["a type that is none of its own", png(4, 4), "hall.png", "image/svg+xml", 415, "type-not-taken"],
    ["no type", png(4, 4), "hall.png", "", 415, "type-not-taken"],
    ["an SVG by any other name", Buffer.from("<svg xmlns='http://www.w3.org/2000/svg'/>"), "hall.png", "image/png", 422, "picture-invalid"],
    ["an empty body", Buffer.alloc(0), "hall.png", "image/png", 422, "picture-invalid"],
    ["no name", png(4, 4), "", "image/png", 400, "request-invalid"],
    ["a name that is too long", png(4, 4), "n".repeat(121), "image/png", 400, "request-invalid"],
    ["a name that cannot be stored", png(4, 4), "zero\u0000", "image/png", 400, "request-invalid"],
  ])("is refused with a reason: %s", async (_what, bytes, name, type, status, code) => {
    const { db } = harness.connection;
    const before = await db.$count(floorPictures);
    expect(errorOf(await upload(bytes, name, type).expect(status)).code).toBe(code);
    expect(await db.$count(floorPictures)).toBe(before);
  });

  it("takes the largest file and refuses one byte more with both sizes", async () => {
    const most = png(50, 50, { padding: MAX_PICTURE_BYTES - png(50, 50).length - 12 });
    expect(most.length).toBe(MAX_PICTURE_BYTES);
    await upload(most).expect(201);
    const error = errorOf(await upload(Buffer.concat([most, Buffer.alloc(1)])).expect(413));
    expect(error).toMatchObject({ code: "too-large", size: { bytes: MAX_PICTURE_BYTES + 1, permittedBytes: MAX_PICTURE_BYTES } });
    expect(error.message).toContain("10.0 MB");
  });
});

describe("the list of pictures", () => {
  it("comes by pages, newest first, and of the own team only", async () => {
    await uploaded(png(31, 1), "first.png");
    await uploaded(png(31, 2), "second.png");
    const list = bodyOf(pictureListResponse, await harness.people.trainee.agent.get(path()).query({ pageSize: 2 }).expect(200));
    expect(list.items.map(({ name }) => name)).toEqual(["second.png", "first.png"]);
    expect(list.items[0].mayEdit).toBe(false);
    const { items } = bodyOf(pictureListResponse, await harness.stranger.agent.get(path(harness.otherTeam)).query({ pageSize: 100 }).expect(200));
    expect(items.map(({ name }) => name)).not.toContain("first.png");
  });
});

describe("a picture under a floor", () => {
  it("is counted, stays while a revision shows it, and can go when the scenario is gone", async () => {
    const { agent } = harness.people.engineer;
    const { id } = await uploaded(png(41, 1), "bay 3.png");
    const scenario = await createScenario(harness, scenarioNamed("Bay 3", onPicture(id)));
    const scenarios = `/api/teams/${harness.team.id}/scenarios`;
    // No later revision shows it: the first one still does.
    await agent
      .post(`${scenarios}/${scenario.id}/revisions`)
      .send({ baseRevision: 1, scenario: scenarioNamed("Bay 3, no picture") })
      .expect(201);
    const { error } = bodyOf(errorBodySchema, await agent.delete(`${path()}/${id}`).expect(409));
    expect(error).toMatchObject({ code: "in-use", uses: [{ id: scenario.id, name: "Bay 3, no picture", archived: false, revisions: [1] }] });
    expect(error.message).toContain("“Bay 3, no picture” (revision 1)");
    expect(error.message).toContain("Drafts that nobody has saved are not known here");
    const { items } = bodyOf(pictureListResponse, await agent.get(path()).query({ pageSize: 100 }));
    expect(items.find((picture) => picture.id === id)?.scenarios).toBe(1);

    await agent.patch(`${scenarios}/${scenario.id}`).send({ archived: true }).expect(200);
    expect(errorOf(await agent.delete(`${path()}/${id}`).expect(409)).uses?.[0].archived).toBe(true);
    await agent.delete(`${scenarios}/${scenario.id}`).expect(200);
    bodyOf(deletePictureResponse, await agent.delete(`${path()}/${id}`).expect(200));
    await agent.get(`${path()}/${id}`).expect(404);
    await agent.delete(`${path()}/${id}`).expect(404);
    const record = await harness.connection.db.select().from(activity).where(sql`${activity.subjectId} = ${id}`).orderBy(activity.position);
    expect(record.map(({ what }) => what)).toEqual(["picture-uploaded", "picture-deletion-refused", "picture-deletion-refused", "picture-deleted"]);
  });

  it("goes with duplicates of the scenario", async () => {
    const { id } = await uploaded(png(41, 2));
    const scenario = await createScenario(harness, scenarioNamed("Original", onPicture(id)));
    const copy = bodyOf(
      scenarioResponse,
      await harness.people.engineer.agent.post(`/api/teams/${harness.team.id}/scenarios/${scenario.id}/duplicate`).send({}).expect(201),
    );
    expect(copy.latest.scenario.floor?.picture?.id).toBe(id);
    expect(errorOf(await harness.people.engineer.agent.delete(`${path()}/${id}`).expect(409)).uses?.map(({ name }) => name)).toEqual([
      "Copy of Original",
      "Original",
    ]);
  });

  it("has to be one of the team's: another one is refused at its place, and nothing is saved", async () => {
    const { picture } = bodyOf(
      uploadPictureResponse,
      await upload(png(41, 3), "ours.png", "image/png", harness.stranger, harness.otherTeam).expect(201),
    );
    for (const id of [picture.id, "0b7c6a52-2f0e-4d3e-9a51-3f0d2a7d9f11"]) {
      const error = errorOf(
        await harness.people.engineer.agent
          .post(`/api/teams/${harness.team.id}/scenarios`)
          .send({ scenario: scenarioNamed("Borrowed", onPicture(id)) })
          .expect(422),
      );
      expect(error.issues?.map(({ code, path: at }) => [code, at])).toEqual([["unknown-picture", "floor.picture.id"]]);
    }
  });

  it("cannot be deleted or changed in the database either, nor named by a revision of another team", async () => {
    const { db, pool } = harness.connection;
    const { id } = await uploaded(png(41, 4));
    const { id: scenarioId } = await createScenario(harness, scenarioNamed("Guarded", onPicture(id)));
    await expect(pool.query("delete from floor_pictures where id = $1", [id])).rejects.toThrow("revision_pictures_keep_picture");
    await expect(pool.query("update floor_pictures set name = 'x'")).rejects.toThrow("never changes");
    await expect(pool.query("delete from revision_pictures")).rejects.toThrow("is deleted only together with");
    const { picture } = bodyOf(
      uploadPictureResponse,
      await upload(png(41, 5), "ours.png", "image/png", harness.stranger, harness.otherTeam).expect(201),
    );
    const forged = JSON.stringify({ floor: { picture: { id: picture.id } } });
    const insert = `insert into revisions (scenario_id, number, name, note, scenario, unrun, author_id) select scenario_id, 2, name, '', $2, unrun, author_id from revisions where scenario_id = $1`;
    await expect(pool.query(insert, [scenarioId, forged])).rejects.toThrow("is not of this team");
    expect(await db.$count(floorPictures, sql`${floorPictures.id} = ${id}`)).toBe(1);
  });

  it("is either saved or deleted when both happen at the same moment", async () => {
    const { agent } = harness.people.engineer;
    for (let i = 0; i < 6; i++) {
      const { id } = await uploaded(png(51, 1 + i));
      const saving = agent.post(`/api/teams/${harness.team.id}/scenarios`).send({ scenario: scenarioNamed(`Contested ${i}`, onPicture(id)) });
      const [saved, deleted] = await Promise.all([saving, harness.people.reviewer.agent.delete(`${path()}/${id}`)]);
      expect([
        [201, 409],
        [422, 200],
      ]).toContainEqual([saved.status, deleted.status]);
    }
  });
});
