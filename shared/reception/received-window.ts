/** What became of the last packets of a link, while late rows may still change it; older ones are kept as run lengths. */

/** A row may come this many numbers late. */
export const WINDOW = 1024;
const MASK = WINDOW - 1;

export const UNSEEN = 0;
export const RECEIVED = 1;
export const LOST = 2;
export type Fate = typeof UNSEEN | typeof RECEIVED | typeof LOST;

export class ReceivedWindow {
  /** Delivered, lost, delivered, ... */
  readonly runs: number[] = [0];
  private ring = new Uint8Array(WINDOW);
  private head = 0;
  /** How many of the newest numbers lie in the ring. */
  private expected = 0;

  /** Moves on by `step` numbers, the last of which has this fate; those between were not seen. */
  advance(step: number, fate: Fate): void {
    if (step >= WINDOW) {
      this.flush();
      this.append(true, step - WINDOW);
      this.ring.fill(UNSEEN);
      this.expected = WINDOW;
    } else {
      for (let i = 0; i < step; i++) {
        this.head = (this.head + 1) & MASK;
        if (this.expected === WINDOW) this.append(this.ring[this.head] !== RECEIVED, 1);
        else this.expected++;
        this.ring[this.head] = UNSEEN;
      }
    }
    this.ring[this.head] = fate;
  }

  /** back: how many numbers before the last one. */
  fate(back: number): Fate {
    return back < this.expected ? (this.ring[(this.head - back) & MASK] as Fate) : UNSEEN;
  }

  /** Is that number before the first one? */
  isBefore(back: number): boolean {
    return back >= this.expected;
  }

  /** Fills in a late one; a number before the first makes the trace begin earlier. */
  set(back: number, fate: Fate): void {
    while (this.expected <= back) {
      this.ring[(this.head - this.expected) & MASK] = UNSEEN;
      this.expected++;
    }
    this.ring[(this.head - back) & MASK] = fate;
  }

  /** Everything becomes final; the next advance begins a new stretch. */
  flush(): void {
    for (let back = this.expected - 1; back >= 0; back--) this.append(this.ring[(this.head - back) & MASK] !== RECEIVED, 1);
    this.expected = 0;
  }

  private append(lost: boolean, count: number): void {
    if (count === 0) return;
    const { runs } = this;
    if ((runs.length % 2 === 0) === lost) runs[runs.length - 1] += count;
    else runs.push(count);
  }
}
