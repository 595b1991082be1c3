/** Where the words beside marks go, so that none covers another. */
import type { Point } from "./plan-view.ts";

export interface LabelAsk {
  at: Point;
  width: number;
  /** Half the size of the mark that it names. */
  clear: number;
}
export interface LabelPlace {
  dx: number;
  dy: number;
  anchor: "start" | "middle" | "end";
}

const HEIGHT = 14;
const CELL = 64;

interface Box {
  left: number;
  right: number;
  top: number;
  bottom: number;
}
const meet = (a: Box, b: Box) => a.left < b.right && a.right > b.left && a.top < b.bottom && a.bottom > b.top;

/** Boxes by cell, so that many marks stay quick. */
class Taken {
  readonly #cells = new Map<string, Box[]>();
  #each(box: Box, visit: (key: string) => boolean): boolean {
    for (let i = Math.floor(box.left / CELL); i <= Math.floor(box.right / CELL); i++)
      for (let j = Math.floor(box.top / CELL); j <= Math.floor(box.bottom / CELL); j++) if (visit(`${i} ${j}`)) return true;
    return false;
  }
  hits(box: Box): boolean {
    return this.#each(box, (key) => (this.#cells.get(key) ?? []).some((other) => meet(box, other)));
  }
  add(box: Box): void {
    this.#each(box, (key) => {
      const cell = this.#cells.get(key);
      if (cell) cell.push(box);
      else this.#cells.set(key, [box]);
      return false;
    });
  }
}

/** One place for each asked label, in their order; null where none is free. Marks are kept clear. */
export function placeLabels(asked: readonly (LabelAsk | null)[], marks: readonly { at: Point; half: number }[], bounds: Box): (LabelPlace | null)[] {
  const taken = new Taken();
  for (const { at, half } of marks) taken.add({ left: at.x - half, right: at.x + half, top: at.y - half, bottom: at.y + half });
  return asked.map((ask) => {
    if (!ask) return null;
    const { at, width, clear } = ask;
    const offers: LabelPlace[] = [
      { dx: 0, dy: clear + 13, anchor: "middle" },
      { dx: clear + 5, dy: 4, anchor: "start" },
      { dx: -clear - 5, dy: 4, anchor: "end" },
      { dx: 0, dy: -clear - 5, anchor: "middle" },
    ];
    for (const offer of offers) {
      const from = at.x + offer.dx - (offer.anchor === "middle" ? width / 2 : offer.anchor === "end" ? width : 0);
      const box = { left: from, right: from + width, top: at.y + offer.dy - HEIGHT + 3, bottom: at.y + offer.dy + 3 };
      if (box.left < bounds.left || box.right > bounds.right || box.top < bounds.top || box.bottom > bounds.bottom || taken.hits(box)) continue;
      taken.add(box);
      return offer;
    }
    return null;
  });
}
