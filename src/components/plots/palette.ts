/** Colours for canvases, from the design tokens: of the theme on the page, or always light for files. */
import tokens from "#src/styles/tokens.css?raw";

const NAMES = {
  panel: "--panel",
  ink: "--ink",
  ink2: "--ink-2",
  ink3: "--ink-3",
  line: "--line",
  shade: "--shade",
  tide: "--tide",
  second: "--second",
  sand: "--sand",
  coral: "--coral",
  coralWash: "--coral-wash",
  tape: "--tape",
  rockStrength: "--rock-strength",
  face: "--face",
} as const;

export type Palette = Record<keyof typeof NAMES, string>;

function read(value: (name: string) => string): Palette {
  const palette = {} as Palette;
  for (const [key, name] of Object.entries(NAMES)) palette[key as keyof Palette] = value(name);
  return palette;
}

/** As the element sees them: a `stale` ancestor has taken the colours out. */
export function paletteOf(element: Element): Palette {
  const style = getComputedStyle(element);
  return read((name) => style.getPropertyValue(name).trim());
}

/** The first block of the tokens is the light theme. */
export const lightPalette = (css = tokens): Palette => read((name) => css.match(new RegExp(`${name}:\\s*([^;]+);`))?.[1]?.trim() ?? "");

/** Calls back when the theme turns: by the page's own switch or by the system. */
export function onThemeChange(callback: () => void): () => void {
  const observer = new MutationObserver(callback);
  observer.observe(document.documentElement, { attributes: true, attributeFilter: ["data-theme", "class"] });
  const system = matchMedia("(prefers-color-scheme: dark)");
  system.addEventListener("change", callback);
  return () => {
    observer.disconnect();
    system.removeEventListener("change", callback);
  };
}

let fonts: Promise<unknown> | null = null;
/** Canvas text is drawn once; it has to wait for the faces, Greek letters included, that no other text on the page may have asked for. */
export function pictureFonts(face: string): Promise<unknown> {
  // Where there are no fonts to wait for (tests), there is nothing to wait for.
  const load = (font: string) => ["Angle 0", "θ"].map((text) => document.fonts?.load(`${font} ${face}`, text));
  fonts ??= Promise.all(["400 12px", "600 13px", "italic 400 13px"].flatMap(load)).catch(() => undefined);
  return fonts;
}
