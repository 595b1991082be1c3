import { fireEvent, screen, waitFor, within } from "@testing-library/react";
import { beforeEach, describe, expect, it, vi } from "vitest";
import { fakeServer, json, refusal } from "../../helpers/fake-server.ts";
import { renderApp } from "../../helpers/render-app.tsx";
import { sessionOf, TEAM } from "../../helpers/team-data.ts";
import { LOG_ID, listOfLogs, logOf, TEXT } from "./made-log.ts";
import "#src/pages/logs/upload-page.tsx";
import "#src/pages/logs/log-page.tsx";

vi.mock("#src/workers/log-client.ts", () => import("./in-process-log-client.ts"));
/** What was sent: fetch in place of the request that tells its progress. */
const sent: Blob[] = [];
vi.mock("#src/api/upload.ts", () => ({
  sendFile: (path: string, method: string, { file }: { file: Blob }) => {
    sent.push(file);
    return fetch(path, { method });
  },
}));

const server = fakeServer();
const CREATE = `POST /api/teams/${TEAM.id}/logs`;
const SCENARIOS = `GET /api/teams/${TEAM.id}/scenarios`;

beforeEach(() => {
  localStorage.clear();
  sent.length = 0;
});

async function openUpload() {
  server.on("GET /api/session", () => json(sessionOf("engineer")));
  const app = renderApp(`/teams/${TEAM.id}/logs/new`);
  await screen.findByRole("heading", { level: 1, name: "Upload a log" });
  return app;
}
const give = (app: ReturnType<typeof renderApp>, text: string, name = "line-west.csv") =>
  app.user.upload(screen.getByLabelText("File of a reception log"), new File([text], name, { type: "text/csv" }));
const role = (column: string) => screen.getByLabelText(`What ${column} is`) as HTMLSelectElement;
/** What is said to be wrong. */
const problem = () => document.querySelector(".err")?.textContent ?? "";
const sum = () => document.querySelector(".lg-sum")?.textContent?.replaceAll("\u2009", " ").replaceAll("\u2060", "") ?? "";

describe("a chosen file", () => {
  it("shows its first rows by line, with the columns guessed, and what the whole of it holds", async () => {
    const app = await openUpload();
    await give(app, TEXT);
    await waitFor(() => expect(sum()).toBe("2 links, 800 packets, 70 lost (8.75 %)."));
    expect(["seq", "time_s", "from", "to", "ok"].map((name) => role(name).value)).toEqual(["sequence", "time", "source", "receiver", "received"]);
    const rows = screen.getByRole("region", { name: "First rows of the file" });
    expect(within(rows).getByRole("row", { name: /^2 0 0\.000 S1 C1 1/ })).toBeDefined();
    expect(screen.getByRole("row", { name: /^S1 > C1 400 60/ })).toBeDefined();
    expect(screen.getByText(/No row was wrong/)).toBeDefined();
  });
  it("is read anew when a column gets another role, and the role's column before gives it up", async () => {
    const app = await openUpload();
    await give(app, TEXT);
    await waitFor(() => expect(sum()).toMatch(/2 links/));
    await app.user.selectOptions(role("from"), "not used");
    await waitFor(() => expect(sum()).toMatch(/2 links, 800 packets/));
    await app.user.selectOptions(role("to"), "source");
    await waitFor(() => expect(screen.getByRole("row", { name: /^A1 400 10/ })).toBeDefined());
    await app.user.selectOptions(role("ok"), "source");
    expect(role("to").value).toBe("unused");
  });
  it("says at the columns that nothing tells what was lost, and cannot be saved then", async () => {
    const app = await openUpload();
    await give(app, TEXT);
    await waitFor(() => expect(sum()).toMatch(/2 links/));
    await app.user.selectOptions(role("seq"), "not used");
    await app.user.selectOptions(role("ok"), "not used");
    expect(problem()).toMatch(/Neither a packet number nor a received column is chosen/);
    expect(role("ok").getAttribute("aria-invalid")).toBe("true");
    expect(screen.getByRole("button", { name: "Save the log" }).title).toBe("Say first what the columns are.");
  });
  it("is reported row by row where it is wrong, and the report can be opened to its end", async () => {
    const app = await openUpload();
    const bad = Array.from({ length: 5 }, (_, k) => `n${k},9,S1,C1,1`).join("\n");
    await give(app, `${TEXT}\n${bad}\n399,9,C1,A1,0`);
    const kind = await screen.findByText("5 rows that cannot be read");
    const entry = kind.closest("li") as HTMLElement;
    expect(within(entry).getAllByRole("listitem")).toHaveLength(3);
    expect(entry.textContent).toContain("line 802");
    expect(entry.textContent).toContain('"n0" is no packet number');
    await app.user.click(within(entry).getByRole("button", { name: "Show all 5" }));
    expect(within(entry).getAllByRole("listitem")).toHaveLength(5);
    expect(screen.getByText("1 duplicate")).toBeDefined();
    expect(screen.getByText(/806 rows, 801 used, 5 left out/)).toBeDefined();
  });
  it("may be divided and dated as other countries do", async () => {
    const app = await openUpload();
    await give(app, "seq;t_ms;ok\n0;0,5;1\n1;20,5;0\n2;40,5;1\n3;60,5;1");
    await waitFor(() => expect(sum()).toMatch(/^1 link, 4 packets, 1 lost/));
    expect((screen.getByLabelText("Divided by") as HTMLSelectElement).value).toBe(";");
    expect((screen.getByLabelText("Unit of t_ms") as HTMLSelectElement).value).toBe("ms");
    expect(screen.getByRole("row", { name: /^all packets/ }).textContent).toContain("20\u2009\u2060ms");
  });
  it("that is none is refused in words", async () => {
    const app = await openUpload();
    await give(app, "a\0b\0c");
    await waitFor(() => expect(problem()).toMatch(/“line-west\.csv” cannot be read\..*It is not a text/));
    await give(app, "");
    expect((await screen.findByText(/It is empty/)).textContent).toBeDefined();
  });
  it("above the largest size is not read at all", async () => {
    await openUpload();
    const large = new File(["x"], "large.csv");
    Object.defineProperty(large, "size", { value: 300_000_000 });
    fireEvent.drop(screen.getByText(/or drop it here/), { dataTransfer: { files: [large] } });
    await waitFor(() => expect(problem()).toMatch(/This file has 300\.0\s\u2060MB; at most 256\.0\s\u2060MB are taken/));
    expect(screen.queryByRole("region", { name: "First rows of the file" })).toBeNull();
  });
});

