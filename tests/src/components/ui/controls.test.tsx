import { render, screen } from "@testing-library/react";
import { userEvent } from "@testing-library/user-event";
import { useState } from "react";
import { describe, expect, it, vi } from "vitest";
import { Button } from "#src/components/ui/button.tsx";
import { Choice } from "#src/components/ui/choice.tsx";
import { Field } from "#src/components/ui/field.tsx";
import { Mark } from "#src/components/ui/mark.tsx";
import { Section } from "#src/components/ui/section.tsx";

describe("a button that is not possible now", () => {
  it("can be reached by key, says why, and does nothing", async () => {
    const press = vi.fn();
    render(
      <Button impossible="Put the marked field right first" onClick={press}>
        Save revision 16
      </Button>,
    );
    const button = screen.getByRole("button", { name: "Save revision 16" });
    await userEvent.tab();
    expect(document.activeElement).toBe(button);
    await userEvent.keyboard("{Enter}");
    expect(press).not.toHaveBeenCalled();
    const why = document.getElementById(button.getAttribute("aria-describedby") ?? "");
    expect(why?.textContent).toBe("Put the marked field right first");
  });
  it("submits no form either", async () => {
    const submit = vi.fn((event: { preventDefault: () => void }) => event.preventDefault());
    render(
      <form onSubmit={submit}>
        <Button type="submit" impossible="Nothing has changed">
          Save
        </Button>
      </form>,
    );
    await userEvent.click(screen.getByRole("button", { name: "Save" }));
    expect(submit).not.toHaveBeenCalled();
  });
});

describe("a field", () => {
  const problem = { title: "Plan of 40 commands: at most 12 fit.", text: "Enter 1 to 12." };
  it("is named by label and symbol, and described by its range", () => {
    render(<Field label="Cart mass" symbol="M" value="1.2" onText={() => {}} unit="kg" range="0.05 to 50" />);
    const box = screen.getByRole("textbox", { name: "Cart mass M" });
    const described = (box.getAttribute("aria-describedby") ?? "").split(" ").map((id) => document.getElementById(id)?.textContent);
    expect(described).toEqual(["Permitted: 0.05 to 50"]);
  });
  it("keeps a bad value and explains it where it stands", () => {
    render(<Field label="Plan" value="40" onText={() => {}} unit="steps" range="1 to 12" problem={problem} />);
    const box = screen.getByRole("textbox", { name: "Plan" }) as HTMLInputElement;
    expect([box.value, box.getAttribute("aria-invalid")]).toEqual(["40", "true"]);
    expect(screen.getByRole("alert").textContent).toBe("Plan of 40 commands: at most 12 fit. Enter 1 to 12.");
  });
});

const WORDS = (["hold", "zero", "plan"] as const).map((word) => ({ value: word, word }));
function Held() {
  const [value, setValue] = useState<"hold" | "zero" | "plan">("hold");
  return <Choice label="Command lost" options={WORDS} value={value} onChoose={setValue} />;
}

describe("a choice", () => {
  it("is a group of radio buttons of which one is chosen", async () => {
    render(<Held />);
    expect(screen.getByRole("radiogroup", { name: "Command lost" })).toBeDefined();
    await userEvent.click(screen.getByRole("radio", { name: "zero" }));
    expect(screen.getAllByRole<HTMLInputElement>("radio").map(({ checked }) => checked)).toEqual([false, true, false]);
  });
});

describe("a section", () => {
  it("says what it comes to while it is closed, and holds its content only when open", () => {
    const { rerender } = render(
      <Section title="Losses" sum="10 %, each by itself" open={false}>
        inside
      </Section>,
    );
    expect(screen.getByText("10 %, each by itself")).toBeDefined();
    expect(screen.queryByText("inside")).toBeNull();
    rerender(
      <Section title="Losses" sum="10 %, each by itself" open>
        inside
      </Section>,
    );
    expect(screen.getByText("inside")).toBeDefined();
  });
});

describe("a mark", () => {
  it("has a name of its own unless the word stands beside it", () => {
    render(
      <>
        <Mark state="crosses" />
        <Mark state="holds" quiet />
      </>,
    );
    expect(screen.getAllByRole("img").map((mark) => mark.getAttribute("aria-label"))).toEqual(["Crosses"]);
  });
});
