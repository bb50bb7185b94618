/** Pages of rows as they were fetched, the least recently seen dropped first. */
export type Row = Record<string, number | string | null>;

export const PAGE_ROWS = 200;
const MOST_PAGES = 40;

export class RowPages {
  private readonly pages = new Map<number, Row[]>();

  /** A row by its position in the ordering, or null where its page is not here. */
  row(index: number): Row | null {
    return this.pages.get(Math.floor(index / PAGE_ROWS))?.[index % PAGE_ROWS] ?? null;
  }

  put(page: number, rows: Row[]): void {
    this.pages.delete(page);
    this.pages.set(page, rows);
    for (const oldest of this.pages.keys()) {
      if (this.pages.size <= MOST_PAGES) break;
      this.pages.delete(oldest);
    }
  }

  /** Pages of a span of rows, each marked as seen; those to be fetched come back. */
  missing(from: number, to: number): number[] {
    const lacking: number[] = [];
    for (let page = Math.floor(Math.max(0, from) / PAGE_ROWS); page * PAGE_ROWS < to; page++) {
      const rows = this.pages.get(page);
      if (rows) this.put(page, rows);
      else lacking.push(page);
    }
    return lacking;
  }
}
