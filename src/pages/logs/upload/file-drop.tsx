import { type DragEvent, type ReactNode, useRef, useState } from "react";
import { Button } from "#src/components/ui/button.tsx";

interface FileDropProps {
  onFile: (file: File) => void;
  /** Something stands here already: the button offers another. */
  again?: boolean;
  children: ReactNode;
}

/** Chosen by a button, or dropped anywhere on the strip. */
export function FileDrop({ onFile, again = false, children }: FileDropProps) {
  const chooser = useRef<HTMLInputElement>(null);
  const [over, setOver] = useState(false);
  const drop = (event: DragEvent) => {
    event.preventDefault();
    setOver(false);
    const file = event.dataTransfer.files[0];
    if (file) onFile(file);
  };
  return (
    // biome-ignore lint/a11y/noStaticElementInteractions: dropping is a second way beside the button
    <div
      className={`drop ${again ? "" : "lg-drop"}`}
      data-over={over}
      onDragOver={(event) => {
        event.preventDefault();
        setOver(true);
      }}
      onDragLeave={() => setOver(false)}
      onDrop={drop}
    >
      <input
        ref={chooser}
        type="file"
        className="vh"
        tabIndex={-1}
        accept=".csv,.txt,.tsv,.log,.dat,text/csv,text/plain,text/tab-separated-values"
        aria-label="File of a reception log"
        onChange={(event) => {
          const file = event.target.files?.[0];
          if (file) onFile(file);
          // The same file chosen again, changed in the meantime, is read again.
          event.target.value = "";
        }}
      />
      <Button kind={again ? "outline" : "go"} onClick={() => chooser.current?.click()}>
        {again ? "Choose another file" : "Choose a file"}
      </Button>
      {children}
    </div>
  );
}