describe("the columns of last time", () => {
  it("are taken for a file with the same names, said to be, and can be undone", async () => {
    const first = await openUpload();
    await give(first, TEXT);
    await waitFor(() => expect(sum()).toMatch(/2 links/));
    await first.user.selectOptions(role("from"), "not used");
    first.unmount();

    const second = await openUpload();
    await give(second, TEXT, "next-day.csv");
    expect(await screen.findByText(/as last time with these columns/)).toBeDefined();
    expect(role("from").value).toBe("unused");
    await second.user.click(screen.getByRole("button", { name: "Guess anew" }));
    expect(role("from").value).toBe("source");
    expect(screen.getByText(/guessed from names and values/)).toBeDefined();
  });
});

describe("saving", () => {
  async function readyToSave() {
    const app = await openUpload();
    server.on(SCENARIOS, () => json({ ...listOfLogs([]), archivedTotal: 0, owners: [], plants: [] }));
    await give(app, TEXT);
    await waitFor(() => expect(sum()).toMatch(/2 links/));
    return app;
  }
  it("sends the file packed, with the mapping and a name of the file's, and opens the log", async () => {
    const app = await readyToSave();
    server.on(CREATE, () => json({ log: logOf(TEXT), existed: false }, 201));
    expect((screen.getByLabelText("Name") as HTMLInputElement).value).toBe("Line-west");
    await app.user.click(screen.getByRole("button", { name: "Save the log" }));
    await waitFor(() => expect(app.address()).toBe(`/teams/${TEAM.id}/logs/${LOG_ID}`));
    const query = server.askedOf(CREATE)[0]?.query as URLSearchParams;
    expect(query.get("name")).toBe("Line-west");
    expect(JSON.parse(query.get("mapping") ?? "")).toMatchObject({ number: { column: "seq" }, received: "ok" });
    const packed = sent[0] as Blob;
    expect([...new Uint8Array(await packed.arrayBuffer()).slice(0, 2)]).toEqual([0x1f, 0x8b]);
    expect(packed.size).toBeLessThan(TEXT.length / 2);
    expect(screen.getByText(/the server read 2 links in it, the same as this page/)).toBeDefined();
  });
  it("says where the server read the file otherwise, and stays", async () => {
    const app = await readyToSave();
    const there = logOf(TEXT);
    const [link, ...others] = there.linkTraces;
    server.on(CREATE, () => json({ log: { ...there, linkTraces: [{ ...link, lost: 61 }, ...others] }, existed: false }, 201));
    await app.user.click(screen.getByRole("button", { name: "Save the log" }));
    expect((await screen.findByText(/the server read the file otherwise/)).textContent).toContain(
      "S1 > C1: 60 of 400 lost here, 61 of 400 at the server",
    );
    expect(screen.getByRole("link", { name: "Open the log" }).getAttribute("href")).toBe(`/teams/${TEAM.id}/logs/${LOG_ID}`);
  });
  it("keeps file, columns and name when the server refuses it", async () => {
    const app = await readyToSave();
    server.on(CREATE, () => refusal("too-many-attempts", 429, "Too many uploads at once: try again in 60 s."));
    await app.user.clear(screen.getByLabelText("Name"));
    await app.user.type(screen.getByLabelText("Name"), "Hall 2, night");
    await app.user.click(screen.getByRole("button", { name: "Save the log" }));
    await waitFor(() => expect(problem()).toMatch(/not saved\..*try again in 60 s\. The file, its columns and the name are still here/));
    expect((screen.getByLabelText("Name") as HTMLInputElement).value).toBe("Hall 2, night");
    expect(sum()).toMatch(/2 links/);
  });
  it("asks for a name", async () => {
    const app = await readyToSave();
    await app.user.clear(screen.getByLabelText("Name"));
    await app.user.click(screen.getByRole("button", { name: "Save the log" }));
    expect(problem()).toMatch(/A log needs a name\. Permitted: 1 to 120 characters/);
    expect(server.askedOf(CREATE)).toEqual([]);
  });
});
