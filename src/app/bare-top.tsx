import { IconButton } from "#src/components/ui/button.tsx";
import { Logo } from "#src/components/ui/icon.tsx";
import { turnTheme } from "./theme.ts";

/** The top line where nobody is signed in. */
export const BareTop = () => (
  <div className="topwrap">
    <header className="top">
      <span className="brand">
        <Logo />
        Holdfast
      </span>
      <div className="who">
        <IconButton kind="bare" icon="theme" label="Turn light and dark" title="Light and dark" onClick={turnTheme} />
      </div>
    </header>
  </div>
);
