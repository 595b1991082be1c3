/** The few icons of the product, on a grid of 16: they stand for acts, never for things. */
const PATHS = {
  import: <path d="M8 2v7.6M4.8 6.6L8 9.8l3.2-3.2M2.4 12.8h11.2" />,
  export: <path d="M8 9.8V2.2M4.8 5.2L8 2l3.2 3.2M2.4 12.8h11.2" />,
  plus: <path d="M8 2.6v10.8M2.6 8h10.8" />,
  minus: <path d="M2.6 8h10.8" />,
  search: (
    <>
      <circle cx="7" cy="7" r="4.6" />
      <path d="M10.5 10.6L14.2 14.3" />
    </>
  ),
  down: <path d="M3.5 6L8 10.4 12.5 6" />,
  up: <path d="M3.5 10.4L8 6l4.5 4.4" />,
  right: <path d="M6 3.5L10.4 8 6 12.5" />,
  left: <path d="M10.4 3.5L6 8l4.4 4.5" />,
  more: <path d="M3.4 8h.01M8 8h.01M12.6 8h.01" strokeWidth="2.4" />,
  menu: <path d="M2 4h12M2 8h12M2 12h12" />,
  undo: <path d="M5.8 2.8L2.6 6l3.2 3.2M2.8 6h6.6c2.5 0 4 1.7 4 3.7s-1.6 3.6-4 3.6H6.6" />,
  redo: <path d="M10.2 2.8L13.4 6l-3.2 3.2M13.2 6H6.6c-2.5 0-4 1.7-4 3.7s1.6 3.6 4 3.6h2.8" />,
  check: <path d="M3 8.6l3.3 3.3L13 4.6" />,
  cross: <path d="M3.4 3.4l9.2 9.2M12.6 3.4l-9.2 9.2" />,
  arrow: <path d="M2.4 8h11M9.6 4.2L13.4 8l-3.8 3.8" />,
  play: <path d="M4.6 2.8v10.4L13 8z" />,
  pause: <path d="M5.2 3v10M10.8 3v10" />,
  "step-back": <path d="M12.5 3v10L5 8zM3.2 3v10" />,
  "step-on": <path d="M3.5 3v10L11 8zM12.8 3v10" />,
  "to-start": <path d="M3.6 3v10M12.6 3v10L6 8z" />,
  theme: (
    <>
      <circle cx="8" cy="8" r="5.8" />
      <path d="M8 2.2a5.8 5.8 0 0 1 0 11.6z" className="icf" />
    </>
  ),
} as const;

export type IconName = keyof typeof PATHS;

export function Icon({ name, size = 16, className = "" }: { name: IconName; size?: number; className?: string }) {
  return (
    <svg className={`ic ${className}`} width={size} height={size} viewBox="0 0 16 16" aria-hidden="true">
      {PATHS[name]}
    </svg>
  );
}

export function Logo({ size = 24 }: { size?: number }) {
  return (
    <svg className="logo" width={size} height={size} viewBox="0 0 24 24" aria-hidden="true">
      <path d="M12.2 1.8c-3.4 2.6 2.8 4.8-.2 8.6" />
      <path d="M12 10.4C10.6 13.6 4.4 12.6 3.6 19.4M12 10.4c-.8 4-4.2 4.4-4.3 9M12 10.4v9M12 10.4c.8 4 4.2 4.4 4.3 9M12 10.4c1.4 3.2 7.6 2.2 8.4 9" />
      <path d="M1.6 21.4h20.8" />
    </svg>
  );
}
