/** The time base: ten-minute cells aligned to the UTC epoch, named by their index. */

export const CELL_MS = 600_000;
export const CELLS_PER_HOUR = 6;
export const CELLS_PER_DAY = 144;

/** Index of the cell that contains an instant (epoch ms). */
export function cellOf(ms: number): number {
  return Math.floor(ms / CELL_MS);
}

/** First instant of a cell, epoch ms. */
export function cellStart(cell: number): number {
  return cell * CELL_MS;
}

/** UTC hour of day of a cell, 0–23. */
export function utcHourOf(cell: number): number {
  return Math.floor(cell / CELLS_PER_HOUR) % 24;
}
