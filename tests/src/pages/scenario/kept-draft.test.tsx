import { screen } from "@testing-library/react";
import { beforeEach, describe, expect, it, vi } from "vitest";
import { setAt } from "#src/pages/scenario/model/json-path.ts";
import { fakeServer } from "../../helpers/fake-server.ts";
import { renderApp } from "../../helpers/render-app.tsx";
import { TEAM } from "../../helpers/team-data.ts";
import { field, MASS, openScenario, typeInto } from "./open-scenario.tsx";

vi.mock("#src/workers/pool.ts", () => import("./in-process-engine.ts"));
vi.mock("#src/components/drawings/run-bench.tsx", () => import("./run-bench-stub.tsx"));

const server = fakeServer();
beforeEach(() => localStorage.clear());

describe("a draft", () => {
  it("is back after the page was closed, and can be discarded and brought back", async () => {
    const first = await openScenario(server);
    await typeInto(first.user, MASS, "1.7");
    first.unmount();
    const again = renderApp(`/teams/${TEAM.id}/scenarios/${first.one.id}`);
    expect(await screen.findByText(/Your unsaved changes of \d\d:\d\d are back/)).toBeDefined();
    expect(field(MASS).value).toBe("1.7");
    await again.user.click(screen.getByRole("button", { name: "Discard them" }));
    expect(field(MASS).value).toBe("1.2");
    await again.user.keyboard("{Control>}z{/Control}");
    expect(field(MASS).value).toBe("1.7");
  });

  it("belongs to one person", async () => {
    const first = await openScenario(server);
    await typeInto(first.user, MASS, "1.7");
    first.unmount();
    const [key] = Object.keys(localStorage).filter((name) => name.startsWith("holdfast.draft."));
    expect(key).toContain(first.one.id);
    localStorage.setItem(key.replace(/.{12}$/, "000000000000"), localStorage.getItem(key) ?? "");
    localStorage.removeItem(key);
    renderApp(`/teams/${TEAM.id}/scenarios/${first.one.id}`);
    await screen.findByText(/run in/);
    expect(field(MASS).value).toBe("1.2");
  });

  it("follows another tab, and says so", async () => {
    const { user } = await openScenario(server);
    await typeInto(user, MASS, "1.7");
    const [key] = Object.keys(localStorage).filter((name) => name.startsWith("holdfast.draft."));
    const entry = JSON.parse(localStorage.getItem(key) ?? "");
    const other = { ...entry, tab: "other", turn: 1, draft: { json: setAt(entry.draft.json, ["loops", 0, "plant", "rodMassKg"], 0.5), typed: {} } };
    localStorage.setItem(key, JSON.stringify(other));
    window.dispatchEvent(new StorageEvent("storage", { key, newValue: JSON.stringify(other) }));
    expect(await screen.findByText(/was edited in another tab/)).toBeDefined();
    expect([field(MASS).value, field("loops[0].plant.rodMassKg").value]).toEqual(["1.7", "0.5"]);
  });

  it("does not overwrite what another tab wrote unheard, but asks which of the two goes on", async () => {
    const { user } = await openScenario(server);
    await typeInto(user, MASS, "1.7");
    const [key] = Object.keys(localStorage).filter((name) => name.startsWith("holdfast.draft."));
    const entry = JSON.parse(localStorage.getItem(key) ?? "");
    const other = JSON.stringify({
      ...entry,
      tab: "other",
      turn: 9,
      draft: { json: setAt(entry.draft.json, ["loops", 0, "plant", "rodMassKg"], 0.5), typed: {} },
    });
    localStorage.setItem(key, other);
    await user.type(field(MASS), "5");
    expect(await screen.findByText(/this one did not hear of it/)).toBeDefined();
    expect(localStorage.getItem(key)).toBe(other);
    await user.click(screen.getByRole("button", { name: "What the other tab has" }));
    expect([field(MASS).value, field("loops[0].plant.rodMassKg").value]).toEqual(["1.7", "0.5"]);
  });

  it("that the browser refuses to keep is told of, and holds back the closing of the page", async () => {
    const { user } = await openScenario(server);
    const setItem = vi.spyOn(Storage.prototype, "setItem").mockImplementation(() => {
      throw new DOMException("full", "QuotaExceededError");
    });
    await typeInto(user, MASS, "1.7");
    setItem.mockRestore();
    expect(await screen.findByText(/does not keep the draft/)).toBeDefined();
    const closing = new Event("beforeunload", { cancelable: true });
    window.dispatchEvent(closing);
    expect(closing.defaultPrevented).toBe(true);
  });
});
