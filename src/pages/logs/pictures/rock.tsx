interface Band {
  x: number;
  y: number;
  width: number;
  height: number;
}

/** What lies outside of a limit. */
export const hatchedBands = (bands: readonly Band[]) =>
  bands.map(({ x, y, width, height }) => height > 0.5 && <rect key={y} x={x} y={y} width={width} height={height} className="rock" />);
