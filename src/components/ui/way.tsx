import type { ReactNode } from "react";
import { NavLink } from "react-router-dom";

export interface WayPoint {
  to: string;
  word: string;
  count?: number;
  /** Only this exact address is the page, not those below it. */
  end?: boolean;
}

/** The pages of one thing, as words on a line that peaks under the present one. */
export function Way({ label, points, tail }: { label: string; points: readonly WayPoint[]; tail?: ReactNode }) {
  return (
    <nav className="way" aria-label={label}>
      {points.map(({ to, word, count, end }) => (
        <NavLink key={to} to={to} end={end}>
          {word}
          {count !== undefined && <span className="count"> {count}</span>}
        </NavLink>
      ))}
      {tail && <span className="tail">{tail}</span>}
    </nav>
  );
}
