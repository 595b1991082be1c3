/** Widths of words in the pictures' own face. */
import { useLayoutEffect, useState } from "react";

export type Measure = (text: string, font: "axis" | "strong") => number;

const FONTS = { axis: "400 12px", strong: "600 13px" } as const;
let ruler: CanvasRenderingContext2D | null | undefined;

/** A canvas context that nothing is drawn on; null where there is no canvas. */
export function rulerContext(): CanvasRenderingContext2D | null {
  if (ruler === undefined) ruler = typeof CanvasRenderingContext2D === "undefined" ? null : document.createElement("canvas").getContext("2d");
  return ruler;
}

let face: string | undefined;
/** The face of the page; it never changes while the page is shown. */
export function pageFace(): string {
  face ||= getComputedStyle(document.documentElement).getPropertyValue("--face").trim();
  return face || "sans-serif";
}

/** A guess of six pixels a letter where nothing can be measured. */
export function measureWith(face: string): Measure {
  const ctx = rulerContext();
  return (text, font) => {
    const plain = text.replaceAll("\u2060", "");
    if (!ctx) return plain.length * 6;
    ctx.font = `${FONTS[font]} ${face}`;
    return ctx.measureText(plain).width;
  };
}

/** Inner width of an element, CSS pixels; 0 before it is known. */
export function useWidth(host: React.RefObject<HTMLElement | null>): number {
  const [width, setWidth] = useState(0);
  useLayoutEffect(() => {
    const element = host.current;
    if (!element) return;
    const read = () => setWidth(Math.floor(element.clientWidth));
    read();
    if (typeof ResizeObserver === "undefined") return;
    const observer = new ResizeObserver(read);
    observer.observe(element);
    return () => observer.disconnect();
  }, [host]);
  return width;
}
