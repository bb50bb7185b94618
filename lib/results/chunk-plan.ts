/** Chunk borders are multiples of this, because warm starts along axes restart there (lib/chemistry/types.ts). */
export const ROW_ALIGNMENT = 256;
/** The first chunks of a job are small, so that its first rows show early. */
const FIRST_CHUNKS = 4;
const FIRST_CHUNK_ROWS = 512;
const MAX_CHUNK_ROWS = 8192;
const MAX_BLOCK_BYTES = 4 * 1024 * 1024;
/** Bytes a row takes beside its values: status 1, message 4, warnings 4, iterations 4, residual 8. */
const FIXED_ROW_BYTES = 21;
/** Room for the header, the padding and the usual size of the text table. */
const OVERHEAD_BYTES = 64 * 1024;

export interface PlannedChunk { index: number; firstRow: number; rowCount: number }

/**
 * Cuts a job into chunks. Borders depend on the two counts alone, never on who solves the job, so a rerun stores the
 * same bytes: four chunks of 512 rows, then chunks of at most 8,192 rows and 4 MiB.
 */
export function planChunks(rowCount: number, valueColumnCount: number): PlannedChunk[] {
  const rowBytes = FIXED_ROW_BYTES + 8 * valueColumnCount;
  const rowsThatFit = Math.floor((MAX_BLOCK_BYTES - OVERHEAD_BYTES) / rowBytes);
  const largest = Math.max(ROW_ALIGNMENT, Math.min(MAX_CHUNK_ROWS, rowsThatFit - (rowsThatFit % ROW_ALIGNMENT)));
  const chunks: PlannedChunk[] = [];
  for (let firstRow = 0; firstRow < rowCount;) {
    const size = chunks.length < FIRST_CHUNKS ? Math.min(FIRST_CHUNK_ROWS, largest) : largest;
    const count = Math.min(size, rowCount - firstRow);
    chunks.push({ index: chunks.length, firstRow, rowCount: count });
    firstRow += count;
  }
  return chunks;
}
