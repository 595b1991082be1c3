/** Which part of a plan is seen: from metres to the pixels of its picture and back, and how zooming and panning change that. */

/** Size of the plan, m. */
export interface PlanSize {
  widthM: number;
  depthM: number;
}

/** Inner side of the neatline, px. */
export interface PlanFrame {
  left: number;
  top: number;
  width: number;
  height: number;
}

export interface PlanView {
  /** Pixels per metre. */
  scale: number;
  /** What lies at the frame's upper left corner, m. */
  xM: number;
  yM: number;
}

export interface Point {
  x: number;
  y: number;
}
export interface Spot {
  xM: number;
  yM: number;
}

/** Neatline outside, labels below. */
const BORDER = 22;
const LABELS = 18;
const LEAST_HEIGHT = 170;
const MOST_ZOOM = 60;

export const pictureHeight = (frame: PlanFrame): number => frame.height + 2 * BORDER + LABELS;

/** As wide as its place, as high as the plan asks for; very long and very high plans get air around them. */
export function frameFor(widthPx: number, mostHeightPx: number, { widthM, depthM }: PlanSize): PlanFrame {
  const width = Math.max(120, widthPx - 2 * BORDER);
  const natural = (width * depthM) / widthM;
  return { left: BORDER, top: BORDER, width, height: Math.round(Math.min(Math.max(natural, LEAST_HEIGHT), Math.max(LEAST_HEIGHT, mostHeightPx))) };
}

const wholeScale = (frame: PlanFrame, size: PlanSize): number => Math.min(frame.width / size.widthM, frame.height / size.depthM);

export function wholeView(frame: PlanFrame, size: PlanSize): PlanView {
  const scale = wholeScale(frame, size);
  return { scale, xM: (size.widthM - frame.width / scale) / 2, yM: (size.depthM - frame.height / scale) / 2 };
}

/** Keeps the plan in sight: along each side it fills the frame, or lies in its middle. */
function confined(view: PlanView, frame: PlanFrame, size: PlanSize): PlanView {
  const along = (at: number, seen: number, whole: number) => (seen >= whole ? (whole - seen) / 2 : Math.min(Math.max(at, 0), whole - seen));
  return {
    scale: view.scale,
    xM: along(view.xM, frame.width / view.scale, size.widthM),
    yM: along(view.yM, frame.height / view.scale, size.depthM),
  };
}

/** Zooms by a factor; what lies at the pixel stays there. */
export function zoomed(view: PlanView, frame: PlanFrame, size: PlanSize, factor: number, at: Point): PlanView {
  const whole = wholeScale(frame, size);
  const scale = Math.min(Math.max(view.scale * factor, whole), whole * MOST_ZOOM);
  const spot = toSpot(view, frame, at);
  return confined({ scale, xM: spot.xM - (at.x - frame.left) / scale, yM: spot.yM - (at.y - frame.top) / scale }, frame, size);
}

/** Moves what is seen with the hand. */
export function panned(view: PlanView, frame: PlanFrame, size: PlanSize, dx: number, dy: number): PlanView {
  return confined({ ...view, xM: view.xM - dx / view.scale, yM: view.yM - dy / view.scale }, frame, size);
}

/** The same middle and zoom after frame or plan changed. */
export function refitted(view: PlanView, before: PlanFrame, frame: PlanFrame, size: PlanSize, wasWhole: boolean): PlanView {
  if (wasWhole) return wholeView(frame, size);
  const middle = { xM: view.xM + before.width / view.scale / 2, yM: view.yM + before.height / view.scale / 2 };
  const scale = Math.max((view.scale * frame.width) / before.width, wholeScale(frame, size));
  return confined({ scale, xM: middle.xM - frame.width / scale / 2, yM: middle.yM - frame.height / scale / 2 }, frame, size);
}

export const isWhole = (view: PlanView, frame: PlanFrame, size: PlanSize): boolean => view.scale <= wholeScale(frame, size) * 1.001;

export const toPoint = (view: PlanView, frame: PlanFrame, { xM, yM }: Spot): Point => ({
  x: frame.left + (xM - view.xM) * view.scale,
  y: frame.top + (yM - view.yM) * view.scale,
});
export const toSpot = (view: PlanView, frame: PlanFrame, { x, y }: Point): Spot => ({
  xM: view.xM + (x - frame.left) / view.scale,
  yM: view.yM + (y - frame.top) / view.scale,
});

/** The view that has the spot inside, changed as little as possible. */
export function withInSight(view: PlanView, frame: PlanFrame, size: PlanSize, spot: Spot, airPx = 40): PlanView {
  const { x, y } = toPoint(view, frame, spot);
  const air = Math.min(airPx, frame.width / 3, frame.height / 3);
  const dx = x < frame.left + air ? frame.left + air - x : x > frame.left + frame.width - air ? frame.left + frame.width - air - x : 0;
  const dy = y < frame.top + air ? frame.top + air - y : y > frame.top + frame.height - air ? frame.top + frame.height - air - y : 0;
  return dx === 0 && dy === 0 ? view : panned(view, frame, size, dx, dy);
}

const STEP_M = 0.1;
/** On the grid of 0.1 m, inside the plan. */
export function snapped({ xM, yM }: Spot, { widthM, depthM }: PlanSize): Spot {
  const on = (value: number, most: number) => Number((Math.round(Math.min(Math.max(value, 0), most) / STEP_M) * STEP_M).toFixed(1));
  return { xM: Math.min(on(xM, widthM), widthM), yM: Math.min(on(yM, depthM), depthM) };
}
