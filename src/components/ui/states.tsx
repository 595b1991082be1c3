/** What a view shows while it has no data: loading, empty, error with a way on. */
import { type ReactNode, useEffect, useState } from "react";

const CALM_MS = 300;

/** Says nothing for 300 ms: most answers are there by then, and nothing flashes. */
export function Loading({ what = "Loading" }: { what?: string }) {
  const [late, setLate] = useState(false);
  useEffect(() => {
    const timer = setTimeout(() => setLate(true), CALM_MS);
    return () => clearTimeout(timer);
  }, []);
  return (
    <div className="loading" role="status" aria-busy="true">
      {late ? `${what} …` : <span className="vh">{what}</span>}
    </div>
  );
}

/** A sounding over open water: something was looked for and not found. */
const Sounding = () => (
  <svg width="220" height="70" viewBox="0 0 220 70" aria-hidden="true">
    <line x1="0" y1="22" x2="220" y2="22" className="surf" />
    <path d="M0 22C40 60 70 30 110 50S180 40 220 62" className="bed" />
    <path d="M104 13h12l-6 9z" className="inkf" />
    <line x1="110" y1="16" x2="110" y2="50" className="plumb" />
    <circle cx="110" cy="50" r="3" className="inkf" />
  </svg>
);

/** A line that was cut: something that should be here is not. */
const Parted = () => (
  <svg width="220" height="70" viewBox="0 0 220 70" aria-hidden="true">
    <line x1="0" y1="22" x2="88" y2="22" className="surf" />
    <line x1="132" y1="22" x2="220" y2="22" className="surf" />
    <rect x="88" y="8" width="44" height="28" className="rockS" />
    <line x1="88" y1="8" x2="88" y2="36" className="lim" />
    <line x1="132" y1="8" x2="132" y2="36" className="lim" />
    <path d="M0 46C40 62 70 44 110 56S180 48 220 64" className="bed" />
  </svg>
);

interface Words {
  title: string;
  text?: ReactNode;
  /** Buttons: one way on, at most two. */
  children?: ReactNode;
}

export function Empty({ title, text, children, picture = <Sounding /> }: Words & { picture?: ReactNode }) {
  return (
    <div className="empty">
      {picture}
      <p className="h2">{title}</p>
      {text && <p className="second">{text}</p>}
      {children && <div className="row">{children}</div>}
    </div>
  );
}

export function ErrorView({ title, text, children, heading: Heading = "h2" }: Words & { heading?: "h1" | "h2" }) {
  return (
    <div className="empty" role="alert">
      <Parted />
      <Heading className="h2">{title}</Heading>
      {text && <p className="second">{text}</p>}
      {children && <div className="row">{children}</div>}
    </div>
  );
}
