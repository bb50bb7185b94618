/**
 * Between rows and pixels. Browsers clip an element between 17 and 33 million pixels, so a long table has a scrollbar that stands for it on a
 * scale: one pixel may be many rows. Wheel and keys still move by rows.
 */
export const ROW_HEIGHT = 26;
/** Below every browser's limit. A million rows are then scaled by less than two, so that a finger still moves by rows. */
const MOST_PIXELS = 15_000_000;

export interface ScrollMap {
  /** Pixels the rows take in the scrolling box. */
  contentHeight: number;
  isScaled: boolean;
  /** Topmost row, with its fraction, at a scroll position. */
  topRowAt(scrollTop: number): number;
  scrollTopOf(topRow: number): number;
  /** Topmost row when scrolled to the end. */
  lastTopRow: number;
}

/** @param viewport pixels of the box that rows are seen in. */
export function makeScrollMap(rowCount: number, viewport: number): ScrollMap {
  const natural = rowCount * ROW_HEIGHT;
  const contentHeight = Math.min(natural, MOST_PIXELS);
  const isScaled = natural > MOST_PIXELS;
  const lastTopRow = Math.max(0, rowCount - viewport / ROW_HEIGHT);
  const range = Math.max(1, contentHeight - viewport);
  return {
    contentHeight, isScaled, lastTopRow,
    topRowAt: (scrollTop) => (isScaled ? Math.min(1, Math.max(0, scrollTop / range)) * lastTopRow : Math.min(lastTopRow, Math.max(0, scrollTop / ROW_HEIGHT))),
    scrollTopOf: (topRow) => (isScaled ? (lastTopRow === 0 ? 0 : (topRow / lastTopRow) * range) : topRow * ROW_HEIGHT),
  };
}
