import type { Ribbon } from '#shared/contract/overview';
import { CELL_MS } from '#shared/cure/grid';

const CELLS_KEPT = 145;

/**
 * Lays newer cells over a ribbon at their own time and keeps the last 24 hours. Cells between the two that
 * nobody sent are gaps.
 */
export function mergedRibbon(before: Ribbon, newer: Ribbon): Ribbon {
  if (newer.celsius.length === 0) return before;
  if (before.celsius.length === 0) return newer;
  const start = Date.parse(before.from);
  const offset = Math.round((Date.parse(newer.from) - start) / CELL_MS);
  if (offset < 0 || offset > before.celsius.length + CELLS_KEPT) return newer;
  const cells = [...before.celsius];
  while (cells.length < offset) cells.push(null);
  newer.celsius.forEach((value, index) => (cells[offset + index] = value));
  const dropped = Math.max(0, cells.length - CELLS_KEPT);
  return { from: new Date(start + dropped * CELL_MS).toISOString(), celsius: cells.slice(dropped) };
}
