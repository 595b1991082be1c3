import { render, screen, waitFor } from "@testing-library/react";
import { userEvent } from "@testing-library/user-event";
import { useState } from "react";
import { describe, expect, it } from "vitest";
import { Button } from "#src/components/ui/button.tsx";
import { Dialog } from "#src/components/ui/dialog.tsx";
import { Menu, MenuItem } from "#src/components/ui/menu.tsx";

function Bench() {
  const [open, setOpen] = useState(false);
  return (
    <>
      <Button onClick={() => setOpen(true)}>Save</Button>
      <Menu trigger={<Button>More</Button>}>
        <MenuItem onSelect={() => setOpen(true)}>Rename</MenuItem>
      </Menu>
      <Dialog open={open} onOpenChange={setOpen} title="Note">
        <textarea aria-label="Note for the others" autoFocus />
      </Dialog>
    </>
  );
}

describe("a dialog that closes", () => {
  it("gives the focus back to the button that opened it, though a field in it took the focus at once", async () => {
    render(<Bench />);
    const save = screen.getByRole("button", { name: "Save" });
    await userEvent.click(save);
    expect(document.activeElement).toBe(screen.getByRole("textbox"));
    await userEvent.keyboard("{Escape}");
    await waitFor(() => expect(document.activeElement).toBe(save));
  });

  it("gives it to the menu's button where an entry of the menu opened it", async () => {
    render(<Bench />);
    const more = screen.getByRole("button", { name: "More" });
    more.focus();
    await userEvent.keyboard("{Enter}");
    await userEvent.click(await screen.findByRole("menuitem", { name: "Rename" }));
    await screen.findByRole("textbox");
    await userEvent.keyboard("{Escape}");
    await waitFor(() => expect(document.activeElement).toBe(more));
  });
});
