import { fireEvent, screen, waitFor } from "@testing-library/react";
import { describe, expect, it, vi } from "vitest";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { fakeServer, json, refusal } from "../../helpers/fake-server.ts";
import { renderApp } from "../../helpers/render-app.tsx";
import { item, listOf, sessionOf, TEAM, whole } from "../../helpers/team-data.ts";

const server = fakeServer();
const CREATE = `POST /api/teams/${TEAM.id}/scenarios`;
const scenario = TEMPLATES[0]?.scenario;

async function openDialog() {
  server.on("GET /api/session", () => json(sessionOf("engineer")));
  server.on(`GET /api/teams/${TEAM.id}/scenarios`, () => json(listOf([item("A")])));
  const app = renderApp(`/teams/${TEAM.id}/scenarios`);
  await app.user.click(await screen.findByRole("button", { name: "Import" }));
  return app;
}
const paste = (text: string) => fireEvent.change(screen.getByRole("textbox", { name: "Or paste the text" }), { target: { value: text } });
const fileNamed = (name: string, text: string) => new File([text], name, { type: "application/json" });

describe("importing a scenario", () => {
  it("cannot be done before there is something to import, and says so", async () => {
    await openDialog();
    const button = screen.getAllByRole("button", { name: "Import" }).at(-1);
    expect(button?.getAttribute("aria-disabled")).toBe("true");
    expect(button?.title).toBe("Choose a file or paste a scenario first");
  });
  it("lists every field that is wrong with its value and permitted range", async () => {
    await openDialog();
    paste(JSON.stringify({ ...scenario, round: { periodS: 0 }, run: { durationS: 99_999 } }));
    expect(screen.getByText("2 fields have to be put right.")).toBeDefined();
    const list = screen.getByRole("list", { name: "What has to be put right" });
    expect(list.textContent).toContain("round.periodS");
    expect(list.textContent).toContain("0 s; permitted 0.001 to 10 s");
    expect(list.textContent).toContain("99999 s; permitted 0.01 to 3600 s");
  });
  it("points at the place where a file stops being JSON", async () => {
    const { user } = await openDialog();
    await user.upload(screen.getByLabelText("File of a scenario"), fileNamed("broken.json", '{\n "name": }\n'));
    expect((await screen.findByText(/line 2, column 10/)).textContent).toBeDefined();
    expect(screen.getByText("broken.json")).toBeDefined();
  });
  it("refuses a file above the largest size without reading it", async () => {
    const { user } = await openDialog();
    const large = fileNamed("large.json", "");
    Object.defineProperty(large, "size", { value: 10_400_000 });
    const read = vi.spyOn(large, "text");
    await user.upload(screen.getByLabelText("File of a scenario"), large);
    expect((await screen.findByText(/at most 5\.0\s\u2060MB are taken/)).textContent).toBe(
      "This has 10.4\u2009\u2060MB; at most 5.0\u2009\u2060MB are taken.",
    );
    expect(read).not.toHaveBeenCalled();
  });
  it("sends what was read, and opens the new scenario", async () => {
    const app = await openDialog();
    const made = whole(item("Pendulum on cart"));
    server.on(CREATE, () => json(made, 201));
    fireEvent.drop(screen.getByText("or drop it here"), { dataTransfer: { files: [fileNamed("rig.json", JSON.stringify(scenario))] } });
    await app.user.click(await screen.findByRole("button", { name: "Import “Pendulum on cart”" }));
    await waitFor(() => expect(app.address()).toBe(`/teams/${TEAM.id}/scenarios/${made.id}`));
    expect(server.askedOf(CREATE)[0]?.body).toEqual({ scenario, note: "Imported from rig.json" });
  });
  it("keeps the text when the server refuses it, and shows the server's issues", async () => {
    const { user } = await openDialog();
    const issues = [{ code: "out-of-range", path: "loops[0].plant.rodMassKg", message: "Rod mass is 0 kg; permitted 0.001 to 1e5 kg." }];
    server.on(CREATE, () => refusal("scenario-invalid", 422, "The scenario has 1 issue.", { issues }));
    paste(JSON.stringify(scenario));
    await user.click(screen.getByRole("button", { name: "Import “Pendulum on cart”" }));
    expect(await screen.findByText(/Rod mass is 0 kg; permitted/)).toBeDefined();
    expect((screen.getByRole("textbox", { name: "Or paste the text" }) as HTMLTextAreaElement).value).toBe(JSON.stringify(scenario));
  });
});
