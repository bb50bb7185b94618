export interface Cell { row: number; column: number }
export interface Extent { rows: number; columns: number; /** Rows of a screenful. */ page: number }
interface Pressed { key: string; ctrlKey: boolean; metaKey: boolean; altKey: boolean }

/** The cell a key leads to by the usual rules of a grid, or null for keys that are not the grid's. */
export function moveCell(pressed: Pressed, from: Cell | null, extent: Extent): Cell | null {
  if (extent.rows === 0 || pressed.altKey) return null;
  const here = from ?? { row: 0, column: 0 };
  const isFar = pressed.ctrlKey || pressed.metaKey;
  const to = ((): Cell | null => {
    switch (pressed.key) {
      case "ArrowDown": return isFar ? null : { ...here, row: here.row + 1 };
      case "ArrowUp": return isFar ? null : { ...here, row: here.row - 1 };
      case "ArrowRight": return isFar ? null : { ...here, column: here.column + 1 };
      case "ArrowLeft": return isFar ? null : { ...here, column: here.column - 1 };
      case "PageDown": return { ...here, row: here.row + extent.page };
      case "PageUp": return { ...here, row: here.row - extent.page };
      case "Home": return isFar ? { row: 0, column: 0 } : { ...here, column: 0 };
      case "End": return isFar ? { row: extent.rows - 1, column: extent.columns - 1 } : { ...here, column: extent.columns - 1 };
      default: return null;
    }
  })();
  return to && { row: Math.min(extent.rows - 1, Math.max(0, to.row)), column: Math.min(extent.columns - 1, Math.max(0, to.column)) };
}

/** Where a key leads from a header: to another column's header, down to the rows, or null for keys that are not the head's. */
export function moveInHead(pressed: Pressed, column: number, columns: number): number | "rows" | null {
  if (pressed.altKey || pressed.ctrlKey || pressed.metaKey) return null;
  switch (pressed.key) {
    case "ArrowDown": return "rows";
    case "ArrowRight": return Math.min(columns - 1, column + 1);
    case "ArrowLeft": return Math.max(0, column - 1);
    case "Home": return 0;
    case "End": return columns - 1;
    default: return null;
  }
}
