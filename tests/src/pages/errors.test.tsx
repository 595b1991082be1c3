import { render, screen } from "@testing-library/react";
import { createMemoryRouter, RouterProvider } from "react-router-dom";
import { describe, expect, it, vi } from "vitest";
import { Crashed } from "#src/pages/errors/crashed.tsx";

const Nothing = () => null;

function show(error: unknown) {
  const said = vi.spyOn(console, "error").mockImplementation(() => {});
  const loader = () => {
    throw error;
  };
  const router = createMemoryRouter([{ path: "/", loader, Component: Nothing, ErrorBoundary: Crashed, HydrateFallback: Nothing }]);
  render(<RouterProvider router={router} />);
  return said;
}

describe("a page that broke", () => {
  it("says that unsaved changes are kept, offers a way on, and keeps the cause for the developers", async () => {
    show(new Error("cannot read plant of undefined"));
    expect(await screen.findByRole("heading", { name: "This page has stopped" })).toBeDefined();
    expect(screen.getByText(/Unsaved changes of a scenario are kept in this browser/)).toBeDefined();
    expect(screen.getByRole("button", { name: "Load the page again" })).toBeDefined();
    expect(screen.getByRole("button", { name: "To the scenarios" })).toBeDefined();
    expect(screen.getByText("Error: cannot read plant of undefined")).toBeDefined();
  });
  it("for want of a part of it says that instead", async () => {
    show(new TypeError("Failed to fetch dynamically imported module: /assets/run-page-abc.js"));
    expect(await screen.findByRole("heading", { name: "A part of this page could not be loaded" })).toBeDefined();
    expect(screen.queryByText(/What to tell the developers/)).toBeNull();
  });
});
