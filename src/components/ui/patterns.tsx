/** Textures of the pictures, defined once for the whole page; tokens.css refers to them by id. */
export function Patterns() {
  return (
    <svg width="0" height="0" className="absolute" aria-hidden="true" focusable="false">
      <defs>
        <pattern id="rock" width="6" height="6" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <line x1="0" y1="0" x2="0" y2="6" className="p-rock" />
        </pattern>
        <pattern id="rockG" width="6" height="6" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <line x1="0" y1="0" x2="0" y2="6" className="p-rockg" />
        </pattern>
        <pattern id="rockS" width="4" height="4" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <line x1="0" y1="0" x2="0" y2="4" className="p-rock" />
        </pattern>
        <pattern id="stip" width="7" height="7" patternUnits="userSpaceOnUse">
          <circle cx="1.75" cy="1.75" r=".85" className="p-stip" />
          <circle cx="5.25" cy="5.25" r=".85" className="p-stip" />
        </pattern>
        <pattern id="stipS" width="4" height="4" patternUnits="userSpaceOnUse">
          <circle cx="1" cy="1" r=".7" className="p-stip" />
          <circle cx="3" cy="3" r=".7" className="p-stip" />
        </pattern>
        <pattern id="comp" width="3" height="3" patternUnits="userSpaceOnUse">
          <line x1="1" y1="0" x2="1" y2="3" className="p-comp" />
        </pattern>
        <pattern id="quay" width="7" height="7" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <path d="M0 0V7M0 0H7" className="p-quay" />
        </pattern>
        <pattern id="rack" width="5" height="5" patternUnits="userSpaceOnUse">
          <path d="M0 0L5 5M5 0L0 5" className="p-rack" />
        </pattern>
        <pattern id="foul" width="8" height="8" patternUnits="userSpaceOnUse">
          <path d="M1 2h2M2 1v2M5 6h2M6 5v2" className="p-foul" />
        </pattern>
      </defs>
    </svg>
  );
}
